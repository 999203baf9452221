#pragma once
#include <chromacore/material.hpp>
#include <string>
#include <string_view>

namespace chromacore::detail {

// As in files: "air", "vacuum", "unknown".
[[nodiscard]] std::string_view word(Medium medium);

// The material as a [[material]] table that `read_material_table` takes back to the same figures.
[[nodiscard]] std::string material_text(const Material& material);

}  // namespace chromacore::detail
