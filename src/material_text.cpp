#include "material_text.hpp"

#include <algorithm>
#include <cmath>

#include "material_record.hpp"
#include "toml_text.hpp"

namespace chromacore::detail {
namespace {

void add_text(TomlTable& table, std::string_view key, const std::string& text) {
  if (!text.empty()) table.add(std::string(key), toml_string(text));
}

void add_texts(TomlTable& table, std::string_view key, const std::vector<std::string>& texts) {
  if (!texts.empty()) table.add(std::string(key), toml_strings(texts));
}

void add_maybe(TomlTable& table, std::string_view key, const std::optional<double>& value) {
  if (value) table.add(std::string(key), *value);
}

void add_medium(TomlTable& table, std::string_view key, Medium medium, Medium default_medium) {
  if (medium != default_medium) add_text(table, key, std::string(word(medium)));
}

bool is_list_of_points(const MaterialData& data) {
  const bool points =
      data.form == DispersionForm::through_lines || data.form == DispersionForm::table;
  return points && data.wavelength_in == Medium::air;
}

// The letter of a line at exactly this wavelength, or the number.
std::string wavelength_text(double wavelength_um) {
  const auto named = named_lines();
  const auto same = std::find_if(named.begin(), named.end(), [&](const NamedLine& line) {
    return in_um(line.wavelength) == wavelength_um;
  });
  return same == named.end() ? toml_number(wavelength_um) : toml_string(same->letter);
}

void add_range(TomlTable& table, const MaterialData& data) {
  table.add("range_um", toml_numbers({in_um(data.shortest), in_um(data.longest)}));
}

void add_points(TomlTable& table, const MaterialData& data) {
  if (data.form != DispersionForm::through_lines) {
    add_text(table, "form", std::string(to_string(data.form)));
  }
  std::vector<std::string> lines;
  std::vector<double> indices;
  for (std::size_t i = 0; i + 1 < data.coefficients.size(); i += 2) {
    lines.push_back(wavelength_text(data.coefficients[i]));
    indices.push_back(data.coefficients[i + 1]);
  }
  table.add("lines_um", toml_list(lines));
  table.add("indices", toml_numbers(indices));
  MaterialData without_range = data;
  without_range.shortest = without_range.longest = Wavelength{};
  const Material by_default(std::move(without_range));
  const bool usual =
      by_default.data().shortest == data.shortest && by_default.data().longest == data.longest;
  if (!usual) add_range(table, data);
}

void add_formula(TomlTable& table, const MaterialData& data) {
  add_text(table, "form", std::string(to_string(data.form)));
  table.add("coefficients", toml_numbers(data.coefficients));
  add_range(table, data);
}

void add_temperature(TomlTable& table, const MaterialData& data) {
  if (data.temperature != MaterialData{}.temperature) {
    table.add("temperature_C", in_celsius(data.temperature));
  }
  if (const auto& t = data.thermal) {
    table.add("thermal", toml_numbers({t->d0, t->d1, t->d2, t->e0, t->e1, t->lambda_tk_um}));
  }
  if (const auto& t = data.thermal_constant) {
    table.add("dn_dt_per_K", t->dn_dt_per_K);
    add_medium(table, "dn_dt_relative_to", t->relative_to, Medium::unknown);
  }
  add_maybe(table, "expansion_per_K", data.expansion_per_K);
  add_maybe(table, "density_kg_m3", data.density_kg_m3);
}

// A constant has neither form nor range: one line, which stands for all.
void add_constant(TomlTable& table, const Material& material) {
  table.add("lines_um", toml_numbers({1.0}));
  table.add("indices", toml_numbers({material.record().formula.index(1.0)}));
}

void add_index(TomlTable& table, const Material& material) {
  const MaterialData& data = material.data();
  if (std::isinf(in_um(data.longest))) return add_constant(table, material);
  is_list_of_points(data) ? add_points(table, data) : add_formula(table, data);
  add_medium(table, "wavelength_in", data.wavelength_in, Medium::air);
}

}  // namespace

std::string_view word(Medium medium) {
  switch (medium) {
    case Medium::air:
      return "air";
    case Medium::vacuum:
      return "vacuum";
    case Medium::unknown:
      break;
  }
  return "unknown";
}

std::string material_text(const Material& material) {
  const MaterialData& data = material.data();
  TomlTable table("[[material]]");
  add_text(table, "name", data.name);
  add_text(table, "maker", data.maker);
  add_text(table, "code", data.code);
  if (data.status != Status::unknown)
    add_text(table, "status", std::string(to_string(data.status)));
  add_index(table, material);
  add_medium(table, "index_relative_to", data.index_relative_to, Medium::air);
  add_temperature(table, data);
  add_text(table, "axis", data.axis);
  add_texts(table, "cautions", data.cautions);
  add_texts(table, "notes", data.notes);
  add_text(table, "source", data.source);
  return table.text();
}

}  // namespace chromacore::detail
