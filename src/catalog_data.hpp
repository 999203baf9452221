#pragma once
// The built-in data (src/data/*.csv, embedded) as materials.
#include <chromacore/material.hpp>
#include <vector>

namespace chromacore::detail {

// In the files' order: glasses, tables, other materials. Parsed anew at every call.
// @throws Error  internal: the embedded text is damaged
[[nodiscard]] std::vector<Material> built_in_materials();

}  // namespace chromacore::detail
