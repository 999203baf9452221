#include <doctest/doctest.h>

#include <chromacore/catalog.hpp>
#include <chromacore/error.hpp>
#include <chromacore/train.hpp>
#include <cmath>
#include <functional>

#include "close.hpp"
#include "message_of.hpp"

using namespace chromacore;
using namespace chromacore::test;
using namespace chromacore::units;

namespace {

const Catalog& catalog() {
  static const Catalog built_in = Catalog::built_in();
  return built_in;
}

Material crown() { return catalog().at("N-BK7"); }
Material flint() { return catalog().at("SCHOTT/F2"); }

// A cemented pair and a thin lens behind it.
Train good_train() {
  Train train;
  train.band = Band::of_lines({"F", "d", "C"}, "d");
  train.aperture = EntrancePupilDiameter{50.0 * mm};
  train.field = HalfAngle{1.0 * deg};
  train.elements = {Thick{.material = crown(),
                          .front = radius(310.0 * mm),
                          .back = radius(-230.0 * mm),
                          .thickness = 8.0 * mm,
                          .cemented = true},
                    Thick{.material = flint(),
                          .front = radius(-230.0 * mm),
                          .back = radius(-900.0 * mm),
                          .thickness = 5.0 * mm,
                          .gap_after = 20.0 * mm},
                    Thin{.material = crown(), .power = 0.001 * per_mm}};
  return train;
}

// What `check` says of the good train after `change`.
std::string said(const std::function<void(Train&)>& change) {
  Train train = good_train();
  change(train);
  return message_of([&] { check(train); });
}

Thick& thick(Train& train, std::size_t e) { return std::get<Thick>(train.elements.at(e)); }

constexpr double nan_value = std::numeric_limits<double>::quiet_NaN();

}  // namespace

TEST_CASE("radius: the curvature is its inverse, flat where it is infinite") {
  CHECK(in_per_mm(radius(-250.0 * mm)) == -0.004);
  CHECK(radius(infinity) == flat);
  CHECK(radius(-infinity) == flat);
  CHECK_FALSE(std::signbit(in_per_mm(radius(-infinity))));
  CHECK(message_of([] { return radius(0.0 * mm); }) ==
        "bad_value: radius_mm is 0; a radius is a number other than 0, or inf for flat");
  CHECK(message_of([] { return radius(nan_value * mm); }) ==
        "bad_value: radius_mm is nan; a radius is a number other than 0, or inf for flat");
}

TEST_CASE("gap and thickness of every kind of element") {
  CHECK(gap_after(Thin{.gap_after = 2.0 * mm}) == 2.0 * mm);
  CHECK(gap_after(Thick{.thickness = 3.0 * mm, .gap_after = 2.0 * mm}) == 2.0 * mm);
  CHECK(gap_after(Diffractive{.gap_after = 2.0 * mm}) == 2.0 * mm);
  CHECK(thickness(Thick{.thickness = 3.0 * mm}) == 3.0 * mm);
  CHECK(thickness(Thin{}) == 0.0 * mm);
  CHECK(thickness(Diffractive{}) == 0.0 * mm);
}

TEST_CASE("check: a good train passes, with each kind of aperture, field and stop") {
  CHECK(said([](Train&) {}) == "no error");
  CHECK(said([](Train& t) { t.aperture = FNumber{8}; }) == "no error");
  CHECK(said([](Train& t) { t.field = HalfAngle{0.0 * deg}; }) == "no error");
  CHECK(said([](Train& t) { t.field = ImageHeight{-5.0 * mm}; }) == "no error");
  CHECK(said([](Train& t) {
          t.object_distance = 800.0 * mm;
          t.aperture = ObjectNa{0.1};
          t.field = ObjectHeight{20.0 * mm};
        }) == "no error");
  CHECK(said([](Train& t) { t.stop = {1, Side::front, -300.0 * mm}; }) == "no error");
  CHECK(said([](Train& t) { t.stop = {2, Side::back, 20.0 * mm}; }) == "no error");
  CHECK(said([](Train& t) { t.stop = {3, Side::front, -20.0 * mm}; }) == "no error");
  CHECK(said([](Train& t) { t.stop = {3, Side::back, 500.0 * mm}; }) == "no error");
}

TEST_CASE("check: what is not set is named") {
  CHECK(said([](Train& t) { t.elements.clear(); }) == "not_set: the train has no element");
  CHECK(said([](Train& t) { t.band = {}; }) == "not_set: band: no reference wavelength");
  CHECK(said([](Train& t) { t.aperture = {}; }) ==
        "not_set: no aperture; give entrance_pupil_diameter_mm, f_number or object_na");
  CHECK(said([](Train& t) { t.field = {}; }) ==
        "not_set: no field; give half_angle_deg, object_height_mm or image_height_mm");
  CHECK(said([](Train& t) { thick(t, 1).material = {}; }) == "not_set: element 2: no material");
}

TEST_CASE("check: a value that its quantity cannot have is named with its element") {
  CHECK(said([](Train& t) { thick(t, 1).thickness = -6.0 * mm; }) ==
        "bad_value: element 2: thickness_mm is -6; expected a finite number, 0 or more");
  CHECK(said([](Train& t) { thick(t, 1).gap_after = nan_value * mm; }) ==
        "bad_value: element 2: gap_after_mm is nan; expected a finite number, 0 or more");
  CHECK(said([](Train& t) { thick(t, 0).front = nan_value * per_mm; }) ==
        "bad_value: element 1: curvatures_per_mm[1] is nan; expected a finite number");
  CHECK(said([](Train& t) {
          std::get<Thin>(t.elements[2]).power = std::numeric_limits<double>::infinity() * per_mm;
        }) == "bad_value: element 3: power_per_mm is inf; expected a finite number");
  CHECK(said([](Train& t) { thick(t, 0).clear_diameter = 0.0 * mm; }) ==
        "bad_value: element 1: clear_diameter_mm is 0; expected a positive finite number");
  CHECK(said([](Train& t) { t.aperture = EntrancePupilDiameter{}; }) ==
        "bad_value: entrance_pupil_diameter_mm is 0; expected a positive finite number");
  CHECK(said([](Train& t) { t.aperture = FNumber{-8}; }) ==
        "bad_value: f_number is -8; expected a positive finite number");
  CHECK(said([](Train& t) { t.field = HalfAngle{90.0 * deg}; }) ==
        "bad_value: half_angle_deg is 90; expected a number between -90 and 90");
  CHECK(said([](Train& t) { t.object_distance = 0.0 * mm; }) ==
        "bad_value: distance_mm is 0; expected a positive number, or inf for an object at "
        "infinity");
  CHECK(said([](Train& t) { t.pixel = 0.0 * mm; }) ==
        "bad_value: pixel_um is 0; expected a positive finite number");
}

TEST_CASE("check: an aperture or a field that needs an object at a distance") {
  CHECK(said([](Train& t) { t.aperture = ObjectNa{0.1}; }) ==
        "bad_value: object_na needs an object at a distance; for one at infinity give "
        "entrance_pupil_diameter_mm or f_number");
  CHECK(said([](Train& t) { t.field = ObjectHeight{5.0 * mm}; }) ==
        "bad_value: object_height_mm needs an object at a distance; for one at infinity give "
        "half_angle_deg or image_height_mm");
}

TEST_CASE("check: a joint marked cemented has no gap and equal radii") {
  CHECK(said([](Train& t) { thick(t, 0).gap_after = 0.5 * mm; }) ==
        "bad_value: element 1: cemented to the next element, but gap_after_mm is 0.5; expected 0");
  CHECK(said([](Train& t) { thick(t, 1).front = radius(-231.0 * mm); }) ==
        "bad_value: element 1: cemented to the next element, but the radii of the joint are -230 "
        "and -231 mm; expected equal ones");
  CHECK(said([](Train& t) { thick(t, 1).cemented = true; }) ==
        "bad_value: element 2: cemented, but no element with two radii follows");
}

TEST_CASE("check: the stop stands at a vertex or in the gap beside it") {
  CHECK(said([](Train& t) { t.stop.element = 4; }) ==
        "bad_value: stop: element is 4; the train has elements 1 to 3");
  CHECK(said([](Train& t) { t.stop.element = 0; }) ==
        "bad_value: stop: element is 0; the train has elements 1 to 3");
  CHECK(said([](Train& t) {
          t.stop = {1, Side::front, 2.0 * mm};
        }) ==
        "bad_value: stop: offset_mm is 2 from the front of element 1, inside it; expected a place "
        "in the gap before it, 0 or less");
  CHECK(said([](Train& t) {
          t.stop = {3, Side::front, 2.0 * mm};
        }) ==
        "bad_value: stop: offset_mm is 2 from the front of element 3, on its other side; expected "
        "a place in the gap before it, 0 or less");
  CHECK(said([](Train& t) {
          t.stop = {2, Side::back, 21.0 * mm};
        }) ==
        "bad_value: stop: offset_mm is 21 from the back of element 2, past its neighbour; the gap "
        "there is 20 mm");
  CHECK(said([](Train& t) {
          t.object_distance = 100.0 * mm;
          t.stop = {1, Side::front, -101.0 * mm};
        }) ==
        "bad_value: stop: offset_mm is -101 from the front of element 1, past its neighbour; the "
        "gap there is 100 mm");
}

// ---- surface lists ----

TEST_CASE("from_surfaces: two glasses behind one another become a cemented joint") {
  const std::vector<Surface> surfaces = {
      {radius(310.0 * mm), 8.0 * mm, crown(), 50.0 * mm},
      {radius(-230.0 * mm), 5.0 * mm, flint(), 52.0 * mm},
      {radius(-900.0 * mm), 30.0 * mm, {}, 51.0 * mm},
      {radius(100.0 * mm), 4.0 * mm, crown(), {}, true},
      {flat, 70.0 * mm, {}},
  };
  const Train train = Train::from_surfaces(surfaces);
  REQUIRE(train.elements.size() == 3);
  const auto& first = std::get<Thick>(train.elements[0]);
  const auto& second = std::get<Thick>(train.elements[1]);
  const auto& third = std::get<Thick>(train.elements[2]);
  CHECK(first.cemented);
  CHECK(first.back == second.front);
  CHECK(first.thickness == 8.0 * mm);
  CHECK(first.clear_diameter == 52.0 * mm);
  CHECK(first.gap_after == 0.0 * mm);
  CHECK_FALSE(second.cemented);
  CHECK(second.clear_diameter == 52.0 * mm);
  CHECK(second.gap_after == 30.0 * mm);
  CHECK(third.back == flat);
  CHECK_FALSE(third.clear_diameter);
  CHECK(train.stop.element == 3);
  CHECK(train.stop.side == Side::front);
}

TEST_CASE("from_surfaces: a plane in air moves on, and a stop on it floats") {
  const Surface opens{radius(50.0 * mm), 4.0 * mm, crown()};
  const Surface closes{radius(-50.0 * mm), 6.0 * mm, {}};
  const Surface plane{flat, 1.5 * mm, {}};
  Surface stop = plane;
  stop.is_stop = true;

  const Train between =
      Train::from_surfaces(std::vector{opens, closes, stop, plane, opens, closes});
  CHECK(in_mm(gap_after(between.elements[0])) == 9.0);
  CHECK(between.stop.element == 1);
  CHECK(between.stop.side == Side::back);
  CHECK(in_mm(between.stop.offset) == 6.0);

  const Train ahead = Train::from_surfaces(std::vector{plane, stop, plane, opens, closes});
  CHECK(ahead.stop.element == 1);
  CHECK(ahead.stop.side == Side::front);
  CHECK(in_mm(ahead.stop.offset) == -3.0);

  const Train behind = Train::from_surfaces(std::vector{opens, closes, stop});
  CHECK(behind.stop.side == Side::back);
  CHECK(in_mm(behind.stop.offset) == 6.0);

  const Surface object{flat, infinity, {}};
  const Train with_object = Train::from_surfaces(std::vector{object, opens, closes});
  CHECK(in_mm(with_object.object_distance) == in_mm(infinity));
  CHECK(with_object.elements.size() == 1);
}

TEST_CASE("from_surfaces: what is no train is said with the surface's number") {
  const Surface opens{radius(50.0 * mm), 4.0 * mm, crown()};
  const Surface closes{radius(-50.0 * mm), 6.0 * mm, {}};
  const auto message = [](std::vector<Surface> surfaces) {
    return message_of([&] { return Train::from_surfaces(surfaces); });
  };
  CHECK(message({}) == "not_set: no surface");
  CHECK(message({opens}) ==
        "bad_value: surface 1: glass (SCHOTT/N-BK7) behind the last surface; expected a list that "
        "ends in the surroundings");
  CHECK(message({opens, closes, closes}) ==
        "bad_value: surface 3: a curved surface between equal media (the surroundings)");
  CHECK(message({opens, opens, closes}) ==
        "bad_value: surface 2: a curved surface between equal media (SCHOTT/N-BK7)");
  CHECK(message({{flat, 1.0 * mm, {}}}) == "not_set: surface 1: the surfaces make no element");
  Surface negative = opens;
  negative.thickness_after = -1.0 * mm;
  CHECK(message({negative, closes}) ==
        "bad_value: surface 1: thickness_mm is -1; expected a finite number, 0 or more");
  Surface stop = closes;
  stop.is_stop = true;
  CHECK(message({opens, stop, opens, stop}) ==
        "bad_value: surface 4: a second stop; expected one at most");
}
