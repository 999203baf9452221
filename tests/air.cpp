#include <doctest/doctest.h>

#include <array>
#include <chromacore/air.hpp>
#include <cmath>
#include <fstream>
#include <limits>
#include <nlohmann/json.hpp>

#include "close.hpp"
#include "message_of.hpp"
#include "moist_air.hpp"

using namespace chromacore;
using namespace chromacore::units;
using chromacore::test::close;
using chromacore::test::message_of;

namespace {

constexpr double inf = std::numeric_limits<double>::infinity();
constexpr double not_a_number = std::numeric_limits<double>::quiet_NaN();

Surroundings state(double celsius_value, double pressure_Pa, double humidity = 0) {
  return {
      .temperature = celsius_value * celsius, .pressure = pressure_Pa * Pa, .humidity = humidity};
}

// 1e8 (n - 1) at a wavelength in vacuum, as Ciddor prints it.
double refractivity_e8(double vacuum_um, const Surroundings& air) {
  return 1e8 * (air_index(standard_air_wavelength(vacuum_um * um), air) - 1);
}

// Another set of equations: modified Edlen, K. P. Birch, M. J. Downs, Metrologia 31, 315 (1994),
// for dry air. p in Pa, t in C.
double edlen(double vacuum_um, double t, double p) {
  const double s = 1 / (vacuum_um * vacuum_um);
  const double standard = 1e-8 * (8342.54 + 2406147 / (130 - s) + 15998 / (38.9 - s));
  const double x = (1 + 1e-8 * (0.601 - 0.00972 * t) * p) / (1 + 0.003661 * t);
  return 1 + p * standard * x / 96095.43;
}

// And the glass makers' older one, F. Kohlrausch, Praktische Physik, as SCHOTT TIE-19 has it.
double kohlrausch(double air_um, double t, double p) {
  const double l = air_um * air_um;
  const double at_15 = 1e-8 * (6432.8 + 2949810 * l / (146 * l - 1) + 25540 * l / (41 * l - 1));
  return 1 + at_15 * (p / 101325) / (1 + 3.4785e-3 * (t - 15));
}

}  // namespace

TEST_CASE("air: dry, of several temperatures and pressures, as Ciddor prints it") {
  // Ciddor 1996, table 1: 633.0 nm in vacuum, 450 ppm CO2; one decimal of 1e8 (n - 1).
  CHECK(close(refractivity_e8(0.633, state(20, 80e3)), 21458.0, {.abs = 0.05}));
  CHECK(close(refractivity_e8(0.633, state(20, 100e3)), 26824.4, {.abs = 0.05}));
  CHECK(close(refractivity_e8(0.633, state(20, 120e3)), 32191.6, {.abs = 0.05}));
  CHECK(close(refractivity_e8(0.633, state(10, 100e3)), 27774.7, {.abs = 0.05}));
  CHECK(close(refractivity_e8(0.633, state(30, 100e3)), 25937.2, {.abs = 0.05}));
}

TEST_CASE("air: moist, in extreme conditions, as Ciddor prints it") {
  // Ciddor 1996, table 3: 633.0 nm in vacuum, 450 ppm CO2; without the enhancement factor of moist
  // air these would be 0.2 to 2.2 higher. The third is printed 19996.5, a misprint by 100: the
  // paper's own column of differences gives 19896.5.
  CHECK(close(refractivity_e8(0.633, state(20, 80e3, 0.75)), 21394.0, {.abs = 0.05}));
  CHECK(close(refractivity_e8(0.633, state(20, 120e3, 0.75)), 32127.8, {.abs = 0.05}));
  CHECK(close(refractivity_e8(0.633, state(40, 80e3, 0.75)), 19896.5, {.abs = 0.05}));
  CHECK(close(refractivity_e8(0.633, state(40, 120e3, 0.75)), 29941.8, {.abs = 0.05}));
  CHECK(close(refractivity_e8(0.633, state(50, 80e3, 1)), 19058.4, {.abs = 0.05}));
  CHECK(close(refractivity_e8(0.633, state(50, 120e3, 1)), 28792.4, {.abs = 0.05}));
}

TEST_CASE("air: the enhancement factor of moist air shows in those figures") {
  // The row of 50 C, 120 kPa, 100 %: without the factor it is 2.23 higher.
  const double t = 50;
  const double kelvin = t + 273.15;
  const double svp = std::exp(1.2378847e-5 * kelvin * kelvin - 1.9121316e-2 * kelvin + 33.93711047 -
                              6.3431645e3 / kelvin);
  const double without = detail::refractivity(
      1 / (0.633 * 0.633), {.celsius = t, .pressure_Pa = 120e3, .water_fraction = svp / 120e3});
  CHECK(close(1e8 * without - 28792.4, 2.23, {.abs = 0.05}));
}

TEST_CASE("air: the dispersion of standard dry air at 15 C") {
  // refractiveindex.info, "Ciddor 1996": n - 1 = 27717.48e-8 at 587.5618 nm in vacuum.
  CHECK(close(refractivity_e8(0.5875618, state(15, 101325)), 27717.48, {.abs = 0.005}));
}

TEST_CASE("air: wavelengths in air of known wavelengths in vacuum") {
  // README of github.com/phn/ref_index (Ciddor; 450 ppm), nm; the last one is moist.
  const auto in_air = [](double vacuum_nm, const Surroundings& air) {
    return vacuum_nm / air_index(standard_air_wavelength(vacuum_nm / 1000 * um), air);
  };
  CHECK(close(in_air(633, state(15, 101325)), 632.82500477, {.abs = 0.5e-8}));
  CHECK(close(in_air(550, state(15, 101325)), 549.84723175, {.abs = 0.5e-8}));
  CHECK(close(in_air(400, state(15, 101325)), 399.88692724, {.abs = 0.5e-8}));
  CHECK(close(in_air(633, state(20, 100e3, 0.5)), 632.83051711, {.abs = 0.5e-8}));
}

TEST_CASE("air: two independent sets of equations agree near normal conditions") {
  for (const double wavelength_um : {0.4358343, 0.546074, 0.5875618, 0.6328, 1.01398}) {
    CAPTURE(wavelength_um);
    const double vacuum_um = in_um(vacuum_wavelength(wavelength_um * um));
    const double n = air_index(wavelength_um * um);
    CHECK(close(n, edlen(vacuum_um, 20, 101325), {.abs = 3e-9}));
    CHECK(close(n, kohlrausch(wavelength_um, 20, 101325), {.abs = 1.5e-8}));
  }
  for (const double pressure_Pa : {80e3, 100e3, 120e3})
    CHECK(close(1 + 1e-8 * refractivity_e8(0.633, state(20, pressure_Pa)),
                edlen(0.633, 20, pressure_Pa), {.abs = 4e-9}));
}

TEST_CASE("air: dn/dT at 20 C is the one of the makers' formula") {
  // Hartmann, Optical Glass, eq. 3.21: dn/dT = -0.00367 (n - 1)/(1 + 0.00367 t).
  const auto n = [](double t) { return air_index(0.546074 * um, state(t, 101325)); };
  const double slope = (n(20.5) - n(19.5)) / 1.0;
  CHECK(close(slope, -0.00367 * (n(20) - 1) / (1 + 0.00367 * 20), {.rel = 1e-3}));
}

TEST_CASE("air: compressibility and density as printed") {
  // J. A. Stone, J. H. Zimmerman, NIST Engineering Metrology Toolbox, appendix A: dry air at 15 C
  // and 101325 Pa; pure water vapour at 20 C and 1333 Pa, kg/m^3.
  CHECK(close(detail::compressibility({.celsius = 15}), 0.9995922115, {.abs = 0.5e-10}));
  CHECK(close(detail::reference_vapour_density, 0.00985938, {.abs = 0.5e-8}));
}

TEST_CASE("air: 0 Pa is vacuum, and more CO2 raises the index") {
  for (const double wavelength_um : {0.2, 0.5, 10.0}) {
    CHECK(air_index(wavelength_um * um, state(20, 0)) == 1.0);
    CHECK(air_index(wavelength_um * um, state(-200, 0, 1)) == 1.0);
  }
  Surroundings rich;
  rich.co2_ppm = 1450;
  // 0.534e-6 per ppm of refractivity by Ciddor's equation, less than 1e-3 by the molar mass.
  const double ratio = (air_index(0.55 * um, rich) - 1) / (air_index(0.55 * um) - 1);
  CHECK(close(ratio, 1 + 0.534e-3, {.abs = 1e-12}));
}

TEST_CASE("air: wavelengths go to vacuum and back") {
  for (const double wavelength_um : {0.14, 0.2, 0.3, 0.4358343, 0.5875618, 1.01398, 4.0, 12.0}) {
    CAPTURE(wavelength_um);
    const Wavelength vacuum = vacuum_wavelength(wavelength_um * um);
    CHECK(close(in_um(standard_air_wavelength(vacuum)), wavelength_um, {.rel = 3e-16}));
    CHECK(close(in_um(vacuum), wavelength_um * air_index(wavelength_um * um), {.rel = 3e-16}));
  }
}

TEST_CASE("standard atmosphere: temperature and pressure at geopotential heights") {
  // ISO 2533:1975, table of the standard atmosphere; from memory, with the digits printed.
  struct Row {
    double metres = 0;
    double kelvin = 0;
    double pressure_Pa = 0;
    double half_digit_Pa = 0;
  };
  constexpr std::array rows = {
      Row{-2000, 301.15, 127774, 0.5},   Row{0, 288.15, 101325, 0.5},
      Row{1000, 281.65, 89874.6, 0.05},  Row{5000, 255.65, 54019.9, 0.05},
      Row{11000, 216.65, 22632.0, 0.05}, Row{20000, 216.65, 5474.9, 0.05},
  };
  for (const Row& row : rows) {
    CAPTURE(row.metres);
    const Surroundings air = standard_atmosphere(1000 * row.metres * mm);
    CHECK(close(in_celsius(air.temperature), row.kelvin - 273.15, {.abs = 1e-12}));
    CHECK(close(in_Pa(air.pressure), row.pressure_Pa, {.abs = row.half_digit_Pa}));
    CHECK(air.humidity == 0);
  }
}

TEST_CASE("standard atmosphere: no step at the tropopause, and none beyond its ends") {
  const auto pressure = [](double m) { return in_Pa(standard_atmosphere(1000 * m * mm).pressure); };
  CHECK(close(pressure(11000 + 1e-6), pressure(11000 - 1e-6), {.rel = 1e-9}));
  const auto at = [](double metres) {
    return message_of([&] { (void)standard_atmosphere(1000 * metres * mm); });
  };
  CHECK(at(25000) ==
        "out_of_range: surroundings: no standard atmosphere at an altitude of 25000 m; "
        "it is given from -2000 to 20000 m");
  CHECK(at(-2001).starts_with("out_of_range"));
  CHECK(at(not_a_number).starts_with("out_of_range"));
}

TEST_CASE("air: values that no air has") {
  const auto said = [](const Surroundings& air) { return message_of([&] { check(air); }); };
  CHECK(said(state(-273.15, 1e5)) ==
        "bad_value: surroundings: temperature in C -273.15; expected a number above absolute zero, "
        "-273.15");
  CHECK(said(state(20, -1)) ==
        "bad_value: surroundings: pressure in Pa -1; expected 0 (vacuum) or a positive number");
  CHECK(said(state(20, 1e5, 1.5)) ==
        "bad_value: surroundings: humidity 1.5; expected 0 (dry) to 1 (saturated)");
  for (const double bad : {not_a_number, inf, -inf}) {
    CHECK(said(state(bad, 1e5)).starts_with("bad_value"));
    CHECK(said(state(20, bad)).starts_with("bad_value"));
    CHECK(said(state(20, 1e5, bad)).starts_with("bad_value"));
    CHECK(said({.co2_ppm = bad}).starts_with("bad_value"));
    CHECK(message_of([&] { (void)air_index(0.5 * um, state(20, bad)); }).starts_with("bad_value"));
  }
  CHECK(said({.co2_ppm = -1}).starts_with("bad_value"));
  CHECK(said(state(20, 101325, 1)) == "no error");
}

TEST_CASE("air: states and wavelengths where the equations mean nothing") {
  const auto said = [](double um_value, const Surroundings& air) {
    return message_of([&] { (void)air_index(um_value * um, air); });
  };
  CHECK(said(0.5, state(100, 50e3, 1)) ==
        "bad_value: surroundings: humidity 1 at 100 C is 102173 Pa of vapour, more than the whole "
        "pressure of 50000 Pa");
  CHECK(said(0.5, state(-273, 1e5)).starts_with("out_of_range: surroundings: no index of air at"));
  CHECK(said(0.5, state(20, 1e12)).starts_with("out_of_range"));
  CHECK(said(0.1, {}) ==
        "out_of_range: no index of air at 0.1 um; its formula holds from 0.135 um on");
  for (const double bad : {not_a_number, inf, -inf, 0.0, -0.5})
    CHECK(said(bad, {}).starts_with("bad_value: a wavelength of "));
}

TEST_CASE("air notes: one for each limit of the equations that is passed") {
  using Texts = std::vector<std::string>;
  CHECK(air_notes({}, 0.4 * um, 0.7 * um).empty());
  CHECK(air_notes(state(-60, 0), 0.2 * um, 12.0 * um).empty());  // vacuum is exact
  CHECK(air_notes(state(20, 20e3), 0.4 * um, 0.7 * um) ==
        Texts{"air at 20000 Pa: index extrapolated; Ciddor's equations cover 80000 to 120000 Pa"});
  CHECK(air_notes(state(-56.5, 22632), 0.2 * um, 12.0 * um).size() == 4);
  CHECK(air_notes({}, 0.4 * um, 12.0 * um) ==
        Texts{"air at 12 um: index extrapolated; Ciddor's equations cover 0.3 to 1.69 um"});
  CHECK(air_notes({}, 10.0 * um, 10.0 * um).size() == 1);
}

TEST_CASE("air: every value agrees with 40-digit arithmetic") {
  std::ifstream file(CHROMACORE_FOLDER "/tests/reference/indices.json");
  const auto table = nlohmann::json::parse(file);
  for (const auto& row : table.at("air")) {
    CAPTURE(row.dump());
    Surroundings air = state(row.at("temperature_C"), row.at("pressure_Pa"), row.at("humidity"));
    air.co2_ppm = row.at("co2_ppm");
    const double got = 1e-8 * refractivity_e8(row.at("vacuum_wavelength_um"), air);
    CHECK(close(got, row.at("refractivity"), {.abs = 3e-16}));
  }
  for (const auto& row : table.at("vacuum")) {
    CAPTURE(row.dump());
    const double want = row.at("vacuum_wavelength_um");
    CHECK(close(in_um(vacuum_wavelength(row.at("wavelength_um").get<double>() * um)), want,
                {.rel = 3e-16}));
  }
}
