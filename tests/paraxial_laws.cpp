// Laws of first order, on random trains and at the switches: flat, no power, gap 0, equal indices,
// an object at infinity and very far.
#include <doctest/doctest.h>

#include <chromacore/paraxial.hpp>
#include <cmath>
#include <utility>
#include <vector>

#include "close.hpp"
#include "make_train.hpp"

using namespace chromacore;
using namespace chromacore::test;
using namespace chromacore::units;

namespace {

constexpr int kTrains = 300;

// Two answers that should be one: lengths to a part of the longest of them.
bool same(const FirstOrder& a, const FirstOrder& b, double tolerance) {
  const auto mm_of = [](const FirstOrder& f) {
    return std::vector<double>{in_mm(f.focal_length),
                               in_mm(f.back_focal_distance),
                               in_mm(f.image_distance),
                               in_mm(f.track_length),
                               in_mm(f.entrance_pupil_position.value_or(infinity)),
                               in_mm(f.entrance_pupil_diameter.value_or(infinity)),
                               in_mm(f.exit_pupil_position.value_or(infinity)),
                               in_mm(f.lagrange_invariant)};
  };
  const std::vector<double> first = mm_of(a);
  const std::vector<double> second = mm_of(b);
  double longest = 0;
  for (double length : second)
    longest = std::isfinite(length) ? std::max(longest, std::abs(length)) : longest;
  for (std::size_t i = 0; i < first.size(); ++i) {
    if (!close(first[i], second[i], {.abs = tolerance * longest})) return false;
  }
  const Tol relative{.rel = 10 * tolerance, .abs = tolerance};
  return close(a.working_f_number, b.working_f_number, relative) &&
         close(a.f_number.value_or(0), b.f_number.value_or(0), relative) &&
         close(a.magnification, b.magnification, relative);
}

bool same(const Train& a, const Train& b, double tolerance) {
  return same(first_order(a), first_order(b), tolerance);
}

Train scaled(Train train, double s) {
  train.object_distance *= s;
  train.stop.offset *= s;
  std::get<EntrancePupilDiameter>(train.aperture).value *= s;
  for (Element& element : train.elements) {
    std::visit([&](auto& e) { e.gap_after *= s; }, element);
    if (auto* t = std::get_if<Thick>(&element)) {
      t->front /= s;
      t->back /= s;
      t->thickness *= s;
    } else if (auto* thin_one = std::get_if<Thin>(&element)) {
      thin_one->power /= s;
    } else {
      std::get<Diffractive>(element).power /= s;
    }
  }
  return train;
}

// Puts the first part of the split element `e` (from 0) ahead of it; the stop stays where it is.
void insert_first_part(Train& train, std::size_t e, Element first) {
  using Step = std::vector<Element>::difference_type;
  train.elements.insert(train.elements.begin() + static_cast<Step>(e), std::move(first));
  const int split = static_cast<int>(e) + 1;
  Stop& stop = train.stop;
  if (stop.element > split || (stop.element == split && stop.side == Side::back)) ++stop.element;
}

// The index behind a point of the trace.
double index_behind(const Train& train, const TracePoint& point, const Line& line) {
  const auto* const t =
      std::get_if<Thick>(&train.elements[static_cast<std::size_t>(point.element - 1)]);
  return t != nullptr && point.side == Side::front ? index(t->material, line.wavelength()) : 1.0;
}

}  // namespace

TEST_CASE("first order: twice as large is twice as long, to the last bit") {
  const auto seed = test_seed();
  CAPTURE(seed);
  Draw draw(seed);
  for (int i = 0; i < kTrains; ++i) {
    const Train train = draw.train();
    const FirstOrder one = first_order(train);
    const FirstOrder two = first_order(scaled(train, 2));
    CHECK(two.focal_length == 2.0 * one.focal_length);
    CHECK(two.image_distance == 2.0 * one.image_distance);
    CHECK(*two.entrance_pupil_position == 2.0 * *one.entrance_pupil_position);
    CHECK(*two.exit_pupil_position == 2.0 * *one.exit_pupil_position);
    CHECK(two.lagrange_invariant == 2.0 * one.lagrange_invariant);
    CHECK(two.petzval == 0.5 * one.petzval);
    CHECK(two.magnification == one.magnification);
    CHECK(two.working_f_number == one.working_f_number);
    CHECK(same(first_order(scaled(scaled(train, 3.7), 1 / 3.7)), one, 1e-12));
  }
}

TEST_CASE("first order: turned round, a train has the same power, and maps the image back") {
  const auto seed = test_seed();
  CAPTURE(seed);
  Draw draw(seed);
  for (int i = 0; i < kTrains; ++i) {
    Train train = draw.train();
    const FirstOrder there = first_order(train);
    CHECK(same(reversed(reversed(train)), train, 0));
    train.object_distance = infinity;
    const Train turned = reversed(train);
    if (first_order(turned).entrance_pupil_position) {
      CHECK(close(in_mm(first_order(turned).focal_length), in_mm(there.focal_length),
                  {.rel = 1e-12}));
    }
    if (in_mm(there.image_distance) <= 50 || there.magnification == 0) continue;
    Train back = turned;
    back.object_distance = there.image_distance;
    const FirstOrder f = first_order(back);
    CHECK(close(f.magnification * there.magnification, 1, {.rel = 1e-10}));
  }
}

TEST_CASE("first order: a thin element is two of half its power") {
  const auto seed = test_seed();
  CAPTURE(seed);
  Draw draw(seed);
  for (int i = 0; i < kTrains; ++i) {
    const Train train = draw.train();
    Train split = train;
    for (std::size_t e = split.elements.size(); e-- > 0;) {
      auto* const whole = std::get_if<Thin>(&split.elements[e]);
      if (whole == nullptr) continue;
      const double share = draw.between(-1, 2);
      Thin first = thin(whole->material, share * in_per_mm(whole->power));
      whole->power *= 1 - share;
      insert_first_part(split, e, first);
    }
    CHECK(same(split, train, 1e-12));
  }
}

TEST_CASE("first order: a thick element is two with a joint between them") {
  const auto seed = test_seed();
  CAPTURE(seed);
  Draw draw(seed);
  for (double curvature : {0.0, 1e-8, -0.01, 0.02}) {
    for (int i = 0; i < kTrains / 4; ++i) {
      const Train train = draw.train();
      Train split = train;
      for (std::size_t e = split.elements.size(); e-- > 0;) {
        auto* const whole = std::get_if<Thick>(&split.elements[e]);
        if (whole == nullptr) continue;
        const double share = draw.between(0, 1);
        Thick first = *whole;
        first.back = curvature * per_mm;
        first.thickness *= share;
        first.gap_after = Length{};
        whole->front = curvature * per_mm;
        whole->thickness *= 1 - share;
        insert_first_part(split, e, first);
      }
      CHECK(same(split, train, 1e-12));
      CHECK(close(in_per_mm(first_order(split).petzval), in_per_mm(first_order(train).petzval),
                  {.rel = 1e-12, .abs = 1e-16}));
    }
  }
}

TEST_CASE("first order: a thin element is the limit of a thick one") {
  const Material material = glass_of(1.6, 40);
  Train thin_train = train_of({thin(material, 0.6 * (0.02 + 0.013), 20), thin(material, 0.004)});
  Train thick_train = train_of({thick(material, 0.02, -0.013, 0, 20), thin(material, 0.004)});
  CHECK(same(thick_train, thin_train, 1e-14));
  CHECK(close(in_per_mm(first_order(thick_train).petzval),
              in_per_mm(first_order(thin_train).petzval), {.rel = 1e-14}));
  const double limit = in_mm(first_order(thin_train).focal_length);
  const auto departure = [&](double thickness_mm) {
    std::get<Thick>(thick_train.elements[0]).thickness = thickness_mm * mm;
    return in_mm(first_order(thick_train).focal_length) - limit;
  };
  CHECK(close(departure(1e-4), departure(1e-3) / 10, {.rel = 1e-3}));  // first order in thickness
}

TEST_CASE("first order: a gap of 0 between equal curvatures is a cemented joint") {
  // Direct refraction from glass to glass, n'u' = n u - y c (n' - n), written out.
  const double n[] = {1, 1.52, 1.64, 1.7, 1};
  const double c[] = {0.02, -0.015, 0.004, -0.009};
  const double t[] = {8, 3, 5};
  double y = 1;
  double w = 0;
  for (int k = 0; k < 4; ++k) {
    w -= y * c[k] * (n[k + 1] - n[k]);
    if (k < 3) y += t[k] * w / n[k + 1];
  }
  const Train train = train_of({thick(fixed_index(n[1]), c[0], c[1], t[0]),
                                thick(fixed_index(n[2]), c[1], c[2], t[1]),
                                thick(fixed_index(n[3]), c[2], c[3], t[2])});
  const FirstOrder f = first_order(train);
  CHECK(close(in_mm(f.focal_length), -1 / w, {.rel = 1e-14}));
  CHECK(close(in_mm(f.back_focal_distance), -y / w, {.rel = 1e-14}));
}

TEST_CASE("trace: the Lagrange invariant is the same at every vertex and wavelength") {
  const auto seed = test_seed();
  CAPTURE(seed);
  Draw draw(seed);
  for (int i = 0; i < kTrains; ++i) {
    const Train train = draw.train();
    const double invariant = in_mm(first_order(train).lagrange_invariant);
    for (const Line& line : train.band.wavelengths) {
      for (const TracePoint& p : trace(train, line)) {
        const double n = index_behind(train, p, line);
        const double first = n * p.marginal_slope * in_mm(p.chief_height);
        const double second = n * p.chief_slope * in_mm(p.marginal_height);
        const double scale = std::abs(first) + std::abs(second);
        CHECK(close(first - second, invariant, {.rel = 1e-12, .abs = 1e-12 * scale}));
      }
    }
  }
}

TEST_CASE("trace: the chief ray passes the stop's centre at every wavelength") {
  const auto seed = test_seed();
  CAPTURE(seed);
  Draw draw(seed);
  for (int i = 0; i < kTrains; ++i) {
    const Train train = draw.train();
    const auto& stop = train.stop;
    if (stop.side == Side::front && stop.element == 1) continue;  // before the first point
    for (const Line& line : train.band.wavelengths) {
      // The last vertex ahead of the stop, and how far behind it the stop is.
      int element = stop.element;
      Length distance = stop.offset;
      if (stop.side == Side::front) {
        --element;
        distance += gap_after(train.elements[static_cast<std::size_t>(element - 1)]);
      }
      TracePoint ahead;
      double largest = 0;
      for (const TracePoint& p : trace(train, line)) {
        if (p.element <= element) ahead = p;
        largest = std::max(largest, std::abs(in_mm(p.chief_height)));
      }
      const double height = in_mm(ahead.chief_height) + ahead.chief_slope * in_mm(distance);
      CHECK(close(height, 0, {.abs = 1e-12 * largest}));
    }
  }
}

TEST_CASE("trace: the field is linear, to the last bit") {
  const auto seed = test_seed();
  CAPTURE(seed);
  Draw draw(seed);
  for (int i = 0; i < kTrains; ++i) {
    Train train = draw.train();
    train.field = ImageHeight{3.0 * mm};
    const std::vector<TracePoint> one = trace(train, "F");
    train.field = ImageHeight{-12.0 * mm};
    const std::vector<TracePoint> four = trace(train, "F");
    for (std::size_t k = 0; k < one.size(); ++k) {
      CHECK(four[k].chief_height == -4.0 * one[k].chief_height);
      CHECK(four[k].chief_slope == -4.0 * one[k].chief_slope);
      CHECK(four[k].marginal_height == one[k].marginal_height);
    }
  }
}

TEST_CASE("first order: each way to give field and aperture names the same rays") {
  const auto seed = test_seed();
  CAPTURE(seed);
  Draw draw(seed);
  for (int i = 0; i < kTrains; ++i) {
    const Train train = draw.train();
    const FirstOrder f = first_order(train);
    const TracePoint last = trace(train, "d").back();
    Train other = train;
    other.aperture = FNumber{*f.f_number};
    other.field = ImageHeight{last.chief_height + last.chief_slope * f.image_distance};
    CHECK(same(first_order(other), f, 1e-11));
    if (f.magnification == 0) continue;
    const double slope = std::tan(in_rad(std::get<HalfAngle>(train.field).value));
    const Length to_pupil = train.object_distance + *f.entrance_pupil_position;
    other.field = ObjectHeight{-slope * to_pupil};
    if (in_mm(to_pupil) <= 0) continue;  // a numerical aperture is positive
    other.aperture = ObjectNa{in_mm(0.5 * *f.entrance_pupil_diameter) / in_mm(to_pupil)};
    if (std::get<ObjectNa>(other.aperture).value >= 1) continue;
    CHECK(same(first_order(other), f, 1e-11));
  }
}

TEST_CASE("first order: an object very far is as one at infinity") {
  const auto seed = test_seed();
  CAPTURE(seed);
  Draw draw(seed);
  for (int i = 0; i < kTrains; ++i) {
    Train train = draw.train();
    train.object_distance = 1e18 * mm;
    Train at_infinity = train;
    at_infinity.object_distance = infinity;
    CHECK(same(train, at_infinity, 1e-11));
    // Newton's equation: f^2/distance nearer by so much.
    train.object_distance = 1e7 * mm;
    const FirstOrder f = first_order(at_infinity);
    const double shift = in_mm(first_order(train).image_distance - f.image_distance);
    const double f_mm = in_mm(f.focal_length);
    CHECK(close(shift, f_mm * f_mm / 1e7, {.rel = 2e-3, .abs = 1e-9}));
  }
}

TEST_CASE("first order: what does nothing does nothing") {
  const Material material = glass_of(1.5, 60);
  const Train lens = train_of({thin(material, 0.01)});
  SUBCASE("an element without power") {
    CHECK(same(train_of({thin(material, 0.01), thin(material, 0), diffractive(0)}), lens, 1e-15));
  }
  SUBCASE("the last gap") { CHECK(same(train_of({thin(material, 0.01, 33)}), lens, 0)); }
  SUBCASE("a thick element of the index of the surroundings: as far as it is thick") {
    const FirstOrder f =
        first_order(train_of({thin(material, 0.01), thick(fixed_index(1), 0.1, -0.2, 7)}));
    CHECK(close(in_mm(f.image_distance), 93, {.rel = 1e-15}));
    CHECK(close(in_mm(f.track_length), 100, {.rel = 1e-15}));
  }
  SUBCASE("a plate in the image space moves the image by t (1 - 1/n)") {
    const FirstOrder f =
        first_order(train_of({thin(material, 0.01, 10), thick(fixed_index(1.5), 0, 0, 6)}));
    CHECK(close(in_mm(f.image_distance), 100 - 10 - 6 / 1.5, {.rel = 1e-15}));
    CHECK(close(in_mm(f.focal_length), 100, {.rel = 1e-15}));
    CHECK(close(in_per_mm(f.petzval), 0.01 / 1.5, {.rel = 1e-15}));
  }
}
