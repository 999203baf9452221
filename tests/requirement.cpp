// Requirements: names, factories, checks, default budgets and what is spent.
#include <doctest/doctest.h>

#include <chromacore/color.hpp>
#include <cmath>
#include <string>
#include <vector>

#include "close.hpp"
#include "make_train.hpp"
#include "message_of.hpp"

using namespace chromacore;
using namespace chromacore::test;
using namespace chromacore::units;

namespace {

// 100 mm, f/10.
Train achromat() { return train_of({thin(crown(), 0.0232), thin(flint(), -0.0132)}); }

RequirementResult result_of(const Train& train, const Requirement& requirement) {
  return analyze(train, {requirement}).requirements.at(0);
}

std::string refused(const Requirement& requirement) {
  return message_of([&] { check(requirement, achromat()); });
}

Requirement focal_length_with(std::optional<double> target, std::optional<double> at_least,
                              std::optional<double> at_most) {
  return {.target = target, .at_least = at_least, .at_most = at_most, .budget = 2};
}

}  // namespace

TEST_CASE("quantity: each name reads back") {
  int count = 0;
  for (int q = 0; q <= static_cast<int>(Quantity::lateral_sum); ++q, ++count) {
    CHECK(quantity(to_string(static_cast<Quantity>(q))) == static_cast<Quantity>(q));
  }
  CHECK(count == 16);
  CHECK(to_string(Quantity::petzval) == "petzval_per_mm");
  CHECK(to_string(Quantity::secondary_axial) == "secondary_axial_mm");
}

TEST_CASE("quantity: an unknown name is refused with the nearest") {
  CHECK(message_of([] { (void)quantity("focal_length"); }) ==
        "not_found: no quantity \"focal_length\"; nearest: focal_length_mm, track_length_mm");
  CHECK(message_of([] { (void)quantity("lateral_colour_mm"); }) ==
        "not_found: no quantity \"lateral_colour_mm\"; nearest: lateral_color_mm, axial_color_mm, "
        "lateral_sum_mm");
}

TEST_CASE("require: factories fill in what they say, in mm and 1/mm") {
  const Requirement focal = require::focal_length(500.0 * mm, 0.5 * mm);
  CHECK(focal.quantity == Quantity::focal_length);
  CHECK(focal.target == 500);
  CHECK(focal.budget == 0.5);
  CHECK_FALSE(focal.at_most);
  CHECK_FALSE(require::focal_length(500.0 * mm).budget);
  const Requirement back = require::back_focal_distance(90.0 * mm, 1.0 * mm);
  CHECK(back.quantity == Quantity::back_focal_distance);
  CHECK(back.target == 90);
  const Requirement image = require::image_distance(91.0 * mm, 2.0 * mm);
  CHECK(image.quantity == Quantity::image_distance);
  CHECK(image.target == 91);
  const Requirement track = require::track_length_at_most(120.0 * mm, 3.0 * mm);
  CHECK(track.quantity == Quantity::track_length);
  CHECK_FALSE(track.target);
  CHECK(track.at_most == 120);
  CHECK(track.budget == 3);
  const Requirement magnification = require::magnification(-1, 0.01);
  CHECK(magnification.quantity == Quantity::magnification);
  CHECK(magnification.target == -1);
  const Requirement petzval = require::petzval_at_most(0.002 * per_mm, Power(1.0 * per_m));
  CHECK(petzval.quantity == Quantity::petzval);
  CHECK(petzval.at_most == 0.002);
  CHECK(close(*petzval.budget, 0.001, {.rel = 1e-15}));
  const Requirement strength = require::strength_at_most(3, 0.1);
  CHECK(strength.quantity == Quantity::strength);
  CHECK(strength.at_most == 3);
  const Requirement axial = require::axial_color("F", "C", 0.0 * mm, 0.05 * mm);
  CHECK(axial.quantity == Quantity::axial_color);
  CHECK(axial.between->first.letter() == "F");
  CHECK(axial.between->second.letter() == "C");
  CHECK(axial.target == 0);
  CHECK(axial.budget == 0.05);
  const Requirement lateral = require::lateral_color("g", "d", 0.01 * mm);
  CHECK(lateral.quantity == Quantity::lateral_color);
  CHECK(lateral.target == 0.01);
  CHECK_FALSE(lateral.budget);
  CHECK(require::secondary_axial().quantity == Quantity::secondary_axial);
  CHECK(require::secondary_axial().target == 0);
  CHECK_FALSE(require::secondary_axial().between);
  CHECK(require::secondary_lateral(0.1 * mm, 0.2 * mm).quantity == Quantity::secondary_lateral);
  CHECK(require::secondary_lateral(0.1 * mm, 0.2 * mm).budget == 0.2);
}

TEST_CASE("check: what a requirement can't be") {
  CHECK(refused({.quantity = Quantity::petzval}) ==
        "bad_value: petzval_per_mm: nothing is asked; give target, at_least or at_most");
  CHECK(refused(focal_length_with(1, 2, {})) ==
        "bad_value: focal_length_mm: target stands beside at_least or at_most; give one or the "
        "other");
  CHECK(refused(focal_length_with({}, 20, 10)) ==
        "bad_value: focal_length_mm: at_least 20 is above at_most 10");
  CHECK(refused(focal_length_with(std::nan(""), {}, {})) ==
        "bad_value: focal_length_mm: a target or limit is not finite");
  CHECK(refused(focal_length_with({}, {}, HUGE_VAL)) ==
        "bad_value: focal_length_mm: a target or limit is not finite");
  for (const auto& [budget, text] :
       {std::pair{0.0, "0"}, {-1.5, "-1.5"}, {HUGE_VAL, "inf"}, {std::nan(""), "nan"}}) {
    CHECK(refused({.target = 100, .budget = budget}) ==
          std::string("bad_value: focal_length_mm: budget is ") + text +
              "; a budget is a number above 0");
  }
  CHECK(refused({.between = LinePair{"F", "C"}, .target = 100}) ==
        "bad_value: focal_length_mm: it has no pair of lines; leave between_um out");
  CHECK(refused({.quantity = Quantity::axial_color, .between = LinePair{"F", "F"}, .target = 0}) ==
        "bad_value: axial_color_mm: between_um names one line twice; give two");
  CHECK(refused({.quantity = Quantity::axial_color, .between = LinePair{"F", {}}, .target = 0}) ==
        "not_set: axial_color_mm: a line of between_um is not set; give two");
  CHECK(refused({.quantity = Quantity::axial_color, .element = 1, .target = 0}) ==
        "bad_value: axial_color_mm: it belongs to the whole train; leave element out");
  CHECK(refused({.quantity = Quantity::axial_sum, .element = 3, .target = 0}) ==
        "bad_value: axial_sum_mm: element 3 is not there; the train has 2");
  CHECK(refused({.quantity = Quantity::axial_sum, .element = -1, .target = 0}) ==
        "bad_value: axial_sum_mm: element -1 is not there; the train has 2");
  CHECK(refused({.quantity = Quantity::axial_sum, .element = 2, .target = 0}) == "no error");
  CHECK(refused(focal_length_with({}, 10, 10)) == "no error");
  // `analyze` checks too.
  CHECK(message_of([] { (void)analyze(achromat(), {{.quantity = Quantity::petzval}}); }) ==
        "bad_value: petzval_per_mm: nothing is asked; give target, at_least or at_most");
}

TEST_CASE("budget: without a default one has to be given") {
  for (int q = 0; q <= static_cast<int>(Quantity::lateral_sum); ++q) {
    const auto quantity = static_cast<Quantity>(q);
    if (quantity == Quantity::focal_length || quantity == Quantity::axial_color ||
        quantity == Quantity::lateral_color || quantity == Quantity::secondary_axial ||
        quantity == Quantity::secondary_lateral) {
      continue;
    }
    CHECK(message_of([&] { (void)analyze(achromat(), {{.quantity = quantity, .target = 1}}); }) ==
          "not_set: " + std::string(to_string(quantity)) +
              ": it has no default budget; give budget");
  }
}

TEST_CASE("budget: 0.1 % of the focal length that is asked for") {
  CHECK(close(*result_of(achromat(), require::focal_length(80.0 * mm)).requirement.budget, 0.08,
              {.rel = 1e-15}));
  CHECK(close(*result_of(achromat(), require::focal_length(-80.0 * mm)).requirement.budget, 0.08,
              {.rel = 1e-15}));
  CHECK(close(*result_of(achromat(), {.at_most = 200}).requirement.budget, 0.2, {.rel = 1e-15}));
  CHECK(message_of([] { (void)analyze(achromat(), {require::focal_length(0.0 * mm)}); }) ==
        "not_set: focal_length_mm: it has no default budget; give budget");
}

// http://www.telescope-optics.net/defocus1.htm, section 4.4, eq. 25: a quarter wave is +-2 lambda
// F^2. Recomputed from it: F 4 and 0.55 um, 17.6 um; F 10 and 0.5588 um, 111.76 um.
TEST_CASE("budget: axial colour, a quarter wave, as published") {
  const auto budget_um = [](double f_number, double wavelength_um) {
    Train train = train_of({thin(fixed_index(1.5), 0.01)});
    train.aperture = FNumber{f_number};
    train.band = Band::of_lines({0.5 * um, 0.6 * um}, wavelength_um * um);
    const RequirementResult axial =
        result_of(train, {.quantity = Quantity::axial_color, .target = 0});
    CHECK(result_of(train, require::secondary_axial()).requirement.budget ==
          axial.requirement.budget);
    return 1000 * *axial.requirement.budget;
  };
  CHECK(close(budget_um(4, 0.55), 17.6, {.abs = 0.5e-1}));
  CHECK(close(budget_um(10, 0.5588), 111.76, {.abs = 0.5e-2}));
}

// Edmund Optics, application note on resolution and the Airy disc: diameter 2.44 lambda N, 520 nm.
TEST_CASE("budget: lateral colour, the Airy radius, as published") {
  const double f_numbers[] = {1.4, 2, 2.8, 4, 5.6, 8, 11, 16};
  const double diameters_um[] = {1.78, 2.54, 3.55, 5.08, 7.11, 10.15, 13.96, 20.30};
  for (std::size_t i = 0; i < 8; ++i) {
    Train train = train_of({thin(fixed_index(1.5), 0.01)});
    train.aperture = FNumber{f_numbers[i]};
    train.band = Band::of_lines({0.5 * um, 0.6 * um}, 0.52 * um);
    const Requirement lateral = {.quantity = Quantity::lateral_color, .target = 0};
    const double radius_mm = *result_of(train, lateral).requirement.budget;
    CHECK(close(2000 * radius_mm, diameters_um[i], {.abs = 0.5e-2}));
    train.pixel = 0.00345 * mm;
    CHECK(result_of(train, lateral).requirement.budget == 0.00345);
    CHECK(result_of(train, require::secondary_lateral()).requirement.budget == 0.00345);
  }
}

TEST_CASE("budget: counts with the working f-number, that of the image side") {
  Train train = achromat();
  train.object_distance = 2.0 * first_order(train).focal_length;  // m = -1: N = 20
  const FirstOrder f = first_order(train);
  CHECK(close(f.working_f_number, 2 * *f.f_number, {.rel = 1e-12}));
  const double budget = *result_of(train, require::secondary_axial()).requirement.budget;
  CHECK(close(budget, 2 * 0.5875618e-3 * f.working_f_number * f.working_f_number, {.rel = 1e-14}));
}

TEST_CASE("residual: counts budgets on either side of a target, and beyond a limit only") {
  const double f = in_mm(first_order(achromat()).focal_length);
  const auto residual = [](const Requirement& r) { return result_of(achromat(), r).residual; };
  CHECK(close(residual(focal_length_with(f - 5, {}, {})), 2.5, {.rel = 1e-12}));
  CHECK(close(residual(focal_length_with(f + 5, {}, {})), -2.5, {.rel = 1e-12}));
  CHECK(residual(focal_length_with({}, f - 1, f + 1)) == 0);
  CHECK(residual(focal_length_with({}, f, {})) == 0);
  CHECK(close(residual(focal_length_with({}, f + 4, f + 6)), -2, {.rel = 1e-12}));
  CHECK(close(residual(focal_length_with({}, f - 6, f - 4)), 2, {.rel = 1e-12}));
  const RequirementResult under = result_of(achromat(), focal_length_with({}, f + 4, {}));
  CHECK(close(under.spent(), 2, {.rel = 1e-12}));
  CHECK_FALSE(under.met());
  CHECK(result_of(achromat(), focal_length_with({}, f + 1.5, {})).met());
  CHECK(under.value == f);
}

TEST_CASE("requirement: values are those of the analysis, over any lines") {
  Train train = achromat();
  train.stop.offset = -12.0 * mm;
  train.object_distance = 700.0 * mm;
  const auto value = [&](Requirement r) {
    r.target = 0;
    r.budget = 1;
    return result_of(train, r).value;
  };
  const Analysis a = analyze(train);
  CHECK(value({.quantity = Quantity::focal_length}) == in_mm(a.focal_length));
  CHECK(value({.quantity = Quantity::back_focal_distance}) == in_mm(a.back_focal_distance));
  CHECK(value({.quantity = Quantity::image_distance}) == in_mm(a.image_distance));
  CHECK(value({.quantity = Quantity::track_length}) == in_mm(a.track_length));
  CHECK(value({.quantity = Quantity::magnification}) == a.magnification);
  CHECK(value({.quantity = Quantity::f_number}) == *a.f_number);
  CHECK(value({.quantity = Quantity::petzval}) == in_per_mm(a.petzval));
  CHECK(close(value({.quantity = Quantity::strength}), 3.64, {.rel = 1e-13}));
  CHECK(value({.quantity = Quantity::entrance_pupil_position}) ==
        in_mm(*a.entrance_pupil_position));
  CHECK(value({.quantity = Quantity::exit_pupil_position}) == in_mm(*a.exit_pupil_position));
  CHECK(value({.quantity = Quantity::axial_color}) == in_mm(a.axial_color));
  CHECK(value({.quantity = Quantity::lateral_color}) == in_mm(a.lateral_color));
  CHECK(value({.quantity = Quantity::secondary_axial}) == in_mm(a.secondary_axial));
  CHECK(value({.quantity = Quantity::secondary_lateral}) == in_mm(a.secondary_lateral));
  CHECK(value({.quantity = Quantity::axial_sum}) == in_mm(a.axial_sum));
  CHECK(value({.quantity = Quantity::lateral_sum}) == in_mm(a.lateral_sum));
  CHECK(value({.quantity = Quantity::axial_sum, .element = 2}) == in_mm(a.elements[1].axial_sum));
  // First minus second, lines that the band does not have included.
  const LinePair there = {"g", "C"};
  const LinePair back = {"C", "g"};
  CHECK(value({.quantity = Quantity::axial_color, .between = there}) ==
        -value({.quantity = Quantity::axial_color, .between = back}));
  CHECK(value({.quantity = Quantity::lateral_sum, .between = there}) ==
        in_mm(color_sums(train, there).lateral));
}

TEST_CASE("requirement: what a train does not have can't be required") {
  Train train = train_of({thin(crown(), 0.0125)});
  train.stop.offset = -80.0 * mm;
  const auto message = [&](Quantity quantity) {
    return message_of(
        [&] { (void)analyze(train, {{.quantity = quantity, .target = 1, .budget = 1}}); });
  };
  CHECK(message(Quantity::exit_pupil_position) ==
        "degenerate: the exit pupil is at infinity (telecentric), so that it has no position or "
        "diameter to require; leave that out");
  train.object_distance = 120.0 * mm;
  train.stop = {.element = 1, .side = Side::back, .offset = 80.0 * mm};
  train.aperture = ObjectNa{0.05};
  train.field = ObjectHeight{6.0 * mm};
  CHECK(message(Quantity::entrance_pupil_position) ==
        "degenerate: the entrance pupil is at infinity (telecentric), so that it has no position "
        "or diameter to require; leave that out");
  train = train_of({thin(crown(), 0.01, 150), thin(crown(), 0.02)});
  train.object_distance = 80.0 * mm;
  for (const Quantity q : {Quantity::focal_length, Quantity::back_focal_distance,
                           Quantity::strength, Quantity::f_number}) {
    CHECK(message(q).starts_with("degenerate: no focus: the train's total power is"));
  }
  CHECK(message(Quantity::image_distance) == "no error");
}
