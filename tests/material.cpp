#include <doctest/doctest.h>

#include <array>
#include <chromacore/material.hpp>
#include <cmath>
#include <limits>

#include "close.hpp"
#include "message_of.hpp"

using namespace chromacore;
using namespace chromacore::units;
using chromacore::test::close;
using chromacore::test::message_of;

namespace {

constexpr double inf = std::numeric_limits<double>::infinity();
constexpr double not_a_number = std::numeric_limits<double>::quiet_NaN();

MaterialData data_of(std::string name, DispersionForm form, std::vector<double> coefficients,
                     double shortest_um = 0, double longest_um = 0) {
  MaterialData data;
  data.name = std::move(name);
  data.form = form;
  data.coefficients = std::move(coefficients);
  data.shortest = shortest_um * um;
  data.longest = longest_um * um;
  return data;
}

// Coefficients, range and formula A: SCHOTT AG, optical glass data of 2017-01-20b.
MaterialData n_bk7_data() {
  MaterialData data = data_of(
      "N-BK7", DispersionForm::sellmeier_squared,
      {0, 1.03961212, 0.00600069867, 0.231792344, 0.0200179144, 1.01046945, 103.560653}, 0.3, 2.5);
  data.maker = "SCHOTT";
  data.code = "517642";
  data.thermal = ThermalCoefficients{.d0 = 1.86e-06,
                                     .d1 = 1.31e-08,
                                     .d2 = -1.37e-11,
                                     .e0 = 4.34e-07,
                                     .e1 = 6.27e-10,
                                     .lambda_tk_um = 0.17};
  return data;
}
Material n_bk7() { return Material(n_bk7_data()); }

Material f2() {
  return Material(
      data_of("F2", DispersionForm::sellmeier_squared,
              {0, 1.34533359, 0.00997743871, 0.209073176, 0.0470450767, 0.937357162, 111.886764},
              0.32, 2.5));
}

// Another maker's form: HOYA, optical glass data of 2017-04-01, FCD1; listed there n_d 1.49700,
// V_d 81.61.
Material fcd1() {
  return Material(data_of("FCD1", DispersionForm::polynomial,
                          {2.2181132, -0.005799427, 2, 0.0083470679, -2, 6.5046523e-05, -4,
                           8.5142186e-06, -6, -5.8852269e-07, -8},
                          0.36501, 1.01398));
}

Material vacuum_source() {
  MaterialData data = n_bk7_data();
  data.index_relative_to = Medium::vacuum;
  data.wavelength_in = Medium::vacuum;
  return Material(data);
}

Surroundings at(double celsius_value, double pressure_Pa = 101325) {
  return {.temperature = celsius_value * celsius, .pressure = pressure_Pa * Pa};
}

double n_at(const Material& material, double um_value) { return index(material, um_value * um); }

Band visible() { return Band::of_lines({"F", "d", "C"}, "d"); }

std::string said(MaterialData data) {
  return message_of([&] { (void)Material(data); });
}

template <class Change>
std::string said_of_changed(Change change) {
  MaterialData data = n_bk7_data();
  change(data);
  return said(data);
}

}  // namespace

TEST_CASE("material: N-BK7, F2 and FCD1 are what their makers list") {
  // SCHOTT, optical glass data of 2017-01-20b: n_d to five decimals, V_d to two, the deviation of
  // P(g,F) to four. HOYA likewise.
  CHECK(close(n_at(n_bk7(), 0.5875618), 1.51680, {.abs = 0.5e-5}));
  CHECK(close(abbe_number(n_bk7()), 64.17, {.abs = 0.005}));
  CHECK(close(deviation_from_normal_line(n_bk7()), -0.0009, {.abs = 0.5e-4}));
  CHECK(close(n_at(f2(), 0.5875618), 1.62004, {.abs = 0.5e-5}));
  CHECK(close(abbe_number(f2()), 36.37, {.abs = 0.005}));
  CHECK(close(deviation_from_normal_line(f2()), 0.0002, {.abs = 0.5e-4}));
  CHECK(close(n_at(fcd1(), 0.5875618), 1.49700, {.abs = 0.5e-5}));
  CHECK(close(abbe_number(fcd1()), 81.61, {.abs = 0.005}));
}

TEST_CASE("material: P(g,F) of N-BK7") {
  // The published line at the listed V_d plus the listed deviation: 0.6438 - 0.001682 64.17 -
  // 0.0009 (P. Hartmann, Optical Glass, eq. 3.10), each with half a unit of its last digit.
  CHECK(close(partial_dispersion(n_bk7(), {"g", "F"}, visible()), 0.5350, {.abs = 1.1e-4}));
}

TEST_CASE("material: what two lines leave of a band adds up") {
  const double upper = partial_dispersion(f2(), {"F", "d"}, visible());
  const double lower = partial_dispersion(f2(), {"d", "C"}, visible());
  CHECK(close(upper + lower, 1, {.rel = 1e-12}));
  CHECK(partial_dispersion(f2(), {"C", "d"}, visible()) == -lower);
  CHECK(partial_dispersion(f2(), {"F", "C"}, visible()) == 1);
}

TEST_CASE("material: V over a band, over lines, and of the reference e") {
  CHECK(v_number(n_bk7(), visible()) == abbe_number(n_bk7()));
  CHECK(v_number(n_bk7(), "d", {"F", "C"}) == abbe_number(n_bk7()));
  CHECK(v_number(n_bk7(), "d", {"C", "F"}) == -abbe_number(n_bk7()));
  // SCHOTT data sheet N-BK7: n_e = 1.51872, V_e = 63.96; from memory.
  CHECK(close(n_at(n_bk7(), 0.546074), 1.51872, {.abs = 0.5e-5}));
  CHECK(close(v_number(n_bk7(), "e", {"F'", "C'"}), 63.96, {.abs = 0.005}));
}

TEST_CASE("material: without dispersion V is infinite, P is none, and any wavelength will do") {
  for (const Material& plain :
       {Material(data_of("plain", DispersionForm::through_lines, {0.5, 1.6})),
        Material(data_of("plain", DispersionForm::through_lines, {0.5, 1.6, 0.6, 1.6}))}) {
    CHECK(abbe_number(plain) == inf);
    CHECK(std::isnan(partial_dispersion(plain, {"F", "d"}, visible())));
    CHECK(std::isnan(deviation_from_normal_line(plain)));
    CHECK(n_at(plain, 1e-3) == 1.6);
    CHECK(n_at(plain, 1e3) == 1.6);
    CHECK(covers(plain, visible()));
    CHECK(in_um(plain.data().shortest) == 0);
    CHECK(in_um(plain.data().longest) == inf);
    for (const double bad : {0.0, -1.0, inf, not_a_number})
      CHECK(message_of([&] { (void)n_at(plain, bad); }).starts_with("bad_value: material plain"));
  }
}

TEST_CASE("material: a crown given at three lines covers what lies between them") {
  const Material crown(data_of("crown", DispersionForm::through_lines,
                               {0.4861327, 1.52238, 0.5875618, 1.51700, 0.6562725, 1.51432}));
  CHECK(close(n_at(crown, 0.4861327), 1.52238, {.rel = 1e-15}));
  CHECK(close(n_at(crown, 0.5875618), 1.51700, {.rel = 1e-15}));
  CHECK(close(n_at(crown, 0.6562725), 1.51432, {.rel = 1e-15}));
  CHECK(close(abbe_number(crown), 0.51700 / (1.52238 - 1.51432), {.rel = 1e-12}));
  CHECK(covers(crown, visible()));
  CHECK(message_of([&] { (void)n_at(crown, 0.4358343); }) ==
        "out_of_range: material crown: no index at 0.4358343 um; its source covers 0.4861327 to "
        "0.6562725 um");
}

TEST_CASE("material: outside its source's range it has no index, unless asked to extrapolate") {
  CHECK(message_of([] { (void)n_at(n_bk7(), 3.2); }) ==
        "out_of_range: material N-BK7: no index at 3.2 um; its source covers 0.3 to 2.5 um");
  CHECK(message_of([] { (void)index(n_bk7(), 0.29 * um, Surroundings{}); }) ==
        "out_of_range: material N-BK7: no index at 0.29 um; its source covers 0.3 to 2.5 um");
  const double beyond = index(n_bk7(), 3.2 * um, Extrapolate::yes);
  CHECK(beyond > 1.4);
  CHECK(beyond < n_at(n_bk7(), 2.5));
  CHECK(close(index(n_bk7(), 3.2 * um, Surroundings{}, Extrapolate::yes), beyond, {.rel = 1e-12}));
  CHECK(message_of([] { (void)index(n_bk7(), 10.1 * um, Extrapolate::yes); }) ==
        "out_of_range: material N-BK7: its formula gives no index at 10.1 um");
}

TEST_CASE("material: the ends of the range allow for rounding") {
  CHECK(n_at(n_bk7(), 2.5 * (1 + 1e-10)) > 1);
  CHECK(n_at(n_bk7(), 0.3 * (1 - 1e-10)) > 1);
  CHECK(message_of([] { (void)n_at(n_bk7(), 2.5 * (1 + 1e-8)); }).starts_with("out_of_range"));
  CHECK(message_of([] { (void)n_at(n_bk7(), 0.3 * (1 - 1e-8)); }).starts_with("out_of_range"));
  CHECK(covers(n_bk7(), Band::of_lines({0.3 * um, 2.5 * um}, "d")));
  CHECK_FALSE(covers(n_bk7(), Band::of_lines({0.29 * um, 2.5 * um}, "d")));
  CHECK_FALSE(covers(n_bk7(), Band::of_lines({"F", "C"}, 2.6 * um)));
}

TEST_CASE("material: wavelengths that are none") {
  for (const double bad : {0.0, -0.5, inf, -inf, not_a_number})
    for (const Extrapolate extrapolate : {Extrapolate::no, Extrapolate::yes}) {
      CAPTURE(bad);
      CHECK(message_of([&] {
              (void)index(n_bk7(), bad * um, extrapolate);
            }).starts_with("bad_value: material N-BK7: a wavelength of "));
    }
}

TEST_CASE(
    "material: a source in vacuum gets the wavelength there, and its index becomes relative") {
  const Material absolute = vacuum_source();
  for (const double wavelength_um : {0.31, 0.4358343, 0.5875618, 1.01398, 2.4}) {
    const double n_air = air_index(wavelength_um * um);
    const double plain = n_at(n_bk7(), in_um(vacuum_wavelength(wavelength_um * um)));
    CHECK(close(n_at(absolute, wavelength_um), plain / n_air, {.rel = 1e-15}));
  }
  // Feeding a vacuum wavelength to an air formula costs N-BK7 6.7e-6 in n_d.
  MaterialData data = n_bk7_data();
  data.wavelength_in = Medium::vacuum;
  CHECK(
      close(n_at(Material(data), 0.5875618) - n_at(n_bk7(), 0.5875618), -6.7e-6, {.abs = 0.5e-7}));
}

TEST_CASE("material: points in vacuum are hit there") {
  MaterialData data =
      data_of("lines", DispersionForm::through_lines, {0.45, 1.53, 0.55, 1.52, 0.65, 1.515});
  data.wavelength_in = Medium::vacuum;
  const Material lines(data);
  CHECK(close(index(lines, standard_air_wavelength(0.45 * um)), 1.53, {.rel = 1e-15}));
  CHECK(close(index(lines, standard_air_wavelength(0.65 * um)), 1.515, {.rel = 1e-15}));
}

TEST_CASE("surroundings: standard air changes nothing, for a source of 20 C") {
  const Surroundings standard = {
      .temperature = 20.0 * celsius, .pressure = 101325.0 * Pa, .humidity = 0};
  for (const Material& material : {n_bk7(), f2(), fcd1(), vacuum_source()})
    for (const double wavelength_um : {0.4, 0.5875618, 1.0}) {
      CAPTURE(material.name());
      CHECK(close(index(material, wavelength_um * um, standard), n_at(material, wavelength_um),
                  {.rel = 1e-12}));
    }
}

TEST_CASE("surroundings: in vacuum the index is the absolute one") {
  const double n = n_at(n_bk7(), 0.5875618);
  const double n_air = air_index(0.5875618 * um);
  CHECK(close(index(n_bk7(), 0.5875618 * um, at(20, 0)), n * n_air, {.rel = 1e-15}));
  const double absolute = n_at(n_bk7(), in_um(vacuum_wavelength(0.5875618 * um)));
  CHECK(close(index(vacuum_source(), 0.5875618 * um, at(20, 0)), absolute, {.rel = 1e-15}));
}

TEST_CASE("dn/dT: N-BK7 as its data sheet lists it") {
  // SCHOTT data sheet N-BK7: mean dn/dT, 1e-6/K, absolute and relative, at 1060.0 nm, e, g; one
  // decimal. (Quoted from a web copy. The sheet's air is Kohlrausch's, 1e-8 from ours.)
  struct Row {
    double from_C = 0, to_C = 0;
    std::array<double, 3> absolute = {}, relative = {};
  };
  constexpr std::array rows = {
      Row{-40, -20, {0.3, 0.8, 1.2}, {2.4, 2.9, 3.3}},
      Row{20, 40, {1.1, 1.6, 2.1}, {2.4, 3.0, 3.5}},
      Row{60, 80, {1.5, 2.1, 2.7}, {2.5, 3.1, 3.7}},
  };
  constexpr std::array lines_um = {1.0600, 0.546074, 0.4358343};
  const auto mean_slope = [](double um_value, const Row& row, double pressure_Pa) {
    const auto n = [&](double t) { return index(n_bk7(), um_value * um, at(t, pressure_Pa)); };
    return 1e6 * (n(row.to_C) - n(row.from_C)) / (row.to_C - row.from_C);
  };
  for (const Row& row : rows)
    for (std::size_t line = 0; line < 3; ++line) {
      CAPTURE(row.from_C);
      CAPTURE(lines_um[line]);
      CHECK(close(mean_slope(lines_um[line], row, 0), row.absolute[line], {.abs = 0.05}));
      CHECK(close(mean_slope(lines_um[line], row, 101325), row.relative[line], {.abs = 0.05}));
    }
}

TEST_CASE("dn/dT: the difference formula's derivative is the published derivative") {
  // P. Hartmann, Optical Glass, eq. 3.16:
  //   dn_abs/dT = (n^2-1)/(2n) [D0 + 2 D1 t + 3 D2 t^2 + (E0 + 2 E1 t)/(x^2 - x_TK^2)]
  const ThermalCoefficients c = *n_bk7_data().thermal;
  for (const double x : {0.4358343, 0.546074, 1.06})
    for (const double t : {-60.0, 0.0, 60.0}) {
      const double n = n_at(n_bk7(), x);
      const double want = (n * n - 1) / (2 * n) *
                          (c.d0 + 2 * c.d1 * t + 3 * c.d2 * t * t +
                           (c.e0 + 2 * c.e1 * t) / (x * x - c.lambda_tk_um * c.lambda_tk_um));
      const auto absolute = [&](double celsius_value) {
        return index(n_bk7(), x * um, at(celsius_value, 0));
      };
      const double got = (absolute(20 + t + 1) - absolute(20 + t - 1)) / 2;
      // A difference over 2 K is off by the third derivative alone, D2 (n^2-1)/(2n).
      CHECK(close(got, want, {.abs = 2e-11}));
    }
}

TEST_CASE("dn/dT: a constant acts on the index that it belongs to") {
  MaterialData data = n_bk7_data();
  data.thermal = {};
  data.thermal_constant = ThermalConstant{.dn_dt_per_K = -1e-5, .relative_to = Medium::air};
  const double n = n_at(n_bk7(), 0.5875618);
  CHECK(close(index(Material(data), 0.5875618 * um, at(60)), n - 4e-4, {.rel = 1e-14}));
  data.thermal_constant->relative_to = Medium::unknown;
  CHECK(close(index(Material(data), 0.5875618 * um, at(60)), n - 4e-4, {.rel = 1e-14}));
  data.thermal_constant->relative_to = Medium::vacuum;
  const double n_air = air_index(0.5875618 * um);
  CHECK(close(index(Material(data), 0.5875618 * um, at(60, 0)), n * n_air - 4e-4, {.rel = 1e-14}));
}

TEST_CASE("dn/dT: without it the index is used unchanged up to 5 K from its source") {
  const double absolute = n_at(f2(), 0.5875618) * air_index(0.5875618 * um);
  for (const double t : {15.0, 18.0, 25.0})
    CHECK(close(index(f2(), 0.5875618 * um, at(t, 0)), absolute, {.rel = 1e-15}));
  CHECK(message_of([] { (void)index(f2(), 0.5875618 * um, at(60)); }) ==
        "out_of_range: material F2: no index at 60 C; it has no dn/dT, and its index at 20 C is "
        "used unchanged within 5 K only");
  CHECK(message_of([] { (void)index(f2(), 0.5 * um, at(14.9)); }).starts_with("out_of_range"));
}

TEST_CASE("thermal notes: each says material and assumption") {
  using Texts = std::vector<std::string>;
  CHECK(thermal_notes(n_bk7(), at(60)).empty());
  CHECK(thermal_notes(f2(), at(20)).empty());
  CHECK(thermal_notes(f2(), at(22)) ==
        Texts{"material F2: no dn/dT; its index at 20 C is used unchanged at 22 C"});
  CHECK(thermal_notes(n_bk7(), at(-150)) ==
        Texts{"material N-BK7: dn/dT extrapolated to -150 C; its formula is published for -100 to "
              "140 C"});
  MaterialData data = n_bk7_data();
  data.thermal = {};
  data.thermal_constant = ThermalConstant{.dn_dt_per_K = 1e-5};
  data.index_relative_to = Medium::unknown;
  data.wavelength_in = Medium::unknown;
  CHECK(thermal_notes(Material(data), at(60)) ==
        Texts{"material N-BK7: its source does not say what its index is relative to; taken as "
              "relative to air",
              "material N-BK7: its source does not say where its wavelengths are measured; taken "
              "as in air",
              "material N-BK7: its source does not say what its dn/dT is relative to; taken as "
              "relative to air"});
}

TEST_CASE("surroundings: what they cannot be is refused here too") {
  CHECK(message_of([] {
          (void)index(n_bk7(), 0.5 * um, at(-300));
        }).starts_with("bad_value: surroundings: temperature in C -300"));
  CHECK(message_of([] {
          (void)index(n_bk7(), 0.5 * um, at(not_a_number));
        }).starts_with("bad_value: surroundings: "));
}

TEST_CASE("material: a handle that is not set") {
  const Material none;
  CHECK_FALSE(none.is_set());
  const std::string want = "not_set: a material is not set; take one from a catalogue";
  CHECK(message_of([&] { (void)none.name(); }) == want);
  CHECK(message_of([&] { (void)index(none, 0.5 * um); }) == want);
  CHECK(message_of([&] { (void)abbe_number(none); }) == want);
  CHECK(message_of([&] { (void)thermal_notes(none, {}); }) == want);
  CHECK(message_of([&] { (void)covers(none, visible()); }) == want);
}

TEST_CASE("material: names") {
  CHECK(n_bk7().name() == "N-BK7");
  CHECK(n_bk7().full_name() == "SCHOTT/N-BK7");
  CHECK(f2().full_name() == "F2");
}

TEST_CASE("material: data that are none") {
  CHECK(said({}) == "bad_value: a material has no name");
  CHECK(said({.name = "x"}) == "bad_value: material x: no coefficients");
  CHECK(said_of_changed([](MaterialData& d) { d.shortest = 3.0 * um; }) ==
        "bad_value: material N-BK7: a range of 3 to 2.5 um; expected two positive numbers, the "
        "shorter first");
  CHECK(said_of_changed([](MaterialData& d) {
          d.shortest = d.longest = 0.0 * um;
        }).starts_with("bad_value: material N-BK7: a range of 0 to 0 um"));
  for (const double bad : {inf, not_a_number, -1.0}) {
    CHECK(said_of_changed([&](MaterialData& d) { d.longest = bad * um; }).starts_with("bad_value"));
    CHECK(
        said_of_changed([&](MaterialData& d) { d.density_kg_m3 = bad; }).starts_with("bad_value"));
  }
  CHECK(said_of_changed([](MaterialData& d) { d.longest = 12.0 * um; }) ==
        "bad_value: material N-BK7: its formula has a pole within its range of 0.3 to 12 um");
  CHECK(said_of_changed([](MaterialData& d) { d.coefficients[0] = -5; }) ==
        "bad_value: material N-BK7: its formula gives no index above 0 at 0.3 um");
  CHECK(said_of_changed([](MaterialData& d) { d.coefficients[1] = inf; }) ==
        "bad_value: material N-BK7: a coefficient that is not a finite number");
  CHECK(said_of_changed([](MaterialData& d) { d.thermal->lambda_tk_um = -0.5; }) ==
        "bad_value: material N-BK7: its thermal formula has a pole within its range, at 0.5 um");
  CHECK(said_of_changed([](MaterialData& d) { d.thermal->d0 = not_a_number; }) ==
        "bad_value: material N-BK7: a thermal coefficient that is not a finite number");
  CHECK(said_of_changed([](MaterialData& d) { d.thermal_constant = ThermalConstant{inf}; }) ==
        "bad_value: material N-BK7: a dn/dT that is not a finite number");
  CHECK(said_of_changed([](MaterialData& d) { d.temperature = -300.0 * celsius; }) ==
        "bad_value: material N-BK7: a temperature of -300 C; expected one above absolute zero");
  CHECK(said_of_changed([](MaterialData& d) { d.expansion_per_K = inf; }) ==
        "bad_value: material N-BK7: an expansion that is not a finite number");
}

TEST_CASE("material: a range beyond the points of a list") {
  CHECK(said(data_of("x", DispersionForm::table, {0.4, 1.53, 0.5, 1.52, 0.6, 1.51, 0.7, 1.505}, 0.4,
                     0.8)) ==
        "bad_value: material x: a range of 0.4 to 0.8 um beyond its points, which cover 0.4 to 0.7 "
        "um");
  CHECK(said(data_of("x", DispersionForm::table, {0.4, 1.53, 0.5, 1.52, 0.6, 1.51, 0.7, 1.505}, 0.5,
                     0.7)) == "no error");
}

TEST_CASE("dispersion forms: names and back") {
  for (const DispersionForm form :
       {DispersionForm::sellmeier, DispersionForm::sellmeier_squared, DispersionForm::polynomial,
        DispersionForm::rational_polynomial, DispersionForm::cauchy, DispersionForm::herzberger,
        DispersionForm::through_lines, DispersionForm::table})
    CHECK(dispersion_form(to_string(form)) == form);
  CHECK(to_string(static_cast<DispersionForm>(99)) == "unknown");
  CHECK(message_of([] { (void)dispersion_form("sellmier"); }) ==
        "not_found: no dispersion form \"sellmier\"; the forms are sellmeier, sellmeier_squared, "
        "polynomial, rational_polynomial, cauchy, herzberger, through_lines, table");
}

TEST_CASE("status: the names that files use") {
  CHECK(to_string(Status::current) == "current");
  CHECK(to_string(Status::on_request) == "on_request");
  CHECK(to_string(Status::withdrawn) == "withdrawn");
  CHECK(to_string(Status::unknown) == "unknown");
}
