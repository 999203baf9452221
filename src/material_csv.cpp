#include "material_csv.hpp"

#include <algorithm>
#include <utility>

#include "material_input.hpp"
#include "text.hpp"

namespace chromacore::detail {
namespace {

constexpr std::size_t most_coefficients = 17;  // c0 to c16
constexpr std::size_t most_lines_to_go_through = 5;

// ---- a line for each material ----

std::string coefficient_column(std::size_t k) { return 'c' + std::to_string(k); }

// c0, c1, ... up to the last one that is given; those left out are 0.
std::vector<double> coefficients(const CsvTable& csv, std::size_t row) {
  std::vector<double> values;
  for (std::size_t k = 0; k < most_coefficients; ++k) {
    const auto value = csv.maybe_number(row, coefficient_column(k));
    if (!value) continue;
    values.resize(k, 0.0);
    values.push_back(*value);
  }
  return values;
}

std::vector<std::string> split(std::string_view text, char mark) {
  std::vector<std::string> parts;
  while (!text.empty()) {
    const std::size_t end = std::min(text.find(mark), text.size());
    const std::string_view part = trimmed(text.substr(0, end));
    if (!part.empty()) parts.emplace_back(part);
    text.remove_prefix(std::min(end + 1, text.size()));
  }
  return parts;
}

Line line_of(const std::string& text) {
  if (const auto um = parse_number(text)) return Line(*um * units::um);
  return Line(std::string_view(text));
}

void read_identity(const CsvTable& csv, std::size_t row, MaterialData& data) {
  data.name = csv.text(row, "name");
  data.maker = csv.text_or_empty(row, "maker");
  data.code = csv.text_or_empty(row, "code");
  data.source = csv.text_or_empty(row, "source");
  data.axis = csv.text_or_empty(row, "axis");
  if (!data.code.empty()) check_code(data.code);
  const std::string status = csv.text_or_empty(row, "status");
  if (!status.empty()) data.status = status_of(status);
  data.cautions = split(csv.text_or_empty(row, "cautions"), ';');
  data.notes = split(csv.text_or_empty(row, "notes"), ';');
}

Medium medium(const CsvTable& csv, std::size_t row, std::string_view column, Medium otherwise) {
  const std::string word = csv.text_or_empty(row, column);
  return word.empty() ? otherwise : medium_of(word);
}

void read_thermal(const CsvTable& csv, std::size_t row, MaterialData& data) {
  if (const auto t = csv.maybe_number(row, "temperature_C")) {
    data.temperature = *t * units::celsius;
  }
  const auto at = [&](std::string_view column) {
    return csv.maybe_number(row, column).value_or(0.0);
  };
  const auto dn_dt = csv.maybe_number(row, "dn_dt_per_K");
  if (csv.maybe_number(row, "D0")) {
    if (dn_dt) csv.fail(ErrorCode::bad_value, "D0 and dn_dt_per_K exclude each other", row, "D0");
    data.thermal =
        ThermalCoefficients{at("D0"), at("D1"), at("D2"), at("E0"), at("E1"), at("lambda_TK_um")};
  }
  if (dn_dt) {
    data.thermal_constant =
        ThermalConstant{*dn_dt, medium(csv, row, "dn_dt_relative_to", Medium::unknown)};
  }
  data.expansion_per_K = csv.maybe_number(row, "expansion_per_K");
  data.density_kg_m3 = csv.maybe_number(row, "density_kg_m3");
}

void read_n_v_p(const CsvTable& csv, std::size_t row, MaterialData& data) {
  NVP given;
  for (const std::string& text : split(csv.text_or_empty(row, "lines_um"), ' ')) {
    given.lines.push_back(line_of(text));
  }
  given.n_ref = csv.number(row, "n_ref");
  given.v = csv.number(row, "v");
  given.p_ref_long = csv.maybe_number(row, "p_ref_long");
  take_n_v_p(data, given);
}

void read_index(const CsvTable& csv, std::size_t row, MaterialData& data) {
  data.index_relative_to = medium(csv, row, "index_relative_to", Medium::air);
  data.wavelength_in = medium(csv, row, "wavelength_in", Medium::air);
  if (csv.text_or_empty(row, "form").empty()) return read_n_v_p(csv, row, data);
  data.form = dispersion_form(csv.text(row, "form"));
  data.coefficients = coefficients(csv, row);
  data.shortest = csv.number(row, "shortest_um") * units::um;
  data.longest = csv.number(row, "longest_um") * units::um;
}

Material material_of_row(const CsvTable& csv, std::size_t row) {
  MaterialData data;
  read_identity(csv, row, data);
  read_thermal(csv, row, data);
  read_index(csv, row, data);
  return Material(std::move(data));
}

std::vector<PlacedMaterial> read_wide(const CsvTable& csv) {
  // clang-format off
  csv.allow({"name", "maker", "code", "status", "source", "axis", "cautions", "notes", "form",
             "c0", "c1", "c2", "c3", "c4", "c5", "c6", "c7", "c8", "c9", "c10", "c11", "c12",
             "c13", "c14", "c15", "c16", "shortest_um", "longest_um", "lines_um", "n_ref", "v",
             "p_ref_long", "index_relative_to", "wavelength_in", "temperature_C", "D0", "D1",
             "D2", "E0", "E1", "lambda_TK_um", "dn_dt_per_K", "dn_dt_relative_to",
             "expansion_per_K", "density_kg_m3"});
  // clang-format on
  std::vector<PlacedMaterial> materials;
  for (std::size_t row = 0; row < csv.rows(); ++row) {
    try {
      materials.push_back({material_of_row(csv, row), csv.place(row)});
    } catch (const Error& error) {
      throw error.within(csv.place(row));
    }
  }
  return materials;
}

// ---- a line for each index ----

struct Group {
  std::string name = {};
  std::string maker = {};
  std::size_t first_row = 0;
  ListedIndices listed = {};
};

Group& group_of(std::vector<Group>& groups, const CsvTable& csv, std::size_t row) {
  const std::string name = csv.text(row, "name");
  const std::string maker = csv.text_or_empty(row, "maker");
  const auto found = std::find_if(groups.begin(), groups.end(), [&](const Group& g) {
    return g.name == name && g.maker == maker;
  });
  if (found != groups.end()) return *found;
  groups.push_back({name, maker, row, {}});
  return groups.back();
}

std::vector<Group> groups_of(const CsvTable& csv) {
  std::vector<Group> groups;
  for (std::size_t row = 0; row < csv.rows(); ++row) {
    Group& group = group_of(groups, csv, row);
    try {
      group.listed.lines.push_back(line_of(csv.text(row, "line_um")));
    } catch (const Error& error) {
      throw error.within(csv.place(row, "line_um"));
    }
    group.listed.indices.push_back(csv.number(row, "index"));
  }
  return groups;
}

Material material_of_group(const Group& group) {
  MaterialData data;
  data.name = group.name;
  data.maker = group.maker;
  if (group.listed.lines.size() > most_lines_to_go_through) {
    take_fitted(data, group.listed);
  } else {
    take_listed(data, group.listed, DispersionForm::through_lines);
  }
  return Material(std::move(data));
}

std::vector<PlacedMaterial> read_long(const CsvTable& csv) {
  csv.allow({"name", "maker", "line_um", "index"});
  std::vector<PlacedMaterial> materials;
  for (const Group& group : groups_of(csv)) {
    try {
      materials.push_back({material_of_group(group), csv.place(group.first_row)});
    } catch (const Error& error) {
      throw error.within(csv.place(group.first_row));
    }
  }
  return materials;
}

}  // namespace

std::vector<PlacedMaterial> read_material_csv(std::string_view text, const std::string& file) {
  const CsvTable csv(text, file);
  return csv.has("line_um") ? read_long(csv) : read_wide(csv);
}

}  // namespace chromacore::detail
