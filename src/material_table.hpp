#pragma once
// The one reader of a `[[material]]` table, in a train as in a catalogue file.
#include <chromacore/material.hpp>

#include "toml_input.hpp"

namespace chromacore::detail {

// Index from one of: `form` + `coefficients` + `range_um`; `lines_um` + `indices` (through the
// lines; with `fit = true` fitted); `lines_um` + `n_ref` + `v` (+ `p_ref_long`), approximate.
// @throws Error  as TableView does, and whatever `Material` refuses, at the table's line
[[nodiscard]] Material read_material_table(const TableView& table);

}  // namespace chromacore::detail
