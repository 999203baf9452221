// First order: published cases, and what has no focus or no pupil.
#include <doctest/doctest.h>

#include <chromacore/paraxial.hpp>
#include <cmath>
#include <limits>
#include <utility>

#include "close.hpp"
#include "make_train.hpp"
#include "message_of.hpp"

using namespace chromacore;
using namespace chromacore::test;
using namespace chromacore::units;

namespace {

double focal_length_mm(const Train& train) { return in_mm(first_order(train).focal_length); }

double back_focal_distance_mm(const Train& train) {
  return in_mm(first_order(train).back_focal_distance);
}

// From the first vertex to the front focus, positive to the right.
double front_focal_distance_mm(const Train& train) {
  return -back_focal_distance_mm(reversed(train));
}

// Principal points, from the first and from the last vertex, positive to the right.
double first_principal_mm(const Train& train) {
  return front_focal_distance_mm(train) + focal_length_mm(train);
}
double second_principal_mm(const Train& train) {
  return back_focal_distance_mm(train) - focal_length_mm(train);
}

// By radii; all lengths may be read in any one unit.
Thick lens(double n, double front_radius, double back_radius, double thickness,
           double gap_after = 0) {
  Thick element = thick(fixed_index(n), 0, 0, thickness, gap_after);
  element.front = radius(front_radius * mm);
  element.back = radius(back_radius * mm);
  return element;
}

constexpr double kFlat = std::numeric_limits<double>::infinity();

// The doublet of K1 and K2.
Train smith_doublet() { return train_of({lens(1.5, 50, -50, 10), lens(1.6, -50, kFlat, 2)}); }

// The triplet of K3.
Train smith_triplet() {
  Train train = train_of({lens(1.61272, 37.40, -341.48, 5.90, 12.93),
                          lens(1.64769, -42.65, 36.40, 2.50, 2.00 + 9.85),
                          lens(1.61272, 204.52, -37.05, 5.90)});
  train.stop = {.element = 2, .side = Side::back, .offset = 2.00 * mm};
  train.aperture = EntrancePupilDiameter{2 * 0.1443 * 101.181 * mm};
  train.field = HalfAngle{11.860 * deg};
  return train;
}

// Both lenses thin and of one material.
Train two_lenses(double f1, double f2, double distance) {
  const Material material = glass_of(1.5, 60);
  return train_of({thin(material, 1 / f1, distance), thin(material, 1 / f2)});
}

}  // namespace

// ---- published ----

// W. J. Smith, Modern Optical Engineering, McGraw-Hill, pp. 41-43, example 3.1. Its arithmetic cuts
// some figures after the digits that it prints; those may differ by one unit of the last.
TEST_CASE("trace: both rays through a cemented doublet are as published") {
  Train train = smith_doublet();
  train.object_distance = 300.0 * mm;
  train.aperture = ObjectNa{10.0 / 300};
  train.field = ObjectHeight{20.0 * mm};
  const std::vector<TracePoint> points = trace(train, "d");
  REQUIRE(points.size() == 4);  // each lens has two vertices; the joint is there twice
  CHECK(points[0].element == 1);
  CHECK(points[0].side == Side::front);
  CHECK(points[2].element == 2);
  CHECK(points[3].side == Side::back);
  CHECK(close(1.5 * points[0].marginal_slope, -0.0666, {.abs = 1e-4}));    // cut
  CHECK(close(in_mm(points[1].marginal_height), 9.555, {.abs = 1e-3}));    // cut
  CHECK(close(1.6 * points[2].marginal_slope, -0.047555, {.abs = 1e-6}));  // cut
  CHECK(close(points[3].marginal_slope, -0.047555, {.abs = 1e-6}));        // cut
  CHECK(close(in_mm(points[3].marginal_height), 9.496111, {.abs = 0.5e-6}));
  CHECK(close(in_mm(points[3].chief_height), -0.52888, {.abs = 1e-5}));  // cut
  CHECK(close(points[3].chief_slope, -0.067555, {.abs = 1e-6}));         // cut
  const FirstOrder f = first_order(train);
  CHECK(close(in_mm(f.image_distance), 199.6846, {.abs = 0.5e-4}));
  CHECK(close(20 * f.magnification, -14.0187, {.abs = 0.5e-4}));
  CHECK(close(in_mm(f.lagrange_invariant), 20.0 / 30, {.rel = 1e-14}));  // exact there
}

// The same book, p. 45.
TEST_CASE("first order: focal lengths of a cemented doublet are as published") {
  const Train train = smith_doublet();
  CHECK(close(focal_length_mm(train), 122.950820, {.abs = 0.5e-6}));
  CHECK(close(back_focal_distance_mm(train), 113.504098, {.abs = 0.5e-6}));
  CHECK(close(front_focal_distance_mm(train), -124.590164, {.abs = 0.5e-6}));
}

// The same book, p. 119.
TEST_CASE("first order: a triplet with its stop inside is as published") {
  const Train train = smith_triplet();
  const FirstOrder f = first_order(train);
  CHECK(close(in_mm(f.focal_length), 101.181, {.abs = 0.5e-3}));
  CHECK(close(in_mm(f.back_focal_distance), 77.405, {.abs = 0.5e-3}));
  CHECK(close(in_mm(f.track_length - f.image_distance), 39.08, {.abs = 0.5e-2}));
  CHECK(close(f.working_f_number, 3.47, {.abs = 0.5e-2}));
  CHECK(close(-1 / (in_per_mm(f.petzval) * in_mm(f.focal_length)), -2.935, {.abs = 0.5e-3}));
  const TracePoint last = trace(train, "d").back();
  const double image_height = in_mm(last.chief_height) + last.chief_slope * in_mm(f.image_distance);
  CHECK(close(image_height, 21.248, {.abs = 0.5e-3}));
}

// Assignment of a university course, exercises 6.20 and 6.23 of E. Hecht, Optics; solution at
// https://www.coursehero.com/file/6474706/Assignment3-solution-updata/
TEST_CASE("first order: a thick biconvex lens is as published") {
  const Train train = train_of({lens(1.5, 0.5, -0.25, 0.3)});
  CHECK(close(focal_length_mm(train), 0.385, {.abs = 0.5e-3}));
  CHECK(close(front_focal_distance_mm(train), -0.23, {.abs = 0.5e-2}));
  CHECK(close(back_focal_distance_mm(train), 0.31, {.abs = 0.5e-2}));
}

// Die Elemente der Photographischen Optik (Ergaenzungsband), ch. 1, pp. 42-45 and 108,
// https://goobi.tib.eu/viewer/fulltext/1744455848/61 , /62 , /64 , /127
TEST_CASE("first order: single thick lenses of an old textbook") {
  SUBCASE("plano-convex") {
    const Train train = train_of({lens(1.5, 5, kFlat, 0.5)});
    CHECK(close(focal_length_mm(train), 10.000, {.abs = 0.5e-3}));
    CHECK(close(back_focal_distance_mm(train), 9.667, {.abs = 0.5e-3}));
    CHECK(close(second_principal_mm(train), -0.333, {.abs = 0.5e-3}));
    CHECK(close(first_principal_mm(train), 0, {.abs = 0.5e-3}));
  }
  SUBCASE("sphere") {
    const Train train = train_of({lens(1.5, 5, -5, 10)});
    CHECK(close(focal_length_mm(train), 7.5, {.abs = 0.5e-1}));
    CHECK(close(back_focal_distance_mm(train), 2.5, {.abs = 0.5e-1}));
    CHECK(close(first_principal_mm(train), 5, {.abs = 1e-12}));  // at its centre
    CHECK(close(second_principal_mm(train), -5, {.abs = 1e-12}));
    CHECK(close(1 / in_per_mm(first_order(train).petzval), 7.5, {.abs = 0.5e-1}));
  }
  SUBCASE("concentric meniscus") {
    // Printed -40.016, -35.014, 8.003, 5.002 from a rounded curvature; these are the exact figures.
    const Train train = train_of({lens(1.5, 8, 5, 3)});
    CHECK(close(focal_length_mm(train), -40, {.rel = 1e-13}));
    CHECK(close(back_focal_distance_mm(train), -35, {.rel = 1e-13}));
    CHECK(close(first_principal_mm(train), 8, {.rel = 1e-12}));
    CHECK(close(second_principal_mm(train), 5, {.rel = 1e-12}));
  }
}

// Worked answer of the textbook type, in cm:
// https://transtutors.com/questions/the-entrance-pupil-is-the-aperture-stop-8757590.htm
TEST_CASE("first order: the exit pupil of a stop ahead of a thin lens is as published") {
  Train train = train_of({thin(fixed_index(1.5), 1.0 / 5)});
  train.object_distance = 10.0 * mm;
  train.stop.offset = -2.0 * mm;
  train.aperture = EntrancePupilDiameter{2.0 * mm};
  train.field = ObjectHeight{2.0 * mm};
  const FirstOrder f = first_order(train);
  REQUIRE(f.exit_pupil_position);
  const double position = in_mm(*f.exit_pupil_position);
  CHECK(close(position, -3.33, {.abs = 0.5e-2}));
  const TracePoint last = trace(train, "d").back();
  const double size = 2 * (in_mm(last.marginal_height) + position * last.marginal_slope);
  CHECK(close(size, 3.33, {.abs = 0.5e-2}));
  CHECK(close(in_mm(f.image_distance), 10, {.rel = 1e-14}));
  CHECK(close(f.magnification, -1, {.rel = 1e-14}));
  CHECK(close(in_mm(*f.entrance_pupil_position), -2, {.rel = 1e-15}));
}

// P. S. Khare, A. Swarup, The Fundamentals of Engineering Physics (2008), ex. 3.4 to 3.6, pp. 97 to
// 101, in cm, as transcribed in github.com/FOSSEE/Scilab-TBC-Uploads; N. Mehta, Applied Physics for
// Engineers (2011), ex. 4.20.
TEST_CASE("first order: eyepieces of two separated lenses are as published") {
  SUBCASE("Huygens, 12 and 4 at 8") {
    Train train = two_lenses(12, 4, 8);
    CHECK(close(focal_length_mm(train), 6, {.rel = 1e-14}));
    CHECK(close(first_principal_mm(train), 12, {.rel = 1e-13}));
    CHECK(close(second_principal_mm(train), -4, {.rel = 1e-13}));
    CHECK(close(front_focal_distance_mm(train), 6, {.rel = 1e-13}));
    CHECK(close(back_focal_distance_mm(train), 2, {.rel = 1e-13}));
    train.object_distance = (18.0 - 12.0) * mm;  // 18 ahead of the first principal point
    CHECK(close(in_mm(first_order(train).image_distance), 5, {.rel = 1e-13}));
  }
  SUBCASE("Huygens, 5 and 15 at 10") {
    CHECK(close(focal_length_mm(two_lenses(15, 5, 10)), 7.5, {.abs = 0.5e-1}));
  }
  SUBCASE("Ramsden, 16 and 16 at 10.67, two thirds of 16") {
    CHECK(close(focal_length_mm(two_lenses(16, 16, 32.0 / 3)), 12, {.rel = 1e-14}));
  }
}

// ---- what has no focus or no pupil ----

namespace {

std::string first_order_message(const Train& train) {
  return message_of([&] { (void)first_order(train); });
}

// Two lenses whose foci meet, with the stop there: telecentric on both sides.
Train relay(double f1, double f2) {
  Train train = two_lenses(f1, f2, f1 + f2);
  train.object_distance = 60.0 * mm;
  train.stop = {.element = 1, .side = Side::back, .offset = f1 * mm};
  train.aperture = ObjectNa{0.05};
  train.field = ObjectHeight{4.0 * mm};
  return train;
}

}  // namespace

TEST_CASE("first order: no power and the object at infinity is refused") {
  const char* const thin_message =
      "degenerate: no focus: the train's total power is 0 per mm; it needs a power other than 0 at "
      "the reference wavelength, from power_per_mm of its elements";
  const Material material = glass_of(1.5, 60);
  CHECK(first_order_message(train_of({thin(material, 0)})) == thin_message);
  CHECK(first_order_message(train_of({thin(material, 0.01), thin(material, -0.01)})) ==
        thin_message);
  CHECK(first_order_message(train_of({thick(material, 0, 0, 5)})) ==
        "degenerate: no focus: the train's total power is 0 per mm; it needs a power other than 0 "
        "at the reference wavelength, from its radii, powers and gaps");
  Train train = two_lenses(100, 50, 150);  // but for rounding
  CHECK(first_order_message(train).starts_with("degenerate: no focus: the train's total power is"));
}

TEST_CASE("first order: an object in the front focal plane is refused") {
  Train train = train_of({thin(glass_of(1.5, 60), 1 / 80.0)});
  train.object_distance = 80.0 * mm;
  CHECK(
      first_order_message(train) ==
      "degenerate: no focus: the object, 80 mm ahead of the first vertex, lies in the front focal "
      "plane and its image at infinity; move the object or change the power");
}

TEST_CASE("first order: a stop imaged onto the object is refused") {
  const char* const message =
      "degenerate: the stop is imaged onto the object, so that no chief ray leaves the axis; place "
      "the stop elsewhere";
  Train train = train_of({thin(glass_of(1.5, 60), 1 / 80.0)});
  train.object_distance = 120.0 * mm;
  train.stop.offset = -120.0 * mm;
  CHECK(first_order_message(train) == message);
  train.stop = {.element = 1, .side = Side::back, .offset = 240.0 * mm};
  CHECK(first_order_message(train) == message);
  train.object_distance = infinity;  // and the entrance pupil there too
  train.stop.offset = 80.0 * mm;
  CHECK(first_order_message(train) == message);
}

TEST_CASE("first order: telecentric in image space") {
  Train train = train_of({thin(glass_of(1.5, 60), 1 / 80.0)});
  train.stop.offset = -80.0 * mm;
  const FirstOrder f = first_order(train);
  CHECK_FALSE(f.exit_pupil_position);
  CHECK(close(in_mm(*f.entrance_pupil_position), -80, {.rel = 1e-15}));
  CHECK(close(trace(train, "d").back().chief_slope, 0, {.abs = 1e-16}));
}

TEST_CASE("first order: telecentric in object space") {
  Train train = train_of({thin(glass_of(1.5, 60), 1 / 80.0)});
  train.object_distance = 120.0 * mm;
  train.stop = {.element = 1, .side = Side::back, .offset = 80.0 * mm};
  train.aperture = ObjectNa{0.05};
  train.field = ImageHeight{-12.0 * mm};
  const FirstOrder f = first_order(train);
  CHECK_FALSE(f.entrance_pupil_position);
  CHECK_FALSE(f.entrance_pupil_diameter);
  CHECK_FALSE(f.f_number);
  CHECK(close(in_mm(*f.exit_pupil_position), 80, {.rel = 1e-14}));
  CHECK(close(f.working_f_number, 20, {.rel = 1e-14}));  // m = -2
  CHECK(close(in_mm(trace(train, "d").front().chief_height), 6, {.rel = 1e-14}));

  train.field = HalfAngle{1.0 * deg};
  CHECK(first_order_message(train) ==
        "degenerate: the entrance pupil is at infinity (telecentric in object space), so that it "
        "has no field angle; give object_na and an object or image height");
  train.aperture = FNumber{8};
  CHECK(first_order_message(train) ==
        "degenerate: the entrance pupil is at infinity (telecentric in object space), so that it "
        "has no diameter; give object_na and an object or image height");
}

TEST_CASE("first order: a relay that is telecentric on both sides has an image, but no power") {
  for (const auto& focal : {std::pair{100.0, 50.0}, {70.0, 30.0}, {83.0, 37.0}, {49.0, 110.0}}) {
    const double f1 = focal.first, f2 = focal.second;
    CAPTURE(f1);
    const FirstOrder f = first_order(relay(f1, f2));
    const double m = -f2 / f1;
    CHECK(f.focal_length == infinity);
    CHECK(f.back_focal_distance == infinity);
    CHECK_FALSE(f.entrance_pupil_position);
    CHECK_FALSE(f.exit_pupil_position);
    CHECK(close(f.magnification, m, {.rel = 1e-13}));
    CHECK(close(in_mm(f.image_distance), f2 + m * m * (f1 - 60), {.rel = 1e-13}));
    CHECK(close(f.working_f_number, -10 * m, {.rel = 1e-13}));
  }
  Train train = relay(100, 50);
  train.stop = {};
  train.field = HalfAngle{1.0 * deg};
  train.aperture = EntrancePupilDiameter{4.0 * mm};
  CHECK(first_order(train).f_number == std::numeric_limits<double>::infinity());
  train.aperture = FNumber{8};
  CHECK(first_order_message(train).starts_with("degenerate: no focus: the train's total power is"));
}

TEST_CASE("first order: a thin element without refraction has no power to scale") {
  CHECK(
      first_order_message(train_of({thin(glass_of(1.5, 60), 0.01), thin(fixed_index(1), 0.01)})) ==
      "degenerate: element 2: its material has the index of the surroundings at d; a thin element "
      "of it has no power to scale");
}

TEST_CASE("trace: a wavelength outside a material's range is an error of its element") {
  CHECK(
      message_of([] { (void)trace(train_of({thin(crown(), 0.01)}), 1.2 * um); }) ==
      "out_of_range: element 1: material crown: no index at 1.2 um; its source covers 0.4358343 to "
      "0.7065188 um");
}
