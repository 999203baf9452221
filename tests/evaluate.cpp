// The one trace for every kind of number: plain, with derivatives, of high precision.
#include "evaluate.hpp"

#include <ceres/jet.h>
#include <doctest/doctest.h>

#include <atomic>
#include <boost/multiprecision/cpp_bin_float.hpp>
#include <cstdlib>
#include <new>
#include <string>
#include <vector>

#include "close.hpp"
#include "make_train.hpp"

using namespace chromacore;
using namespace chromacore::test;
using namespace chromacore::units;
using namespace chromacore::detail;

namespace {

std::atomic<long> allocations = 0;

void* counted(std::size_t size) {
  ++allocations;
  if (void* const memory = std::malloc(size)) return memory;
  throw std::bad_alloc();
}

}  // namespace

void* operator new(std::size_t size) { return counted(size); }
void* operator new[](std::size_t size) { return counted(size); }
void operator delete(void* memory) noexcept { std::free(memory); }
void operator delete(void* memory, std::size_t) noexcept { std::free(memory); }
void operator delete[](void* memory) noexcept { std::free(memory); }
void operator delete[](void* memory, std::size_t) noexcept { std::free(memory); }

namespace {

using Wide = boost::multiprecision::cpp_bin_float_50;
using Jet = ceres::Jet<double, 1>;

constexpr int kTrains = 60;
constexpr int kQuantities = static_cast<int>(Quantity::lateral_sum) + 1;

template <class T>
Layout<T> layout_as(const Layout<double>& layout) {
  Layout<T> as;
  for (const auto& e : layout) {
    as.push_back({T(e.power), T(e.front), T(e.back), T(e.thickness), T(e.gap_after)});
  }
  return as;
}

// Every number of a layout that has an effect.
template <class T>
std::vector<T*> parameters(const Model& model, Layout<T>& layout) {
  std::vector<T*> all;
  for (std::size_t e = 0; e < layout.size(); ++e) {
    if (model.kind(e) == Kind::thick) {
      all.insert(all.end(), {&layout[e].front, &layout[e].back, &layout[e].thickness});
    } else {
      all.push_back(&layout[e].power);
    }
    if (e + 1 < layout.size()) all.push_back(&layout[e].gap_after);
  }
  return all;
}

Asked asked(const Model& model, const Train& train, int quantity) {
  return look_up(model, train, {.quantity = static_cast<Quantity>(quantity)});
}

template <class T>
T value(Evaluator<T>& evaluator, const Layout<T>& layout, const Asked& asked) {
  evaluator.at(layout);
  return evaluator.value(asked);
}

// The lengths that cancel in a difference are of this order.
double longest_mm(const Reference<double>& r, const Layout<double>& layout) {
  double longest = std::abs(r.focal_length) + std::abs(r.image_distance) + vertex_length(layout) +
                   std::abs(r.chief_behind.y);
  if (!pupil_at_infinity(r.traced.to_stop)) {
    longest += std::abs(entrance_pupil_position(r.traced.to_stop));
  }
  return longest;
}

}  // namespace

TEST_CASE_TEMPLATE("values: wider numbers give what doubles give", T, long double, Wide) {
  const auto seed = test_seed();
  CAPTURE(seed);
  Draw draw(seed);
  for (int i = 0; i < kTrains; ++i) {
    const Train train = draw.train();
    const Model model(train, {});
    const Layout<double> plain = layout_of(train);
    const Layout<T> wide = layout_as<T>(plain);
    Evaluator<double> at(model);
    Evaluator<T> at_wide(model);
    for (int q = 0; q < kQuantities; ++q) {
      const Asked which = asked(model, train, q);
      const double got = value(at, plain, which);
      const double want = static_cast<double>(value(at_wide, wide, which));
      const bool has_length = to_string(which.quantity).ends_with("_mm");
      const double floor = has_length ? longest_mm(at.reference(), plain) : 1e-3;
      CAPTURE(to_string(which.quantity));
      CHECK(close(got, want, {.rel = 1e-13, .abs = 1e-13 * floor}));
    }
  }
}

TEST_CASE("values: derivatives are those of differences at 50 digits") {
  const auto seed = test_seed();
  CAPTURE(seed);
  Draw draw(seed);
  for (int i = 0; i < kTrains; ++i) {
    const Train train = draw.train();
    const Model model(train, {});
    Layout<Jet> jets = layout_as<Jet>(layout_of(train));
    Layout<Wide> wide = layout_as<Wide>(layout_of(train));
    Evaluator<Jet> at(model);
    Evaluator<Wide> at_wide(model);
    const std::vector<Jet*> by_jet = parameters(model, jets);
    const std::vector<Wide*> by_difference = parameters(model, wide);
    for (std::size_t p = 0; p < by_jet.size(); ++p) {
      by_jet[p]->v[0] = 1;
      const Wide here = *by_difference[p];
      const Wide step = 1e-18;
      for (int q = 0; q < kQuantities; ++q) {
        const Asked which = asked(model, train, q);
        if (which.quantity == Quantity::strength) continue;  // next test: it has kinks
        const double got = value(at, jets, which).v[0];
        *by_difference[p] = here + step;
        const Wide above = value(at_wide, wide, which);
        *by_difference[p] = here - step;
        const Wide below = value(at_wide, wide, which);
        *by_difference[p] = here;
        const Wide slope = (above - below) / (2 * step);
        CAPTURE(to_string(which.quantity));
        CAPTURE(p);
        CHECK(close(got, static_cast<double>(slope), {.rel = 1e-9, .abs = 1e-9}));
      }
      by_jet[p]->v[0] = 0;
    }
  }
}

TEST_CASE("values: derivative of the strength") {
  // sum |phi_i| |f| of two thin elements in contact, 0.03 and -0.01: (a + b)/(a - b).
  const Material material = glass_of(1.5, 60);
  const Train train = train_of({thin(material, 0.03), thin(material, -0.01)});
  const Model model(train, {});
  Layout<Jet> jets = layout_as<Jet>(layout_of(train));
  Evaluator<Jet> at(model);
  const Asked which = asked(model, train, static_cast<int>(Quantity::strength));
  CHECK(close(value(at, jets, which).a, 2, {.rel = 1e-15}));
  jets[0].power.v[0] = 1;
  CHECK(close(value(at, jets, which).v[0], -2 * 0.01 / (0.02 * 0.02), {.rel = 1e-13}));
}

TEST_CASE("values: at a stop imaged to infinity derivatives stay finite") {
  Train train = train_of({thin(glass_of(1.5, 60), 1 / 80.0)});
  train.object_distance = 120.0 * mm;
  train.stop = {.element = 1, .side = Side::back, .offset = 80.0 * mm};
  train.aperture = ObjectNa{0.05};
  train.field = ObjectHeight{6.0 * mm};
  const Model model(train, {});
  Layout<Jet> jets = layout_as<Jet>(layout_of(train));
  jets[0].power.v[0] = 1;
  Evaluator<Jet> at(model);
  for (int q = 0; q < kQuantities; ++q) {
    const Asked which = asked(model, train, q);
    if (which.quantity == Quantity::f_number) continue;
    if (which.quantity == Quantity::entrance_pupil_position) continue;
    CAPTURE(to_string(which.quantity));
    CHECK(std::isfinite(value(at, jets, which).a));
    CHECK(std::isfinite(value(at, jets, which).v[0]));
  }
}

TEST_CASE("values: nothing is allocated after the first call") {
  Draw draw(test_seed());
  for (int i = 0; i < kTrains; ++i) {
    const Train train = draw.train();
    const Model model(train, {});
    const Layout<double> layout = layout_of(train);
    std::vector<Asked> all;
    for (int q = 0; q < kQuantities; ++q) all.push_back(asked(model, train, q));
    Evaluator<double> at(model);
    double sum = value(at, layout, all[0]);
    const long before = allocations;
    at.at(layout);
    for (const Asked& which : all) sum += at.value(which);
    const long after = allocations;
    CHECK(after == before);
    CHECK(std::isfinite(sum));
  }
}
