#pragma once
/// Catalogues: materials by name, code and maker.
#include <chromacore/material.hpp>
#include <cstddef>
#include <memory>
#include <span>
#include <string>
#include <string_view>
#include <vector>

namespace chromacore {

/// The built-in materials and the user's own. Copies are cheap; a `Material` outlives it.
class Catalog {
 public:
  Catalog();  ///< empty
  /// Glasses of seven makers, and crystals, infrared glasses, plastics and water, each with its
  /// published source. Data set: refractiveindex.info database (CC0 1.0), see `data_version`.
  ///
  /// Names: a glass as its maker writes it. A crystal's plain name ("sapphire", "Ge") is the source
  /// to be used and the ordinary ray; "sapphire (e)" the extraordinary one, "Ge (Icenogle)" another
  /// source.
  [[nodiscard]] static Catalog built_in();
  [[nodiscard]] static std::string_view data_version();

  /// Look-up by name ("N-BK7"), maker and name ("SCHOTT/F2") or six-digit code ("022291",
  /// "HOYA/517642"). Case is ignored; where two names differ only by case, the exact one wins. The
  /// user's own materials come first; "/CaF2" is the one without a maker.
  /// @throws Error  not_found, with the nearest names or the makers; ambiguous, with up to eight of
  ///                those that have it
  [[nodiscard]] Material at(std::string_view name) const;

  /// All materials in catalogue order: the built-in ones, then the user's.
  [[nodiscard]] std::span<const Material> materials() const;

  /// Adds one of the user's own.
  /// @throws Error  bad_value: a material of that maker and name is there already
  void add(const Material& material);

  /// The shortest name that `at` takes back to this material: plain, or MAKER/NAME where several
  /// makers have it.
  [[nodiscard]] std::string shortest_name(const Material& material) const;

  struct Contents;  // src/catalog.cpp

 private:
  std::shared_ptr<const Contents> contents_;
};

}  // namespace chromacore
