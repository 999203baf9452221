#pragma once
/// Results as JSON, one object each, as the schemas in share/chromacore/schema say.
#include <chromacore/catalog.hpp>
#include <chromacore/color.hpp>
#include <chromacore/solve.hpp>
#include <string>
#include <vector>

namespace chromacore {

/// An infinite or absent figure is null, and `why` has its reason.
/// @param catalog  says which names several makers have: those are MAKER/NAME
[[nodiscard]] std::string to_json(const Train& train, const Analysis& analysis,
                                  const Catalog& catalog = Catalog::built_in());
/// The analysis of the solved train, with `solution` beside it.
[[nodiscard]] std::string to_json(const Solution& solution,
                                  const Catalog& catalog = Catalog::built_in());
/// A list of materials with V and P over a band.
[[nodiscard]] std::string to_json(const std::vector<Material>& materials, const Band& band);

}  // namespace chromacore
