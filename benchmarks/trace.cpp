// The batch trace against the same trace one wavelength at a time, and against what the processor's
// multiply-add rate allows.
#undef HWY_TARGET_INCLUDE
#define HWY_TARGET_INCLUDE "trace.cpp"
#include <hwy/foreach_target.h>  // before highway.h, which depends on it
//
#include <hwy/highway.h>

HWY_BEFORE_NAMESPACE();
namespace rate::HWY_NAMESPACE {

namespace hn = hwy::HWY_NAMESPACE;

constexpr int kChains = 12;  // more than latency times ports, so that only throughput limits

// Multiply-adds of doubles a call of `rounds` rounds; the sum keeps them from being left out.
HWY_INLINE double chains(int rounds) {
  const hn::ScalableTag<double> tag;
  hn::Vec<decltype(tag)> c0 = hn::Set(tag, 1.0), c1 = c0, c2 = c0, c3 = c0, c4 = c0, c5 = c0,
                         c6 = c0, c7 = c0, c8 = c0, c9 = c0, c10 = c0, c11 = c0;
  const auto a = hn::Set(tag, 0.999), b = hn::Set(tag, 1e-3);
  for (int i = 0; i < rounds; ++i) {
    c0 = hn::MulAdd(a, c0, b), c1 = hn::MulAdd(a, c1, b), c2 = hn::MulAdd(a, c2, b);
    c3 = hn::MulAdd(a, c3, b), c4 = hn::MulAdd(a, c4, b), c5 = hn::MulAdd(a, c5, b);
    c6 = hn::MulAdd(a, c6, b), c7 = hn::MulAdd(a, c7, b), c8 = hn::MulAdd(a, c8, b);
    c9 = hn::MulAdd(a, c9, b), c10 = hn::MulAdd(a, c10, b), c11 = hn::MulAdd(a, c11, b);
  }
  const auto sum = hn::Add(
      hn::Add(hn::Add(hn::Add(c0, c1), hn::Add(c2, c3)), hn::Add(hn::Add(c4, c5), hn::Add(c6, c7))),
      hn::Add(hn::Add(c8, c9), hn::Add(c10, c11)));
  return hn::GetLane(hn::SumOfLanes(tag, sum));
}

double multiply_adds(int rounds, double* count) {
  *count = static_cast<double>(rounds) * kChains *
           static_cast<double>(hn::Lanes(hn::ScalableTag<double>()));
  return chains(rounds);
}

const char* target_name() { return hwy::TargetName(HWY_TARGET); }

}  // namespace rate::HWY_NAMESPACE
HWY_AFTER_NAMESPACE();

#if HWY_ONCE
#include <chromacore/paraxial.hpp>
#include <cmath>
#include <cstddef>
#include <vector>

#include "pairs.hpp"
#include "trace.hpp"

namespace rate {
namespace {
HWY_EXPORT(multiply_adds);
HWY_EXPORT(target_name);

double multiply_adds_chosen(int rounds, double* count) {
  return HWY_DYNAMIC_DISPATCH(multiply_adds)(rounds, count);
}
const char* target_name_chosen() { return HWY_DYNAMIC_DISPATCH(target_name)(); }
}  // namespace
}  // namespace rate

namespace {

using namespace chromacore;
using namespace chromacore::units;
using chromacore::detail::Ray;

// Six lenses with air between, as many wavelengths as asked.
struct Lenses {
  std::size_t wavelengths;
  std::vector<Curvature> curvatures;
  std::vector<Length> thicknesses;
  std::vector<double> indices;
  std::vector<Length> y, y_chief;
  std::vector<double> u, u_chief;

  explicit Lenses(std::size_t count)
      : wavelengths(count), y(count), y_chief(count), u(count), u_chief(count) {
    for (int lens = 0; lens < 6; ++lens) {
      curvatures.insert(curvatures.end(), {0.01 * per_mm, -0.008 * per_mm});
      thicknesses.insert(thicknesses.end(), {5.0 * mm, 3.0 * mm});
      indices.insert(indices.end(), count, 1.0);
      for (std::size_t w = 0; w < count; ++w) {
        indices.push_back(1.5 + 0.02 * lens +
                          0.01 * static_cast<double>(w) / static_cast<double>(count));
      }
    }
    indices.insert(indices.end(), count, 1.0);
    thicknesses.pop_back();
  }

  [[nodiscard]] double surfaces() const { return static_cast<double>(curvatures.size()); }

  void start() {
    for (std::size_t w = 0; w < wavelengths; ++w) {
      y[w] = 10.0 * mm;
      u[w] = 0.0;
      y_chief[w] = -2.0 * mm;
      u_chief[w] = 0.1;
    }
  }

  void together() {
    start();
    trace_batch({curvatures, thicknesses, indices, wavelengths}, {y, u, y_chief, u_chief});
    pairs::keep(y.data());
  }

  // The same steps of the same trace, wavelength by wavelength.
  void one_by_one() {
    start();
    for (std::size_t w = 0; w < wavelengths; ++w) {
      double n = indices[w];
      Ray<double> marginal{in_mm(y[w]), u[w] * n};
      Ray<double> chief{in_mm(y_chief[w]), u_chief[w] * n};
      for (std::size_t k = 0; k < curvatures.size(); ++k) {
        const double after = indices[(k + 1) * wavelengths + w];
        const double power = detail::surface_power(in_per_mm(curvatures[k]), n, after);
        refract(marginal, power);
        refract(chief, power);
        n = after;
        if (k == thicknesses.size()) break;
        const double reduced = in_mm(thicknesses[k]) / n;
        transfer(marginal, reduced);
        transfer(chief, reduced);
      }
      y[w] = marginal.y * mm, u[w] = marginal.w / n;
      y_chief[w] = chief.y * mm, u_chief[w] = chief.w / n;
    }
    pairs::keep(y.data());
  }
};

bool same(Lenses& lenses) {
  lenses.one_by_one();
  const std::vector<Length> plain = lenses.y_chief;
  lenses.together();
  for (std::size_t w = 0; w < plain.size(); ++w) {
    const double difference = std::abs(in_mm(plain[w]) - in_mm(lenses.y_chief[w]));
    if (!(difference <= 1e-11 * std::abs(in_mm(plain[w])))) return false;
  }
  return true;
}

// Multiply-add class operations a surface and wavelength in trace_batch.cpp: surface power 2,
// refraction 2, transfer 2, reduced thickness 2.5 and half a division.
constexpr double kOperations = 8.5;

}  // namespace

int main() {
  Lenses lenses(64);
  if (!same(lenses)) {
    fmt::print("trace: batch and single differ\n");
    return 1;
  }
  const bool pass = pairs::ratio(
      "trace, 64 wavelengths, both rays: batch / one by one", [&] { lenses.together(); },
      [&] { lenses.one_by_one(); }, 0.5);
  const double seconds = pairs::quickest([&] { lenses.together(); });
  const double rate = lenses.surfaces() * static_cast<double>(lenses.wavelengths) / seconds;
  double count = 0;
  const double adds_seconds =
      pairs::quickest([&] { pairs::keep(rate::multiply_adds_chosen(1000, &count)); });
  const double adds = count / adds_seconds;
  fmt::print(
      "trace, {}: {:.2f}e9 surface-wavelengths/s (goal 1.2e9); multiply-adds {:.1f}e9/s, of "
      "which the trace's {} operations use {:.0f} %\n",
      rate::target_name_chosen(), rate * 1e-9, adds * 1e-9, kOperations,
      100.0 * rate * kOperations / adds);
  return pass ? 0 : 1;
}
#endif
