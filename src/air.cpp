#include <chromacore/air.hpp>
#include <chromacore/error.hpp>
#include <cmath>

#include "moist_air.hpp"
#include "text.hpp"

namespace chromacore {
namespace {

using detail::kelvin_offset;
using detail::number_text;
using detail::standard_pressure_Pa;

// The formula has a pole at 0.132 um, and air is opaque there.
constexpr double shortest_um = 0.135;
// Beyond these the compressibility is no longer a small correction, and the equations mean nothing.
constexpr double smallest_z = 0.5;
constexpr double largest_z = 1.5;

double inverse_square(double um) { return 1 / (um * um); }

double standard_index(double vacuum_um) {
  return 1 + detail::standard_over_15_C * detail::dry_refractivity(inverse_square(vacuum_um));
}

[[noreturn]] void refuse(ErrorCode code, const std::string& message) {
  throw Error(code, "surroundings: " + message);
}

double checked_um(Wavelength wavelength) {
  const double um = in_um(wavelength);
  if (!(um > 0) || !std::isfinite(um))
    throw Error(ErrorCode::bad_value,
                "a wavelength of " + number_text(um) + " um; expected a positive number");
  if (um < shortest_um)
    throw Error(ErrorCode::out_of_range, "no index of air at " + number_text(um, 7) +
                                             " um; its formula holds from " +
                                             number_text(shortest_um) + " um on");
  return um;
}

// lambda_vac = lambda n_std(lambda_vac). Each turn gains four digits in the visible, one and a half
// at 0.135 um, until nothing changes; the count only ends a last bit that goes to and fro.
double vacuum_um(double standard_air_um) {
  double result = standard_air_um * standard_index(standard_air_um);
  for (int turn = 0; turn < 12; ++turn) {
    const double next = standard_air_um * standard_index(result);
    if (next == result) break;
    result = next;
  }
  return result;
}

// Saturation pressure of water vapour, Pa, with the enhancement factor of moist air.
double saturation_Pa(const Surroundings& air) {
  const double t = in_celsius(air.temperature);
  const double kelvin = t + kelvin_offset;
  const double svp = std::exp(1.2378847e-5 * kelvin * kelvin - 1.9121316e-2 * kelvin + 33.93711047 -
                              6.3431645e3 / kelvin);
  return svp * (1.00062 + 3.14e-8 * in_Pa(air.pressure) + 5.6e-7 * t * t);
}

detail::MoistAir state_of(const Surroundings& air) {
  detail::MoistAir gas{.celsius = in_celsius(air.temperature),
                       .pressure_Pa = in_Pa(air.pressure),
                       .water_fraction = 0,
                       .co2_ppm = air.co2_ppm};
  if (air.humidity > 0) {
    const double vapour_Pa = air.humidity * saturation_Pa(air);
    if (!(vapour_Pa <= gas.pressure_Pa))
      refuse(ErrorCode::bad_value, "humidity " + number_text(air.humidity, 6) + " at " +
                                       number_text(gas.celsius, 6) + " C is " +
                                       number_text(vapour_Pa, 6) +
                                       " Pa of vapour, more than the whole pressure of " +
                                       number_text(gas.pressure_Pa, 6) + " Pa");
    gas.water_fraction = vapour_Pa / gas.pressure_Pa;
  }
  const double z = detail::compressibility(gas);
  if (!(z > smallest_z && z < largest_z))
    refuse(ErrorCode::out_of_range, "no index of air at " + number_text(gas.celsius, 6) +
                                        " C and " + number_text(gas.pressure_Pa, 6) +
                                        " Pa; its equations cover -40 to 100 C and 80000 to "
                                        "120000 Pa, and extrapolate with sense near them only");
  return gas;
}

void check_range(double value, double from, double to, const char* what, const char* range) {
  if (value >= from && value <= to) return;  // NaN is not
  refuse(ErrorCode::bad_value, std::string(what) + " " + number_text(value) + "; " + range);
}

}  // namespace

void check(const Surroundings& air) {
  constexpr double largest = 1e300;
  check_range(in_celsius(air.temperature), std::nextafter(-kelvin_offset, 0.0), largest,
              "temperature in C", "expected a number above absolute zero, -273.15");
  check_range(in_Pa(air.pressure), 0, largest, "pressure in Pa",
              "expected 0 (vacuum) or a positive number");
  check_range(air.humidity, 0, 1, "humidity", "expected 0 (dry) to 1 (saturated)");
  check_range(air.co2_ppm, 0, 1e6, "CO2 in ppm", "expected 0 to 1000000");
}

Surroundings standard_atmosphere(Length altitude) {
  // ISO 2533: 288.15 K at sea level, 6.5 K less each km up to 11 km, from there on constant.
  constexpr double sea_level_K = 288.15;
  constexpr double lapse_K_per_m = 0.0065;
  constexpr double tropopause_m = 11000;
  constexpr double g_over_r = 9.80665 / 287.05287;  // K/m
  const double h = in_mm(altitude) / 1000;
  if (!(h >= -2000 && h <= 20000))
    refuse(ErrorCode::out_of_range, "no standard atmosphere at an altitude of " +
                                        number_text(h, 7) +
                                        " m; it is given from -2000 to 20000 m");
  const double in_troposphere = std::fmin(h, tropopause_m);
  const double kelvin = sea_level_K - lapse_K_per_m * in_troposphere;
  const double pressure = standard_pressure_Pa *
                          std::pow(kelvin / sea_level_K, g_over_r / lapse_K_per_m) *
                          std::exp(-g_over_r * (h - in_troposphere) / kelvin);
  Surroundings air;
  air.temperature = (kelvin - kelvin_offset) * units::celsius;
  air.pressure = pressure * units::Pa;
  return air;
}

double air_index(Wavelength wavelength, const Surroundings& air) {
  check(air);
  const double um = checked_um(wavelength);
  if (in_Pa(air.pressure) == 0) return 1;
  return 1 + detail::refractivity(inverse_square(vacuum_um(um)), state_of(air));
}

std::vector<std::string> air_notes(const Surroundings& air, Wavelength shortest,
                                   Wavelength longest) {
  std::vector<std::string> notes;
  if (in_Pa(air.pressure) == 0) return notes;
  const auto note = [&notes](double value, const char* unit, double from, double to) {
    if (value >= from && value <= to) return;
    notes.push_back("air at " + number_text(value, 6) + " " + unit + ": index extrapolated; " +
                    "Ciddor's equations cover " + number_text(from) + " to " + number_text(to) +
                    " " + unit);
  };
  note(in_celsius(air.temperature), "C", -40, 100);
  note(in_Pa(air.pressure), "Pa", 80000, 120000);
  note(in_um(shortest), "um", 0.3, 1.69);
  if (in_um(longest) != in_um(shortest)) note(in_um(longest), "um", 0.3, 1.69);
  return notes;
}

Wavelength vacuum_wavelength(Wavelength in_standard_air) {
  return vacuum_um(checked_um(in_standard_air)) * units::um;
}

Wavelength standard_air_wavelength(Wavelength in_vacuum) {
  const double um = checked_um(in_vacuum);
  return um / standard_index(um) * units::um;
}

}  // namespace chromacore
