#pragma once
// What a catalogue holds inside, and how it finds a name.
#include <chromacore/catalog.hpp>
#include <cstdint>
#include <utility>

struct chromacore::Catalog::Contents {
  std::vector<Material> materials = {};
  std::size_t built_in = 0;  // so many at the front; the user's own follow

  // Hash of the lower-case name, and the material's place; sorted.
  std::vector<std::pair<std::uint64_t, std::size_t>> by_name = {};

  void append(Material material);  // without a check
  // Places of all whose name is this one, whatever the case, in catalogue order.
  [[nodiscard]] std::vector<std::size_t> named(std::string_view name) const;
};

namespace chromacore::detail {

// The built-in catalogue, read anew: what `Catalog::built_in` does once.
[[nodiscard]] std::shared_ptr<const Catalog::Contents> load_built_in();

}  // namespace chromacore::detail
