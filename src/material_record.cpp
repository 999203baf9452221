#include "material_record.hpp"

#include <algorithm>
#include <chromacore/error.hpp>
#include <cmath>
#include <limits>
#include <string>
#include <utility>

#include "text.hpp"

namespace chromacore {
namespace {

using detail::number_text;
using units::um;

// Wavelengths this near to an end of the range still count as inside: they are rounded.
constexpr double range_tolerance = 1e-9;
constexpr double absolute_zero_C = -273.15;

[[noreturn]] void refuse(const MaterialData& data, const std::string& what) {
  throw Error(ErrorCode::bad_value, "material " + data.name + ": " + what);
}

std::string range_text(Wavelength from, Wavelength to) {
  return number_text(in_um(from), 7) + " to " + number_text(in_um(to), 7) + " um";
}

detail::Dispersion prepared(const MaterialData& data) {
  if (data.name.empty()) throw Error(ErrorCode::bad_value, "a material has no name");
  try {
    return {data.form, data.coefficients};
  } catch (const Error& e) {
    refuse(data, e.message());
  }
}

Wavelength in_standard_air(const MaterialData& data, double x) {
  return data.wavelength_in == Medium::vacuum ? standard_air_wavelength(x * um) : x * um;
}

void check_properties(const MaterialData& data) {
  const double t0 = in_celsius(data.temperature);
  if (!std::isfinite(t0) || t0 <= absolute_zero_C)
    refuse(data, "a temperature of " + number_text(t0) + " C; expected one above absolute zero");
  if (data.expansion_per_K && !std::isfinite(*data.expansion_per_K))
    refuse(data, "an expansion that is not a finite number");
  if (data.density_kg_m3 && !(*data.density_kg_m3 > 0 && std::isfinite(*data.density_kg_m3)))
    refuse(data, "a density of " + number_text(*data.density_kg_m3) +
                     " kg/m^3; expected a positive number");
}

void check_thermal(const MaterialData& data) {
  if (data.thermal_constant && !std::isfinite(data.thermal_constant->dn_dt_per_K))
    refuse(data, "a dn/dT that is not a finite number");
  if (!data.thermal) return;
  const ThermalCoefficients& c = *data.thermal;
  for (const double value : {c.d0, c.d1, c.d2, c.e0, c.e1, c.lambda_tk_um})
    if (!std::isfinite(value)) refuse(data, "a thermal coefficient that is not a finite number");
  const double pole_um = std::abs(c.lambda_tk_um);
  const bool inside = pole_um >= in_um(data.shortest) && pole_um <= in_um(data.longest);
  if ((c.e0 != 0 || c.e1 != 0) && inside)
    refuse(data, "its thermal formula has a pole within its range, at " + number_text(pole_um, 7) +
                     " um");
}

}  // namespace

Material::Record::Record(MaterialData from) : data(std::move(from)), formula(prepared(data)) {
  settle_range();
  check_formula();
  check_properties(data);
  check_thermal(data);
  using Limits = std::numeric_limits<double>;
  shortest_um_ = std::max(in_um(data.shortest) * (1 - range_tolerance), Limits::min());
  longest_um_ = std::min(in_um(data.longest) * (1 + range_tolerance), Limits::max());
}

double Material::Record::vacuum_x(double standard_air_um) {
  return in_um(vacuum_wavelength(standard_air_um * um));
}

void Material::Record::settle_range() {
  const bool left_out = data.shortest == Wavelength{} && data.longest == Wavelength{};
  if (formula.is_constant() && left_out) {
    data.longest = std::numeric_limits<double>::infinity() * um;
    return;
  }
  if (detail::is_list_of_points(data.form) && !formula.is_constant()) take_range_of_points();
  if (!(in_um(data.shortest) > 0) || !(data.longest > data.shortest) ||
      !std::isfinite(in_um(data.longest)))
    refuse(data, "a range of " + range_text(data.shortest, data.longest) +
                     "; expected two positive numbers, the shorter first");
}

void Material::Record::take_range_of_points() {
  double shortest = data.coefficients[0];
  double longest = shortest;
  for (std::size_t k = 0; k < data.coefficients.size(); k += 2) {
    shortest = std::min(shortest, data.coefficients[k]);
    longest = std::max(longest, data.coefficients[k]);
  }
  const Wavelength first = in_standard_air(data, shortest);
  const Wavelength last = in_standard_air(data, longest);
  if (data.shortest == Wavelength{} && data.longest == Wavelength{}) {
    data.shortest = first;
    data.longest = last;
  }
  if (data.shortest < first * (1 - range_tolerance) || data.longest > last * (1 + range_tolerance))
    refuse(data, "a range of " + range_text(data.shortest, data.longest) +
                     " beyond its points, which cover " + range_text(first, last));
}

void Material::Record::check_formula() const {
  const double shortest = in_um(data.shortest);
  const double longest = in_um(data.longest);
  if (std::isinf(longest)) return check_index(1.0);
  if (formula.has_pole(formula_x(shortest), formula_x(longest)))
    refuse(data,
           "its formula has a pole within its range of " + range_text(data.shortest, data.longest));
  for (const double part : {0.0, 0.25, 0.5, 0.75, 1.0})
    check_index(shortest + part * (longest - shortest));
}

void Material::Record::check_index(double at_um) const {
  if (std::isnan(formula.index(formula_x(at_um))))
    refuse(data, "its formula gives no index above 0 at " + number_text(at_um, 7) + " um");
}

}  // namespace chromacore
