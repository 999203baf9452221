// Closed forms of colour correction against published worked examples, and against laws.
#include <doctest/doctest.h>

#include <array>
#include <chromacore/catalog.hpp>
#include <chromacore/closed_form.hpp>
#include <chromacore/color.hpp>
#include <cmath>
#include <random>

#include "close.hpp"
#include "message_of.hpp"

using namespace chromacore;
using namespace chromacore::test;
using namespace chromacore::units;

namespace {

Power power_of(Length focal_length) { return 1.0 / focal_length; }
double focal_length_mm(Power power) { return 1.0 / in_per_mm(power); }

// Focal lengths of the pair, in the unit of f; dispersive powers omega = 1/V.
std::array<double, 2> pair_of(double f, double omega_a, double omega_b) {
  const auto [a, b] = contact_achromat(power_of(f * mm), 1.0 / omega_a, 1.0 / omega_b);
  return {focal_length_mm(a), focal_length_mm(b)};
}

// The other radius of a thin lens in air, 1/f = (n - 1)(1/r1 - 1/r2); radii positive when the
// centre lies to the right.
double front_radius(double f, double n, double back_radius) {
  return 1.0 / (1.0 / (f * (n - 1.0)) + 1.0 / back_radius);
}
double back_radius(double f, double n, double front_radius) {
  return 1.0 / (1.0 / front_radius - 1.0 / (f * (n - 1.0)));
}

Band visible() { return Band::of_lines({"F", "d", "C"}, "d"); }

const Catalog& catalog() {
  static const Catalog built_in = Catalog::built_in();
  return built_in;
}

VAndP v_and_p(const Material& material, const Band& band) {
  return {v_number(material, band),
          partial_dispersion(material, {band.reference, band.longest()}, band)};
}

}  // namespace

TEST_CASE("contact achromat: published pairs of focal lengths") {
  SUBCASE("T1: wizedu.com, question 65262") {
    const auto [f1, f2] = pair_of(100, 1 / 57.4, 1 / 31.2);
    CHECK(close(f1, 45.6, {.abs = 0.05}));
    CHECK(close(f2, -83.97, {.abs = 0.005}));
    const double r1 = 2 * f1 * 0.573;  // equi-convex
    CHECK(close(r1, 52.3, {.abs = 0.05}));
    // The page cuts 545.351 to 545.3.
    CHECK(close(back_radius(f2, 1.689, -r1), -545.3, {.abs = 0.1}));
  }
  SUBCASE("T2: Geometrical and Visual Optics, appendix F, with its ratio 59/37 rounded to 1.59") {
    const auto [a, b] = contact_achromat(Power(6.0 * per_m), 1.59 * 37, 37);
    CHECK(close(1e3 * in_per_mm(a), 16.17, {.abs = 0.005}));
    CHECK(close(1e3 * in_per_mm(b), -10.17, {.abs = 0.005}));
  }
  SUBCASE("T4: tardigrade.in, AFMC 2000; omega 3 : 4, 60 cm") {
    const auto [f1, f2] = pair_of(60, 3, 4);
    CHECK(close(f1, 15, {.rel = 1e-14}));
    CHECK(close(f2, -20, {.rel = 1e-14}));
  }
  SUBCASE("T19: the entry Achromatic doublet of an online optics course") {
    // It prints V 64.2 and 36.4, but took 27.83 for their difference: 64.23.
    const auto [f1, f2] = pair_of(200, 1 / 64.23, 1 / 36.4);
    CHECK(close(f1, 86.7, {.abs = 0.05}));
    CHECK(close(f2, -152.9, {.abs = 0.05}));
    CHECK(close(1e3 / f1, 11.5, {.abs = 0.05}));
    CHECK(close(1e3 / f2, -6.5, {.abs = 0.05}));
  }
  SUBCASE("T15: P. V. Naik, Principles of Physics, ex. 7.2, p. 115; its signs are turned round") {
    const auto [f1, f2] = pair_of(-15, 0.01506, 0.02427);
    CHECK(close(f1, -5.7, {.abs = 0.05}));
    CHECK(close(f2, 9.2, {.abs = 0.05}));
  }
}

TEST_CASE("contact achromat: published radii of cemented pairs, in cm") {
  SUBCASE("T7, T8: P. S. Khare and A. Swarup, ex. 3.12, p. 114; N. Mehta, ex. 4.11, p. 197") {
    const auto [f1, f2] = pair_of(40, 0.017, 0.034);
    CHECK(close(front_radius(f1, 1.5, -25), 16.67, {.abs = 0.005}));
    CHECK(close(back_radius(f2, 1.7, -25), -233.33, {.abs = 0.005}));  // Khare: sign turned round
  }
  SUBCASE("T9: Khare and Swarup, ex. 3.13, p. 115") {
    const auto [f1, f2] = pair_of(20, 0.01, 0.02);
    const double joint = f2 * (1.60 - 1);  // the flint is flat outside
    CHECK(close(joint, -12, {.abs = 0.5}));
    CHECK(close(front_radius(f1, 1.50, joint), 8.6, {.abs = 0.05}));
  }
  SUBCASE("T10: Khare and Swarup, ex. 3.11, p. 113") {
    const double omega1 = (1.55 - 1.53) / (1.54 - 1);
    const double f1 = 54 / (2 * 0.54);  // equi-convex
    const double f2 = 1 / (1 / 150.0 - 1 / f1);
    const double omega2 = -omega1 * f2 / f1;
    CHECK(close(omega2, 0.056, {.abs = 0.0005}));
    CHECK(close(pair_of(150, omega1, omega2)[0], f1, {.rel = 1e-13}));
    CHECK(close(pair_of(150, omega1, omega2)[1], f2, {.rel = 1e-13}));
  }
  SUBCASE("T16: Naik, ex. 7.3, p. 115; its signs of focal lengths are turned round") {
    const auto [f1, f2] = pair_of(20, 0.015, 0.019);
    const double joint = f2 * (1.53 - 1);
    CHECK(close(joint, -2.8, {.abs = 0.05}));
    CHECK(close(front_radius(f1, 1.495, joint), 7.9, {.abs = 0.05}));
  }
  SUBCASE("R1, from memory: Pedrotti and Pedrotti, Introduction to Optics, ch. 20") {
    const double v1 = (1.52015 - 1) / (1.52582 - 1.51764);
    const double v2 = (1.61715 - 1) / (1.62904 - 1.61218);
    const auto [f1, f2] = pair_of(15, 1 / v1, 1 / v2);
    const double r1 = 2 * f1 * 0.52015;
    CHECK(close(r1, 6.6218, {.abs = 0.5e-4}));
    CHECK(close(back_radius(f2, 1.61715, -r1), -223.29, {.abs = 0.005}));
  }
  SUBCASE("R2, from memory: E. Hecht, Optics, ch. 6; in m") {
    const auto [f1, f2] = pair_of(0.5, 1 / 63.46, 1 / 36.37);
    CHECK(close(1 / f1, 4.685, {.abs = 0.0005}));
    CHECK(close(1 / f2, -2.685, {.abs = 0.0005}));
    CHECK(close(f1, 0.2134, {.abs = 0.5e-4}));
    CHECK(close(f2, -0.3724, {.abs = 0.5e-4}));
    const double r1 = 2 * f1 * 0.51009;
    CHECK(close(r1, 0.2177, {.abs = 0.5e-4}));
    CHECK(close(back_radius(f2, 1.62004, -r1), -3.819, {.abs = 0.0005}));
  }
}

TEST_CASE("contact achromat: says why it cannot") {
  CHECK(message_of([] { (void)contact_achromat(Power(2.0 * per_m), 60, 60); }) ==
        "degenerate: the two materials have equal V, 60 and 60: no powers of theirs cancel their "
        "colour; take materials of different V");
  CHECK(message_of([] { (void)contact_achromat(Power(0.0 * per_m), 60, 36); }) ==
        "bad_value: the total power is 0; expected a number other than 0");
  CHECK(message_of([] { (void)contact_achromat(Power(2.0 * per_m), NAN, 36); }) ==
        "bad_value: V of the first material is nan; expected a number other than 0");
  const Material glass = catalog().at("N-BK7");
  CHECK(message_of([&] {
          (void)contact_achromat(Power(2.0 * per_m), glass, glass, visible());
        }).starts_with("degenerate: the two materials have equal V, 64.1673 and 64.1673"));
}

// Source of the construction: R. E. Stephens, J. Opt. Soc. Am. 49, 398 (1959): two materials stand
// for one whose (V, P) lies on the line through theirs; where its P is the third one's, an achromat
// of the two has no secondary spectrum.
TEST_CASE("contact apochromat: the same powers as by Stephens' construction") {
  const Band band = visible();
  const Material a = catalog().at("N-FK51A");
  const Material b = catalog().at("N-KZFS4");
  const Material c = catalog().at("N-SF6");
  const VAndP at_a = v_and_p(a, band);
  const VAndP at_b = v_and_p(b, band);
  const VAndP at_c = v_and_p(c, band);
  const double share = (at_b.p_ref_long - at_c.p_ref_long) / (at_a.p_ref_long - at_c.p_ref_long);
  const double v_equivalent = at_c.v + share * (at_a.v - at_c.v);  // of a and c, at P of b
  const auto [pair, single] = contact_achromat(Power(2.0 * per_m), v_equivalent, at_b.v);
  const auto powers = contact_apochromat(Power(2.0 * per_m), a, b, c, band);
  CHECK(close(in_per_mm(powers[1]), in_per_mm(single), {.rel = 1e-12}));
  CHECK(close(in_per_mm(powers[0] + powers[2]), in_per_mm(pair), {.rel = 1e-12}));
  // Of the pair, phi_i/V_i stands in the ratio of the shares.
  const double part_a = in_per_mm(powers[0]) / at_a.v;
  const double part_c = in_per_mm(powers[2]) / at_c.v;
  CHECK(close(part_a / (part_a + part_c), share, {.rel = 1e-11}));
}

TEST_CASE("contact apochromat: the exact paraxial foci of F, d and C fall together") {
  const Band band = visible();
  const std::array<const char*, 3> names = {"N-FK51A", "N-KZFS4", "N-SF6"};
  const auto powers = contact_apochromat(Power(2.0 * per_m), catalog().at(names[0]),
                                         catalog().at(names[1]), catalog().at(names[2]), band);
  Train train;
  train.band = band;
  train.aperture = EntrancePupilDiameter{50.0 * mm};
  train.field = HalfAngle{1.0 * deg};
  for (std::size_t i = 0; i < 3; ++i)
    train.elements.push_back(Thin{catalog().at(names[i]), powers[i]});
  const Analysis analysis = analyze(train);
  CHECK(close(in_mm(analysis.focal_length), 500, {.rel = 1e-13}));
  CHECK(close(in_mm(analysis.axial_color), 0, {.abs = 1e-10}));
  CHECK(close(in_mm(analysis.secondary_axial), 0, {.abs = 1e-10}));
}

TEST_CASE("contact apochromat: collinear materials are refused with the strength they need") {
  const std::array<VAndP, 3> collinear = {{{80, 0.30}, {60, 0.31}, {40, 0.32}}};
  const std::string message =
      message_of([&] { (void)contact_apochromat(Power(2.0 * per_m), collinear); });
  CHECK(message.starts_with(
      "degenerate: the three materials lie on one line of P against V (V 80, P 0.3; V 60, P 0.31; "
      "V "
      "40, P 0.32): three colours would need a strength, sum |phi_i| over the total, of "));
  CHECK(message.ends_with(", where 1000 is the limit; take one material off that line"));
  const Material glass = catalog().at("N-BK7");
  CHECK(message_of([&] {
          (void)contact_apochromat(Power(2.0 * per_m), glass, catalog().at("N-SF6"), glass,
                                   visible());
        }).starts_with("degenerate: the three materials lie on one line"));
}

TEST_CASE("spacing without lateral colour: published eyepieces and pairs") {
  const auto spacing = [](double f_a, double v_a, double f_b, double v_b) {
    return in_mm(lateral_color_spacing(f_a * mm, v_a, f_b * mm, v_b));
  };
  // T26: Khare and Swarup, ex. 3.15, p. 117; cm.
  CHECK(close(spacing(20, 1 / 0.01, 30, 1 / 0.02), 23.33, {.abs = 0.005}));
  CHECK(close(spacing(20, 60, 30, 60), 25, {.rel = 1e-14}));
  // T28: the same book, ex. 3.4, p. 97, Huygens' eyepiece.
  CHECK(close(spacing(12, 60, 4, 60), 8, {.rel = 1e-14}));
  // T29: ex. 3.5, p. 98; Mehta, ex. 4.20, p. 204: lenses 5 and 15, F 7.5 cm.
  CHECK(close(spacing(15, 60, 5, 60), 10, {.rel = 1e-14}));
  CHECK(close(15.0 * 5.0 / (15 + 5 - spacing(15, 60, 5, 60)), 7.5, {.rel = 1e-14}));
  // T31: ex. 3.6, p. 101, Ramsden's with 2f/3, 16, 16, 10.67 cm, F = 12: it keeps its colour.
  CHECK(close(16.0 * 16.0 / (32 - 32 / 3.0), 12, {.rel = 1e-14}));
  CHECK(close(spacing(16, 60, 16, 60), 16, {.rel = 1e-14}));
  // T37: sarthaks.com/397433, Huygens' of 3f and f.
  CHECK(close(spacing(3, 60, 1, 60), 2, {.rel = 1e-14}));
}

TEST_CASE("spacing without lateral colour: says why it cannot") {
  CHECK(message_of([] { (void)lateral_color_spacing(-50.0 * mm, 60, 20.0 * mm, 60); }) ==
        "degenerate: the spacing without lateral colour would be -15 mm; two lenses of positive "
        "power always have one above 0");
  CHECK(message_of([] { (void)lateral_color_spacing(0.0 * mm, 60, 20.0 * mm, 60); }) ==
        "bad_value: the first focal length is 0; expected a number other than 0");
}

namespace {

// The two conditions of a dialyte by themselves.
void check_dialyte(Power total, double v_a, double v_b, double d) {
  CAPTURE(v_a);
  CAPTURE(v_b);
  CAPTURE(d);
  const Dialyte found = dialyte(total, v_a, v_b, d * mm);
  const double a = in_per_mm(found.front);
  const double b = in_per_mm(found.back);
  const double k = 1 - d * a;
  CHECK(close(a + k * b, in_per_mm(total), {.rel = 1e-11}));
  CHECK(close(a / v_a + k * k * b / v_b, 0, {.abs = 1e-12 * std::abs(a / v_a)}));
  CHECK(close(in_mm(found.back_focal_distance), k / in_per_mm(total), {.rel = 1e-12}));
}

}  // namespace

TEST_CASE("dialyte: focal length and colour at any spacing within reach") {
  const Power total = power_of(100.0 * mm);
  std::mt19937_64 random(test_seed());
  CAPTURE(test_seed());
  std::uniform_real_distribution<double> v(20, 90);
  std::uniform_real_distribution<double> unit(0, 1);
  for (int i = 0; i < 200; ++i) {
    const double v_a = v(random);
    const double v_b = v(random);
    const double limit = 100 * std::pow(1 - std::sqrt(v_b / v_a), 2);
    check_dialyte(total, v_a, v_b, 0.999 * limit * unit(random));
    check_dialyte(-total, v_a, v_b, 100 * unit(random));
    check_dialyte(total, v_a, -3.45, 100 * unit(random));  // diffractive behind
  }
}

TEST_CASE("dialyte: goes over into the achromat in contact") {
  for (const double v_b : {36.0, 90.0, -3.45}) {
    const auto contact = contact_achromat(power_of(100.0 * mm), 60, v_b);
    for (const double d : {0.0, 1e-9}) {
      const Dialyte near = dialyte(power_of(100.0 * mm), 60, v_b, d * mm);
      CHECK(close(in_per_mm(near.front), in_per_mm(contact[0]), {.rel = 1e-9}));
      CHECK(close(in_per_mm(near.back), in_per_mm(contact[1]), {.rel = 1e-9}));
    }
  }
}

TEST_CASE("dialyte: the exact paraxial colour follows from the sums") {
  const Band band = visible();
  const Material a = catalog().at("N-BK7");
  const Material b = catalog().at("SCHOTT/F2");
  const Dialyte found =
      dialyte(power_of(100.0 * mm), v_number(a, band), v_number(b, band), 4.0 * mm);
  Train train;
  train.band = band;
  train.aperture = EntrancePupilDiameter{10.0 * mm};
  train.field = HalfAngle{1.0 * deg};
  train.elements = {Thin{a, found.front, 4.0 * mm}, Thin{b, found.back}};
  const Analysis analysis = analyze(train);
  CHECK(close(in_mm(analysis.focal_length), 100, {.rel = 1e-12}));
  CHECK(
      close(in_mm(analysis.back_focal_distance), in_mm(found.back_focal_distance), {.rel = 1e-12}));
  CHECK(close(in_mm(analysis.axial_sum), 0, {.abs = 1e-12}));
}

TEST_CASE("dialyte: a spacing out of reach names what is in reach") {
  CHECK(message_of([] { (void)dialyte(power_of(100.0 * mm), 60, 36, 10.0 * mm); }) ==
        "degenerate: a spacing of 10 mm is out of reach for V 60 in front of 36 and a focal length "
        "of 100 mm: it reaches from 0 to 5.08067 mm; a larger ratio of V reaches further");
  CHECK(message_of([] { (void)dialyte(power_of(100.0 * mm), 60, 60, 10.0 * mm); }) ==
        "degenerate: a spacing of 10 mm is out of reach for V 60 in front of 60 and a focal length "
        "of 100 mm: with equal V no spacing will do; take materials of different V");
  CHECK(message_of([] { (void)dialyte(power_of(100.0 * mm), 60, 36, -1.0 * mm); }) ==
        "bad_value: the spacing is -1 mm; expected 0 or more");
}
