#pragma once
// The user's own materials from CSV: a line for each material, or a line for each index.
#include <chromacore/material.hpp>
#include <string>
#include <string_view>
#include <vector>

#include "csv_input.hpp"

namespace chromacore::detail {

struct PlacedMaterial {
  Material material = {};
  ErrorPlace place = {};
};

// @throws Error  as `parse_catalog` does
[[nodiscard]] std::vector<PlacedMaterial> read_material_csv(std::string_view text,
                                                            const std::string& file);

}  // namespace chromacore::detail
