// Laws of colour, on random trains and at the switches.
#include <doctest/doctest.h>

#include <boost/multiprecision/cpp_bin_float.hpp>
#include <chromacore/color.hpp>
#include <cmath>
#include <vector>

#include "close.hpp"
#include "evaluate.hpp"
#include "make_train.hpp"

using namespace chromacore;
using namespace chromacore::test;
using namespace chromacore::units;

namespace {

constexpr int kTrains = 200;

// The lengths that cancel in the colour of a train are of this order.
double longest_mm(const Analysis& a) {
  double longest = std::abs(in_mm(a.focal_length)) + std::abs(in_mm(a.image_distance)) +
                   std::abs(in_mm(a.track_length)) +
                   std::abs(in_mm(a.entrance_pupil_position.value_or(Length{})));
  for (const ElementColor& e : a.elements) longest += std::abs(in_mm(e.chief_height));
  return longest;
}

struct Size {
  double axial = 0, lateral = 0;
};
// The sums without their signs, as a measure of what cancels in them.
Size size_of_sums(const Analysis& a) {
  Size size;
  for (const ElementColor& e : a.elements) {
    size.axial += std::abs(in_mm(e.axial_sum));
    size.lateral += std::abs(in_mm(e.lateral_sum));
  }
  for (const SurfaceColor& s : a.surfaces) {
    size.axial += std::abs(in_mm(s.axial_sum));
    size.lateral += std::abs(in_mm(s.lateral_sum));
  }
  return size;
}

std::vector<double> colors_mm(const Analysis& a) {
  std::vector<double> all = {
      in_mm(a.axial_color),
      in_mm(a.lateral_color),
      in_mm(a.axial_color_from_sums),
      in_mm(a.lateral_color_from_sums),
      in_mm(a.secondary_axial),
      in_mm(a.secondary_lateral),
      in_mm(a.rms_focus),
  };
  for (std::size_t i = 0; i < a.curves.wavelengths.size(); ++i) {
    all.push_back(in_mm(a.curves.focus_difference[i]));
    all.push_back(in_mm(a.curves.lateral_difference[i]));
  }
  return all;
}

// The same colour from two trains, to a part of their lengths.
bool same_color(const Train& a, const Train& b, double tolerance) {
  const Analysis first = analyze(a);
  const Analysis second = analyze(b);
  const std::vector<double> got = colors_mm(first);
  const std::vector<double> want = colors_mm(second);
  for (std::size_t i = 0; i < got.size(); ++i) {
    if (!close(got[i], want[i], {.abs = tolerance * longest_mm(second)})) return false;
  }
  return true;
}

// A band of 2 pm about d.
Band narrow() {
  const double d = in_um(Line("d").wavelength());
  return Band::of_lines({(d - 1e-6) * um, (d + 1e-6) * um}, "d");
}

using Lengths = std::vector<Length>;

}  // namespace

TEST_CASE("colour: the sums are the derivative of the exact curves") {
  const auto seed = test_seed();
  CAPTURE(seed);
  Draw draw(seed);
  for (int i = 0; i < kTrains; ++i) {
    Train train = draw.train();
    train.band = narrow();
    const Analysis a = analyze(train);
    const Tol tolerance{.abs = 1e-12 * longest_mm(a)};
    CHECK(close(in_mm(a.axial_color), in_mm(a.axial_color_from_sums), tolerance));
    CHECK(close(in_mm(a.lateral_color), in_mm(a.lateral_color_from_sums), tolerance));
  }
}

TEST_CASE("colour: and at 50 digits they agree in all that the band leaves") {
  using Wide = boost::multiprecision::cpp_bin_float_50;
  const auto seed = test_seed();
  CAPTURE(seed);
  Draw draw(seed);
  for (int i = 0; i < kTrains; ++i) {
    Train train = draw.train();
    train.band = narrow();
    const detail::Model model(train, {});
    detail::Layout<Wide> layout;
    for (const auto& e : detail::layout_of(train)) {
      layout.push_back(
          {Wide(e.power), Wide(e.front), Wide(e.back), Wide(e.thickness), Wide(e.gap_after)});
    }
    detail::Evaluator<Wide> at(model);
    at.at(layout);
    const auto value = [&](Quantity quantity) {
      return static_cast<double>(at.value(detail::look_up(model, train, {.quantity = quantity})));
    };
    const double slope = static_cast<double>(at.reference().marginal_behind.w);
    const Size size = size_of_sums(analyze(train));
    // What is left is of second order: a part of 1e-7, the dispersion of the band; and where all
    // sums are 0, the rounding of 50 digits.
    constexpr double kRounding = 1e-40;
    CHECK(close(value(Quantity::axial_color), -value(Quantity::axial_sum) / (slope * slope),
                {.abs = 1e-7 * size.axial / (slope * slope) + kRounding}));
    CHECK(close(value(Quantity::lateral_color), value(Quantity::lateral_sum) / slope,
                {.abs = 1e-7 * size.lateral / std::abs(slope) + kRounding}));
  }
}

TEST_CASE("colour: a thin element's sums are y^2 phi/V and y ybar phi/V, over P too") {
  const auto seed = test_seed();
  CAPTURE(seed);
  Draw draw(seed);
  for (int i = 0; i < kTrains; ++i) {
    const Train train = draw.train();
    const Analysis a = analyze(train);
    for (const ElementColor& e : a.elements) {
      const auto place = static_cast<std::size_t>(e.element - 1);
      if (std::holds_alternative<Thick>(train.elements[place]) || !e.v) continue;
      const double y = in_mm(e.marginal_height);
      const double share = in_per_mm(e.power) / *e.v;
      CHECK(close(in_mm(e.axial_sum), y * y * share, {.rel = 1e-12}));
      CHECK(close(in_mm(e.lateral_sum), y * in_mm(e.chief_height) * share, {.rel = 1e-12}));
      const ColorSums secondary = color_sums(train, {"d", "C"}, e.element);
      CHECK(close(in_mm(secondary.axial), y * y * share * *e.p_ref_long, {.rel = 1e-12}));
    }
  }
}

TEST_CASE("colour: elements add up from their surfaces, the train from its elements") {
  const auto seed = test_seed();
  CAPTURE(seed);
  Draw draw(seed);
  for (int i = 0; i < kTrains; ++i) {
    const Train train = draw.train();
    const Analysis a = analyze(train);
    const Size size = size_of_sums(a);
    const Tol axial{.abs = 1e-14 * size.axial}, lateral{.abs = 1e-14 * size.lateral};
    ColorSums all;
    for (const ElementColor& e : a.elements) {
      all.axial += e.axial_sum;
      all.lateral += e.lateral_sum;
      const ColorSums own = color_sums(train, {"F", "C"}, e.element);
      CHECK(close(in_mm(own.axial), in_mm(e.axial_sum), axial));
      CHECK(close(in_mm(own.lateral), in_mm(e.lateral_sum), lateral));
      Length of_surfaces{};
      for (const SurfaceColor& s : a.surfaces) {
        if (s.element == e.element) of_surfaces += s.axial_sum;
      }
      if (std::holds_alternative<Thick>(train.elements[static_cast<std::size_t>(e.element - 1)])) {
        CHECK(close(in_mm(of_surfaces), in_mm(e.axial_sum), axial));
      }
    }
    CHECK(close(in_mm(all.axial), in_mm(a.axial_sum), axial));
    CHECK(close(in_mm(all.lateral), in_mm(a.lateral_sum), lateral));
    // Over F to d and d to C they add up to F to C.
    const ColorSums first = color_sums(train, {"F", "d"});
    const ColorSums second = color_sums(train, {"d", "C"});
    CHECK(close(in_mm(first.axial + second.axial), in_mm(a.axial_sum), axial));
    CHECK(close(in_mm(first.lateral + second.lateral), in_mm(a.lateral_sum), lateral));
    CHECK(close(in_mm(second.axial), in_mm(a.secondary_axial_sum), axial));
    CHECK(close(in_mm(second.lateral), in_mm(a.secondary_lateral_sum), lateral));
  }
}

TEST_CASE("colour: totals are what the curves say") {
  const auto seed = test_seed();
  CAPTURE(seed);
  Draw draw(seed);
  for (int i = 0; i < kTrains; ++i) {
    const Train train = draw.train();
    const Analysis a = analyze(train);
    const Lengths& focus = a.curves.focus_difference;
    const Lengths& lateral = a.curves.lateral_difference;
    const Tol tolerance{.abs = 1e-14 * longest_mm(a)};
    CHECK(focus[1] == Length{});
    CHECK(lateral[1] == Length{});
    CHECK(a.curves.focal_length[1] == a.focal_length);
    CHECK(close(in_mm(a.axial_color), in_mm(focus[0] - focus[2]), tolerance));
    CHECK(close(in_mm(a.lateral_color), in_mm(lateral[0] - lateral[2]), tolerance));
    CHECK(close(in_mm(a.secondary_axial), -0.5 * in_mm(focus[0] + focus[2]), tolerance));
    CHECK(close(in_mm(a.secondary_lateral), -0.5 * in_mm(lateral[0] + lateral[2]), tolerance));
  }
}

TEST_CASE("colour: moving the stop adds a multiple of C_I to C_II, the same for every surface") {
  const auto seed = test_seed();
  CAPTURE(seed);
  Draw draw(seed);
  for (int i = 0; i < kTrains; ++i) {
    Train train = draw.train();
    train.object_distance = infinity;
    train.stop = {};
    const Analysis before = analyze(train);
    train.stop.offset = -draw.between(1, 30) * mm;
    const Analysis after = analyze(train);
    const auto share = [](const auto& now, const auto& then) {
      return in_mm(now.chief_height - then.chief_height) / in_mm(then.marginal_height);
    };
    const double e = share(after.elements[0], before.elements[0]);
    const Size size = size_of_sums(before);
    const auto check = [&](const auto& now, const auto& then) {
      CHECK(now.axial_sum == then.axial_sum);
      const Length shift = e * then.axial_sum;
      CHECK(close(in_mm(now.lateral_sum), in_mm(then.lateral_sum + shift),
                  {.abs = 1e-12 * (size.lateral + std::abs(e) * size.axial)}));
    };
    for (std::size_t k = 0; k < before.elements.size(); ++k) {
      check(after.elements[k], before.elements[k]);
    }
    for (std::size_t k = 0; k < before.surfaces.size(); ++k) {
      check(after.surfaces[k], before.surfaces[k]);
    }
    CHECK(after.axial_color == before.axial_color);
    CHECK(after.rms_focus == before.rms_focus);
  }
}

TEST_CASE("colour: an element in two parts has the colour of one") {
  const auto seed = test_seed();
  CAPTURE(seed);
  Draw draw(seed);
  for (double curvature : {0.0, 1e-8, 0.015}) {
    for (int i = 0; i < kTrains / 2; ++i) {
      Train train = draw.train();
      train.stop = {};  // the split elements stand behind it
      if (!first_order(train).exit_pupil_position) continue;
      Train split = train;
      split.elements.clear();
      for (const Element& element : train.elements) {
        const double share = draw.between(0, 1);
        if (const auto* whole = std::get_if<Thick>(&element)) {
          Thick first = *whole;
          Thick second = *whole;
          first.back = second.front = curvature * per_mm;
          first.thickness *= share;
          second.thickness *= 1 - share;
          first.gap_after = Length{};
          split.elements.insert(split.elements.end(), {first, second});
        } else if (const auto* thin_one = std::get_if<Thin>(&element)) {
          const double power = in_per_mm(thin_one->power);
          Thin rest = *thin_one;
          rest.power *= 1 - share;
          split.elements.insert(split.elements.end(),
                                {thin(thin_one->material, share * power), rest});
        } else {
          split.elements.push_back(element);
        }
      }
      CHECK(same_color(split, train, 1e-12));
    }
  }
}

TEST_CASE("colour: a thin element is the limit of a thick one") {
  const Material material = glass_of(1.6, 40);
  Train as_thick = train_of({thick(material, 0.02, -0.013, 0, 20), thin(crown(), 0.004)});
  Train as_thin = train_of({thin(material, 0.6 * (0.02 + 0.013), 20), thin(crown(), 0.004)});
  for (Train* train : {&as_thick, &as_thin}) train->stop.offset = -15.0 * mm;
  CHECK(same_color(as_thick, as_thin, 1e-15));
  const ElementColor one = analyze(as_thick).elements[0];
  const ElementColor other = analyze(as_thin).elements[0];
  CHECK(close(in_mm(one.axial_sum), in_mm(other.axial_sum), {.rel = 1e-13}));
  CHECK(close(in_mm(one.lateral_sum), in_mm(other.lateral_sum), {.rel = 1e-13}));
  CHECK(close(*one.v, *other.v, {.rel = 1e-15}));
}

TEST_CASE("colour: the two sides of a cemented joint are D(dn/n) from glass to glass") {
  const double joint = -0.015;
  Train train = train_of({thick(crown(), 0.02, joint, 8), thick(flint(), joint, -0.004, 3)});
  train.stop.offset = -25.0 * mm;
  const std::vector<SurfaceColor> s = analyze(train).surfaces;
  const std::vector<TracePoint> points = trace(train, "d");
  const auto n = [](const Material& m, const char* line) {
    return index(m, Line(line).wavelength());
  };
  const auto spread = [&](const Material& m) { return (n(m, "F") - n(m, "C")) / n(m, "d"); };
  const double y = in_mm(points[1].marginal_height);
  const double step = spread(flint()) - spread(crown());
  // A = n (u + y c) ahead of the joint, in the crown.
  const double a = n(crown(), "d") * (points[0].marginal_slope + y * joint);
  const double a_chief =
      n(crown(), "d") * (points[0].chief_slope + in_mm(points[1].chief_height) * joint);
  CHECK(close(in_mm(s[1].axial_sum + s[2].axial_sum), a * y * step, {.rel = 1e-12}));
  CHECK(close(in_mm(s[1].lateral_sum + s[2].lateral_sum), a_chief * y * step, {.rel = 1e-12}));
}

TEST_CASE("colour: lateral colour is linear in the field, to the last bit") {
  const auto seed = test_seed();
  CAPTURE(seed);
  Draw draw(seed);
  for (int i = 0; i < kTrains; ++i) {
    Train train = draw.train();
    train.field = ImageHeight{3.0 * mm};
    const Analysis one = analyze(train);
    train.field = ImageHeight{-12.0 * mm};
    const Analysis four = analyze(train);
    CHECK(four.lateral_color == -4.0 * one.lateral_color);
    CHECK(four.lateral_sum == -4.0 * one.lateral_sum);
    CHECK(four.secondary_lateral == -4.0 * one.secondary_lateral);
    CHECK(four.axial_color == one.axial_color);
  }
}

TEST_CASE("colour: a train that is its own mirror image about the stop has no lateral at m = -1") {
  const auto seed = test_seed();
  CAPTURE(seed);
  Draw draw(seed);
  int tried = 0;
  for (int i = 0; i < 4 * kTrains; ++i) {
    Train train = draw.train(3);
    const double gap = draw.between(2, 20);
    train.stop = {.element = static_cast<int>(train.elements.size()),
                  .side = Side::back,
                  .offset = gap / 2 * mm};
    std::visit([&](auto& e) { e.gap_after = gap * mm; }, train.elements.back());
    const std::vector<Element> second_half = reversed(train).elements;
    train.elements.insert(train.elements.end(), second_half.begin(), second_half.end());
    train.object_distance = infinity;
    const FirstOrder f = first_order(train);
    train.object_distance = f.focal_length + f.back_focal_distance;
    if (!(in_mm(train.object_distance) > 10) || !f.entrance_pupil_position) continue;
    const Analysis a = analyze(train);
    const double longest = longest_mm(a);
    if (longest > 1e4) continue;
    ++tried;
    CHECK(close(a.magnification, -1, {.abs = 1e-10}));
    CHECK(close(in_mm(a.lateral_color), 0, {.abs = 1e-11 * longest}));
    CHECK(close(in_mm(a.lateral_sum), 0, {.abs = 1e-11 * size_of_sums(a).lateral}));
    CHECK(close(in_mm(a.secondary_lateral), 0, {.abs = 1e-11 * longest}));
  }
  CHECK(tried > kTrains);
}

TEST_CASE("colour: in a vacuum an index relative to air grows by that of air") {
  const std::vector<const char*> letters = {"F", "d", "C"};
  const double measured[] = {1.52238, 1.51680, 1.51432};
  std::vector<std::pair<Line, double>> absolute, relative;
  for (std::size_t i = 0; i < letters.size(); ++i) {
    relative.emplace_back(letters[i], measured[i]);
    absolute.emplace_back(letters[i], measured[i] * air_index(Line(letters[i]).wavelength()));
  }
  Train in_vacuum = train_of(
      {thick(glass(relative), 0.02, -0.013, 9, 4), thick(glass(relative), -0.01, 0.004, 3)});
  in_vacuum.stop.offset = -15.0 * mm;
  Train grown = in_vacuum;
  in_vacuum.surroundings = Surroundings{.pressure = 0.0 * Pa};
  for (Element& element : grown.elements) std::get<Thick>(element).material = glass(absolute);
  CHECK(same_color(in_vacuum, grown, 1e-13));
  CHECK(close(in_mm(first_order(in_vacuum).focal_length), in_mm(first_order(grown).focal_length),
              {.rel = 1e-14}));
  // Where the sources were measured, a table that says so changes nothing.
  Train in_air = in_vacuum;
  in_air.surroundings = Surroundings{};
  Train untold = in_vacuum;
  untold.surroundings.reset();
  CHECK(same_color(in_air, untold, 1e-13));
}

TEST_CASE("colour: a diffractive surface counts wavelengths in the surroundings") {
  Train train = train_of({diffractive(0.01)});
  train.surroundings = Surroundings{.pressure = 0.0 * Pa};
  const auto vacuum_um = [](const char* line) {
    return in_um(vacuum_wavelength(Line(line).wavelength()));
  };
  const double v = vacuum_um("d") / (vacuum_um("F") - vacuum_um("C"));
  const Analysis a = analyze(train);
  CHECK(close(*a.elements[0].v, v, {.rel = 1e-14}));
  CHECK(close(in_mm(a.curves.focal_length[0]), 100 * vacuum_um("d") / vacuum_um("F"),
              {.rel = 1e-14}));
}

TEST_CASE("colour: without dispersion there is none") {
  Train train =
      train_of({thick(fixed_index(1.6), 0.02, -0.01, 7, 3), thin(fixed_index(1.5), 0.002)});
  train.stop.offset = -20.0 * mm;
  for (const double value : colors_mm(analyze(train))) CHECK(value == 0);
}
