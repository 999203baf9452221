#pragma once
// One material in full, as a person reads it.
#include <chromacore/chromacore.hpp>
#include <string>

#include "table.hpp"

namespace chromacore::cli {

[[nodiscard]] std::string material_page(const Material& material, const Band& band,
                                        const Paint& paint);

}  // namespace chromacore::cli
