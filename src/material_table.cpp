#include "material_table.hpp"

#include <utility>

#include "material_input.hpp"

namespace chromacore::detail {
namespace {

// Runs `take`; what it throws without a place is at `key`.
template <class Take>
auto at_key(const TableView& table, std::string_view key, const Take& take) {
  try {
    return take();
  } catch (const Error& error) {
    throw error.within(table.place(key));
  }
}

void read_identity(const TableView& table, MaterialData& data) {
  data.name = table.text("name");
  data.maker = table.maybe_text("maker").value_or("");
  data.code = table.maybe_text("code").value_or("");
  data.source = table.maybe_text("source").value_or("");
  data.axis = table.maybe_text("axis").value_or("");
  if (!data.code.empty()) at_key(table, "code", [&] { check_code(data.code); });
  if (const auto word = table.maybe_text("status")) {
    data.status = at_key(table, "status", [&] { return status_of(*word); });
  }
  if (table.has("cautions")) data.cautions = table.texts("cautions");
  if (table.has("notes")) data.notes = table.texts("notes");
}

Medium medium(const TableView& table, std::string_view key, Medium otherwise) {
  const auto word = table.maybe_text(key);
  if (!word) return otherwise;
  return at_key(table, key, [&] { return medium_of(*word); });
}

void read_temperature(const TableView& table, MaterialData& data) {
  if (const auto t = table.maybe_number("temperature_C")) data.temperature = *t * units::celsius;
  if (table.has("thermal")) {
    const std::vector<double> c = table.numbers("thermal");
    if (c.size() != 6) {
      table.fail(ErrorCode::bad_value, "thermal needs six numbers: D0 D1 D2 E0 E1 lambda_TK",
                 "thermal");
    }
    data.thermal = ThermalCoefficients{c[0], c[1], c[2], c[3], c[4], c[5]};
  }
  if (const auto dn_dt = table.maybe_number("dn_dt_per_K")) {
    if (data.thermal) {
      table.fail(ErrorCode::bad_value, "thermal and dn_dt_per_K exclude each other", "dn_dt_per_K");
    }
    data.thermal_constant =
        ThermalConstant{*dn_dt, medium(table, "dn_dt_relative_to", Medium::unknown)};
  }
  data.expansion_per_K = table.maybe_number("expansion_per_K");
  data.density_kg_m3 = table.maybe_number("density_kg_m3");
}

void read_range(const TableView& table, MaterialData& data) {
  const std::vector<double> range = table.numbers("range_um");
  if (range.size() != 2) {
    table.fail(ErrorCode::bad_value, "range_um needs two numbers: shortest and longest",
               "range_um");
  }
  data.shortest = range[0] * units::um;
  data.longest = range[1] * units::um;
}

DispersionForm form_of(const TableView& table) {
  return at_key(table, "form", [&] { return dispersion_form(table.text("form")); });
}

void read_formula(const TableView& table, MaterialData& data) {
  data.form = form_of(table);
  data.coefficients = table.numbers("coefficients");
  data.wavelength_in = medium(table, "wavelength_in", Medium::air);
  const bool points =
      data.form == DispersionForm::table || data.form == DispersionForm::through_lines;
  if (table.has("range_um") || !points) read_range(table, data);
}

void read_listed(const TableView& table, MaterialData& data) {
  const ListedIndices listed{table.lines("lines_um"), table.numbers("indices")};
  if (table.has("range_um")) read_range(table, data);
  at_key(table, "indices", [&] {
    if (table.maybe_boolean("fit").value_or(false)) return take_fitted(data, listed);
    const bool given = table.has("form");
    take_listed(data, listed, given ? form_of(table) : DispersionForm::through_lines);
  });
}

void read_n_v_p(const TableView& table, MaterialData& data) {
  NVP given;
  if (table.has("lines_um")) given.lines = table.lines("lines_um");
  given.n_ref = table.number("n_ref");
  given.v = table.number("v");
  given.p_ref_long = table.maybe_number("p_ref_long");
  at_key(table, "n_ref", [&] { take_n_v_p(data, given); });
}

// What belongs to one way of giving the index must not stand beside another.
void refuse_beside(const TableView& table, std::string_view way,
                   std::initializer_list<std::string_view> others) {
  for (const std::string_view key : others) {
    if (!table.has(key)) continue;
    table.fail(ErrorCode::bad_value, std::string(key) + " does not go with " + std::string(way),
               key);
  }
}

void read_index(const TableView& table, MaterialData& data) {
  data.index_relative_to = medium(table, "index_relative_to", Medium::air);
  if (table.has("coefficients")) {
    refuse_beside(table, "coefficients",
                  {"lines_um", "indices", "fit", "n_ref", "v", "p_ref_long"});
    read_formula(table, data);
  } else if (table.has("indices")) {
    refuse_beside(table, "indices", {"n_ref", "v", "p_ref_long", "wavelength_in"});
    read_listed(table, data);
  } else if (table.has("n_ref")) {
    refuse_beside(table, "n_ref", {"form", "fit", "range_um", "wavelength_in"});
    read_n_v_p(table, data);
  } else {
    table.fail(ErrorCode::not_set, table.title() +
                                       " has no index; expected form and coefficients, lines_um "
                                       "and indices, or n_ref and v");
  }
}

}  // namespace

Material read_material_table(const TableView& table) {
  // clang-format off
  table.allow({"name", "maker", "code", "status", "source", "axis", "cautions", "notes", "form",
               "coefficients", "range_um", "lines_um", "indices", "fit", "n_ref", "v",
               "p_ref_long", "index_relative_to", "wavelength_in", "temperature_C", "thermal",
               "dn_dt_per_K", "dn_dt_relative_to", "expansion_per_K", "density_kg_m3"});
  // clang-format on
  MaterialData data;
  read_identity(table, data);
  read_temperature(table, data);
  read_index(table, data);
  return at_key(table, "", [&] { return Material(std::move(data)); });
}

}  // namespace chromacore::detail
