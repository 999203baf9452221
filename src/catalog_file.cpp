#include <algorithm>
#include <chromacore/catalog_file.hpp>
#include <chromacore/error.hpp>
#include <utility>

#include "material_csv.hpp"
#include "material_table.hpp"
#include "text.hpp"
#include "text_file.hpp"
#include "toml_input.hpp"

namespace chromacore {
namespace {

using detail::PlacedMaterial;

constexpr int format = 1;

std::vector<PlacedMaterial> read_toml(std::string_view text, const std::string& file) {
  const detail::TomlNode root = detail::parse_toml(text, file);
  const detail::TableView table(root, file);
  table.allow({"format", "name", "material"});
  if (table.integer("format") != format) {
    table.fail(ErrorCode::bad_value, "format is not 1, the only one there is", "format");
  }
  std::vector<PlacedMaterial> materials;
  for (const detail::TableView& each : table.tables("material")) {
    materials.push_back({detail::read_material_table(each), each.place()});
  }
  return materials;
}

// TOML's first line that says anything is a key with '=' or a header in brackets; a CSV header is
// neither.
bool looks_like_toml(std::string_view text) {
  text = detail::without_byte_order_mark(text);
  while (!text.empty()) {
    const std::size_t end = std::min(text.find('\n'), text.size());
    const std::string_view line = detail::trimmed(text.substr(0, end));
    if (!line.empty() && line.front() != '#') {
      return line.front() == '[' || line.find('=') != line.npos;
    }
    text.remove_prefix(std::min(end + 1, text.size()));
  }
  return false;
}

bool is_toml(std::string_view text, const std::string& file_name) {
  const std::string name = detail::lower_case(file_name);
  if (name.ends_with(".toml")) return true;
  if (name.ends_with(".csv")) return false;
  return looks_like_toml(text);
}

void check_all_different(const std::vector<PlacedMaterial>& materials) {
  std::vector<std::pair<std::string, const PlacedMaterial*>> names;
  for (const PlacedMaterial& m : materials) names.emplace_back(m.material.full_name(), &m);
  std::stable_sort(names.begin(), names.end(),
                   [](const auto& a, const auto& b) { return a.first < b.first; });
  const auto twice = std::adjacent_find(
      names.begin(), names.end(), [](const auto& a, const auto& b) { return a.first == b.first; });
  if (twice == names.end()) return;
  throw Error(ErrorCode::bad_value,
              '"' + twice->first + "\" is here twice; first in line " +
                  std::to_string(twice->second->place.line),
              std::next(twice)->second->place);
}

}  // namespace

std::vector<Material> parse_catalog(std::string_view text, const std::string& file_name) {
  const std::vector<PlacedMaterial> placed = is_toml(text, file_name)
                                                 ? read_toml(text, file_name)
                                                 : detail::read_material_csv(text, file_name);
  check_all_different(placed);
  std::vector<Material> materials;
  for (const PlacedMaterial& m : placed) materials.push_back(m.material);
  if (materials.empty()) {
    throw Error(ErrorCode::not_set, "the file has no material", {.file = file_name});
  }
  return materials;
}

std::vector<Material> read_catalog_file(const std::string& path) {
  return parse_catalog(detail::read_text_file(path), path);
}

}  // namespace chromacore
