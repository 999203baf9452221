// The trace over many wavelengths at once against the plain one, on every instruction set here.
#include <doctest/doctest.h>
#include <hwy/targets.h>

#include <chromacore/paraxial.hpp>
#include <cmath>
#include <string>
#include <vector>

#include "close.hpp"
#include "make_train.hpp"
#include "message_of.hpp"
#include "trace.hpp"

using namespace chromacore;
using namespace chromacore::test;
using namespace chromacore::units;

namespace {

struct Case {
  std::vector<Curvature> curvatures;
  std::vector<Length> thicknesses;
  std::vector<double> indices;
  std::vector<Length> marginal_height, chief_height;
  std::vector<double> marginal_slope, chief_slope;

  Case(Draw& draw, std::size_t surfaces, std::size_t wavelengths) {
    for (std::size_t k = 0; k < surfaces; ++k) {
      curvatures.push_back((draw.chance(0.2) ? 0 : draw.between(-0.02, 0.02)) * per_mm);
      if (k > 0) thicknesses.push_back((draw.chance(0.2) ? 0 : draw.between(0, 9)) * mm);
    }
    for (std::size_t i = 0; i < (surfaces + 1) * wavelengths; ++i) {
      indices.push_back(draw.between(1, 2));
    }
    for (std::size_t w = 0; w < wavelengths; ++w) {
      marginal_height.push_back(draw.between(1, 10) * mm);
      marginal_slope.push_back(draw.between(-0.1, 0.1));
      chief_height.push_back(draw.between(-10, 10) * mm);
      chief_slope.push_back(draw.between(-0.1, 0.1));
    }
  }

  std::size_t wavelengths() const { return marginal_slope.size(); }
  BatchSurfaces surfaces() const { return {curvatures, thicknesses, indices, wavelengths()}; }
  BatchRays rays() { return {marginal_height, marginal_slope, chief_height, chief_slope}; }

  double n(std::size_t k, std::size_t w) const { return indices[k * wavelengths() + w]; }

  // The plain trace of one ray, from before the first surface to behind the last: y and u.
  detail::Ray<double> plain(Length height, double slope, std::size_t w) const {
    detail::Ray<double> ray{in_mm(height), n(0, w) * slope};
    for (std::size_t k = 0; k < curvatures.size(); ++k) {
      detail::refract(ray, detail::surface_power(in_per_mm(curvatures[k]), n(k, w), n(k + 1, w)));
      if (k < thicknesses.size()) detail::transfer(ray, in_mm(thicknesses[k]) / n(k + 1, w));
    }
    return {ray.y, ray.w / n(curvatures.size(), w)};
  }
};

// How many rays of a case leave the batch otherwise than the plain trace.
int differences(Case rays_in) {
  const Case before = rays_in;
  trace_batch(rays_in.surfaces(), rays_in.rays());
  int count = 0;
  const auto compare = [&](Length y, double u, const detail::Ray<double>& want) {
    const bool same = close(in_mm(y), want.y, {.rel = 1e-12, .abs = 1e-11}) &&
                      close(u, want.w, {.rel = 1e-12, .abs = 1e-12});
    if (!same) ++count;
  };
  for (std::size_t w = 0; w < before.wavelengths(); ++w) {
    compare(rays_in.marginal_height[w], rays_in.marginal_slope[w],
            before.plain(before.marginal_height[w], before.marginal_slope[w], w));
    compare(rays_in.chief_height[w], rays_in.chief_slope[w],
            before.plain(before.chief_height[w], before.chief_slope[w], w));
  }
  return count;
}

int differences_of_all_sizes(Draw& draw) {
  int count = 0;
  for (std::size_t w = 0; w <= 70; ++w) {
    for (std::size_t k = 1; k <= 13; ++k) count += differences(Case(draw, k, w));
  }
  return count;
}

}  // namespace

TEST_CASE("trace_batch: each size is as the plain trace, on every instruction set") {
  const auto seed = test_seed();
  CAPTURE(seed);
  Draw draw(seed);
  CHECK(differences_of_all_sizes(draw) == 0);  // as chosen
  for (const auto target : hwy::SupportedAndGeneratedTargets()) {
    const std::string name = hwy::TargetName(target);
    MESSAGE("instruction set: ", name);
    CAPTURE(name);
    hwy::SetSupportedTargetsForTest(target);
    CHECK(differences_of_all_sizes(draw) == 0);
  }
  hwy::SetSupportedTargetsForTest(0);
}

TEST_CASE("trace_batch: a train at three wavelengths is as traced one by one") {
  const Train train =
      train_of({thick(crown(), 0.012, -0.011, 8, 2), thick(flint(), -0.0105, 0, 4)});
  std::vector<Length> y, y_chief;
  std::vector<double> u, u_chief;
  std::vector<double> indices;
  const std::vector<Line>& lines = train.band.wavelengths;
  for (const Material& medium : {Material(), crown(), Material(), flint(), Material()}) {
    for (const Line& line : lines) {
      indices.push_back(medium.is_set() ? index(medium, line.wavelength()) : 1.0);
    }
  }
  for (std::size_t w = 0; w < lines.size(); ++w) {  // parallel light, stop at the first vertex
    y.push_back(5.0 * mm);
    u.push_back(0);
    y_chief.push_back(0.0 * mm);
    u_chief.push_back(std::tan(in_rad(1.0 * deg)));
  }
  const std::vector<Curvature> curvatures = {0.012 * per_mm, -0.011 * per_mm, -0.0105 * per_mm,
                                             flat};
  const std::vector<Length> thicknesses = {8.0 * mm, 2.0 * mm, 4.0 * mm};
  trace_batch({curvatures, thicknesses, indices, lines.size()}, {y, u, y_chief, u_chief});
  for (std::size_t w = 0; w < lines.size(); ++w) {
    const TracePoint last = trace(train, lines[w]).back();
    CHECK(close(in_mm(y[w]), in_mm(last.marginal_height), {.rel = 1e-14}));
    CHECK(close(u[w], last.marginal_slope, {.rel = 1e-13}));
    CHECK(close(in_mm(y_chief[w]), in_mm(last.chief_height), {.rel = 1e-14}));
    CHECK(close(u_chief[w], last.chief_slope, {.rel = 1e-13}));
  }
}

TEST_CASE("trace_batch: sizes that do not fit together are refused, and nothing is written") {
  const char* const message =
      "bad_value: batch trace: K curvatures need K - 1 thicknesses, (K + 1) W indices and W of "
      "each "
      "ray's heights and slopes, K at least 1";
  Draw draw(1);
  const Case good(draw, 3, 5);
  const auto refused = [&](auto spoil) {
    Case spoiled = good;
    spoil(spoiled);
    const std::string got = message_of([&] { trace_batch(spoiled.surfaces(), spoiled.rays()); });
    CHECK(got == message);
    if (!spoiled.marginal_height.empty()) {
      CHECK(spoiled.marginal_height[0] == good.marginal_height[0]);
    }
  };
  refused([](Case& c) { c.curvatures.pop_back(); });
  refused([](Case& c) { c.thicknesses.pop_back(); });
  refused([](Case& c) { c.indices.pop_back(); });
  refused([](Case& c) { c.indices.push_back(1); });
  refused([](Case& c) { c.marginal_height.pop_back(); });
  refused([](Case& c) { c.marginal_slope.pop_back(); });
  refused([](Case& c) { c.chief_height.pop_back(); });
  refused([](Case& c) { c.chief_slope.pop_back(); });
  refused([](Case& c) {
    c.curvatures.clear();
    c.thicknesses.clear();
  });
}
