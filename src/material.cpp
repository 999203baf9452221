#include <algorithm>
#include <array>
#include <chromacore/error.hpp>
#include <chromacore/material.hpp>
#include <cmath>
#include <utility>

#include "material_record.hpp"
#include "text.hpp"

namespace chromacore {
namespace {

using detail::number_text;

struct NamedForm {
  DispersionForm form = DispersionForm::sellmeier;
  std::string_view name = {};
};
constexpr std::array forms = {
    NamedForm{DispersionForm::sellmeier, "sellmeier"},
    NamedForm{DispersionForm::sellmeier_squared, "sellmeier_squared"},
    NamedForm{DispersionForm::polynomial, "polynomial"},
    NamedForm{DispersionForm::rational_polynomial, "rational_polynomial"},
    NamedForm{DispersionForm::cauchy, "cauchy"},
    NamedForm{DispersionForm::herzberger, "herzberger"},
    NamedForm{DispersionForm::through_lines, "through_lines"},
    NamedForm{DispersionForm::table, "table"},
};

// Without dn/dT an index is used unchanged as far from the temperature of its source as this.
constexpr double unchanged_within_K = 5;
constexpr double rounding_K = 1e-9;

[[noreturn]] void refuse(const MaterialData& data, ErrorCode code, const std::string& what) {
  throw Error(code, "material " + data.name + ": " + what);
}

[[noreturn]] void refuse_wavelength(const MaterialData& data, double at_um) {
  if (!(at_um > 0) || !std::isfinite(at_um))
    refuse(data, ErrorCode::bad_value,
           "a wavelength of " + number_text(at_um) + " um; expected a positive number");
  refuse(data, ErrorCode::out_of_range,
         "no index at " + number_text(at_um, 7) + " um; its source covers " +
             number_text(in_um(data.shortest), 7) + " to " + number_text(in_um(data.longest), 7) +
             " um");
}

// By the source's formula, in the source's own medium.
double formula_index(const Material::Record& record, double at_um, Extrapolate extrapolate) {
  const bool allowed = extrapolate == Extrapolate::yes && at_um > 0 && std::isfinite(at_um);
  if (!record.covers(at_um) && !allowed) refuse_wavelength(record.data, at_um);
  const double n = record.formula.index(record.formula_x(at_um));
  if (std::isnan(n))
    refuse(record.data, ErrorCode::out_of_range,
           "its formula gives no index at " + number_text(at_um, 7) + " um");
  return n;
}

bool is_absolute(const MaterialData& data) { return data.index_relative_to == Medium::vacuum; }

// Dry air of normal pressure, to which a data sheet's index at that temperature is relative.
double dry_air_index(Wavelength wavelength, Temperature temperature) {
  return air_index(wavelength, Surroundings{.temperature = temperature});
}

// n_abs(T) - n_abs(T0) by formula A. n: from the row, in the row's medium. x: um.
double absolute_change(const ThermalCoefficients& c, double n, double x, double t) {
  const double dispersive = c.e0 == 0 && c.e1 == 0
                                ? 0
                                : t * (c.e0 + t * c.e1) / (x * x - c.lambda_tk_um * c.lambda_tk_um);
  return (n * n - 1) / (2 * n) * (t * (c.d0 + t * (c.d1 + t * c.d2)) + dispersive);
}

double change_of_temperature(const MaterialData& data, const Surroundings& air) {
  return in_celsius(air.temperature) - in_celsius(data.temperature);
}

[[noreturn]] void refuse_temperature(const MaterialData& data, const Surroundings& air) {
  refuse(data, ErrorCode::out_of_range,
         "no index at " + number_text(in_celsius(air.temperature), 6) +
             " C; it has no dn/dT, and its index at " +
             number_text(in_celsius(data.temperature), 6) + " C is used unchanged within 5 K only");
}

// Relative to vacuum, at the temperature of `air`; n as the formula gives it.
double absolute_index(const Material::Record& record, double n, Wavelength wavelength,
                      const Surroundings& air) {
  const MaterialData& data = record.data;
  const double t = change_of_temperature(data, air);
  const double absolute = is_absolute(data) ? n : n * dry_air_index(wavelength, data.temperature);
  if (t == 0) return absolute;
  if (data.thermal)
    return absolute + absolute_change(*data.thermal, n, record.formula_x(in_um(wavelength)), t);
  if (!data.thermal_constant) {
    if (std::abs(t) > unchanged_within_K + rounding_K) refuse_temperature(data, air);
    return absolute;
  }
  const double change = data.thermal_constant->dn_dt_per_K * t;
  if (data.thermal_constant->relative_to == Medium::vacuum) return absolute + change;
  const double relative = absolute / dry_air_index(wavelength, data.temperature);
  return (relative + change) * dry_air_index(wavelength, air.temperature);
}

}  // namespace

std::string_view to_string(DispersionForm form) {
  const auto found = std::find_if(forms.begin(), forms.end(),
                                  [form](const NamedForm& f) { return f.form == form; });
  return found == forms.end() ? "unknown" : found->name;
}

DispersionForm dispersion_form(std::string_view name) {
  const auto found = std::find_if(forms.begin(), forms.end(),
                                  [name](const NamedForm& f) { return f.name == name; });
  if (found != forms.end()) return found->form;
  std::vector<std::string> names;
  for (const NamedForm& f : forms) names.emplace_back(f.name);
  throw Error(ErrorCode::not_found, "no dispersion form \"" + std::string(name) +
                                        "\"; the forms are " + detail::joined(names));
}

std::string_view to_string(Status status) {
  switch (status) {
    case Status::current:
      return "current";
    case Status::on_request:
      return "on_request";
    case Status::withdrawn:
      return "withdrawn";
    case Status::unknown:
      break;
  }
  return "unknown";
}

Material::Material(MaterialData data) : record_(std::make_shared<Record>(std::move(data))) {}

const Material::Record& Material::record() const {
  if (!record_) throw Error(ErrorCode::not_set, "a material is not set; take one from a catalogue");
  return *record_;
}

const MaterialData& Material::data() const { return record().data; }

std::string Material::full_name() const {
  return maker().empty() ? name() : maker() + "/" + name();
}

double index(const Material& material, Wavelength wavelength, Extrapolate extrapolate) {
  const Material::Record& record = material.record();
  const double n = formula_index(record, in_um(wavelength), extrapolate);
  return is_absolute(record.data) ? n / air_index(wavelength) : n;
}

double index(const Material& material, Wavelength wavelength, const Surroundings& surroundings,
             Extrapolate extrapolate) {
  const Material::Record& record = material.record();
  const double n = formula_index(record, in_um(wavelength), extrapolate);
  const double outside = air_index(wavelength, surroundings);
  return absolute_index(record, n, wavelength, surroundings) / outside;
}

std::vector<std::string> thermal_notes(const Material& material, const Surroundings& surroundings) {
  const MaterialData& data = material.data();
  const double t = change_of_temperature(data, surroundings);
  std::vector<std::string> notes;
  const auto note = [&](const std::string& text) {
    notes.push_back("material " + data.name + ": " + text);
  };
  if (data.index_relative_to == Medium::unknown)
    note("its source does not say what its index is relative to; taken as relative to air");
  if (data.wavelength_in == Medium::unknown)
    note("its source does not say where its wavelengths are measured; taken as in air");
  if (t == 0) return notes;
  const double celsius = in_celsius(surroundings.temperature);
  if (data.thermal) {
    if (celsius < -100 || celsius > 140)
      note("dn/dT extrapolated to " + number_text(celsius, 6) +
           " C; its formula is published for -100 to 140 C");
  } else if (!data.thermal_constant) {
    note("no dn/dT; its index at " + number_text(in_celsius(data.temperature), 6) +
         " C is used unchanged at " + number_text(celsius, 6) + " C");
  } else if (data.thermal_constant->relative_to == Medium::unknown) {
    note("its source does not say what its dn/dT is relative to; taken as relative to air");
  }
  return notes;
}

double v_number(const Material& material, const Line& reference, const LinePair& pair) {
  const double difference =
      index(material, pair.first.wavelength()) - index(material, pair.second.wavelength());
  const double power = index(material, reference.wavelength()) - 1;
  return difference == 0 ? std::numeric_limits<double>::infinity() : power / difference;
}

double v_number(const Material& material, const Band& band) {
  return v_number(material, band.reference, band.primary_pair());
}

double abbe_number(const Material& material) {
  static const Line d = "d";
  static const LinePair f_c = {"F", "C"};
  return v_number(material, d, f_c);
}

double partial_dispersion(const Material& material, const LinePair& pair, const Band& band) {
  const auto difference = [&material](const LinePair& lines) {
    return index(material, lines.first.wavelength()) - index(material, lines.second.wavelength());
  };
  const double over_band = difference(band.primary_pair());
  return over_band == 0 ? std::nan("") : difference(pair) / over_band;
}

double deviation_from_normal_line(const Material& material) {
  static const Band visible = Band::of_lines({"F", "d", "C"}, "d");
  static const LinePair g_f = {"g", "F"};
  return partial_dispersion(material, g_f, visible) - (0.6438 - 0.001682 * abbe_number(material));
}

bool covers(const Material& material, const Band& band) {
  const Material::Record& record = material.record();
  const auto inside = [&record](const Line& line) {
    return record.covers(in_um(line.wavelength()));
  };
  return inside(band.reference) &&
         std::all_of(band.wavelengths.begin(), band.wavelengths.end(), inside);
}

}  // namespace chromacore
