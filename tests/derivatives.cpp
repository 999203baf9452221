// Derivatives of every quantity by every parameter against differences in long double.
#include <doctest/doctest.h>

#include <chromacore/catalog.hpp>
#include <chromacore/solve.hpp>
#include <cmath>
#include <vector>

#include "close.hpp"
#include "evaluate.hpp"
#include "solve_variables.hpp"

using namespace chromacore;
using namespace chromacore::test;
using namespace chromacore::units;

namespace {

using Wide = long double;

Train mixed_train(double object_mm) {
  static const Catalog catalog = Catalog::built_in();
  Train train;
  train.band = Band::of_lines({"g", "F", "e", "C"}, "e");
  train.object_distance = object_mm * mm;
  train.aperture = FNumber{5.0};
  train.field = HalfAngle{4.0 * deg};
  train.stop = {.element = 2, .side = Side::back, .offset = 3.0 * mm};
  train.elements = {Thick{.material = catalog.at("N-SK16"),
                          .front = radius(60.0 * mm),
                          .back = radius(-200.0 * mm),
                          .thickness = 6.0 * mm,
                          .gap_after = 4.0 * mm},
                    Thin{catalog.at("SCHOTT/F2"), -0.012 * per_mm, 9.0 * mm},
                    Diffractive{0.0004 * per_mm, 1.0 * mm},
                    Thick{.material = catalog.at("N-BK7"),
                          .front = flat,
                          .back = radius(-50.0 * mm),
                          .thickness = 5.0 * mm}};
  return train;
}

std::vector<Requirement> every_quantity() {
  std::vector<Requirement> required;
  for (int q = 0; q <= static_cast<int>(Quantity::lateral_sum); ++q) {
    required.push_back({.quantity = static_cast<Quantity>(q), .target = 1.0, .budget = 1.0});
  }
  required.push_back({.quantity = Quantity::axial_color,
                      .between = LinePair{"e", "C"},
                      .target = 0.0,
                      .budget = 1.0});
  required.push_back({.quantity = Quantity::axial_sum, .element = 4, .target = 0.0, .budget = 1.0});
  return required;
}

std::vector<Wide> values_at(const detail::Model& model, const Train& train,
                            const detail::Variables& variables, const std::vector<Wide>& at,
                            const std::vector<Requirement>& required) {
  detail::Layout<Wide> layout;
  for (const auto& e : detail::layout_of(train)) {
    layout.push_back({e.power, e.front, e.back, e.thickness, e.gap_after});
  }
  REQUIRE(variables.write(std::span<const Wide>(at), layout));
  detail::Evaluator<Wide> evaluator(model);
  evaluator.at(layout);
  std::vector<Wide> values;
  for (const Requirement& requirement : required) {
    values.push_back(evaluator.value(detail::look_up(model, train, requirement)));
  }
  return values;
}

// (8 (f(+h) - f(-h)) - (f(+2h) - f(-2h)))/12h, for each requirement by one parameter.
std::vector<double> differences(const detail::Model& model, const Train& train,
                                const detail::Variables& variables, std::size_t i,
                                const std::vector<Requirement>& required) {
  const Wide h = 1e-3L * variables.unit(i);
  std::vector<Wide> sum(required.size(), 0.0L);
  for (const int step : {-2, -1, 1, 2}) {
    std::vector<Wide> at;
    for (std::size_t k = 0; k < variables.size(); ++k) {
      at.push_back(Wide(variables.start()[static_cast<Eigen::Index>(k)]) * variables.unit(k) +
                   (k == i ? step * h : 0.0L));
    }
    const Wide weight = (step < 0 ? -1 : 1) * (std::abs(step) == 1 ? 8.0L : -1.0L) / (12 * h);
    const std::vector<Wide> values = values_at(model, train, variables, at, required);
    for (std::size_t r = 0; r < sum.size(); ++r) sum[r] += weight * values[r];
  }
  return {sum.begin(), sum.end()};
}

void check_derivatives(const Train& train, const std::vector<Vary>& may_vary) {
  const std::vector<Requirement> required = every_quantity();
  const detail::Model model(train, detail::lines_of(train, required));
  const detail::Variables variables(train, model, may_vary, 100.0);
  const Derivatives exact = derivatives(train, may_vary, required);
  REQUIRE(exact.requirements == required.size());
  REQUIRE(exact.parameters == may_vary.size());
  for (std::size_t i = 0; i < may_vary.size(); ++i) {
    const std::vector<double> expect = differences(model, train, variables, i, required);
    for (std::size_t r = 0; r < required.size(); ++r) {
      CAPTURE(to_string(may_vary[i].parameter));
      CAPTURE(may_vary[i].element);
      CAPTURE(to_string(required[r].quantity));
      // The differences' own error is some (1e-3)^4 of the value.
      CHECK(close(exact.at(r, i), expect[r], {.rel = 1e-7, .abs = 1e-9 / variables.unit(i)}));
    }
  }
}

}  // namespace

TEST_CASE("derivatives: every quantity by every parameter, two distances of the object") {
  for (const double object_mm : {std::numeric_limits<double>::infinity(), 400.0}) {
    CAPTURE(object_mm);
    check_derivatives(mixed_train(object_mm),
                      {vary::front(1), vary::back(1), vary::thickness(1, 0.0 * mm, 20.0 * mm),
                       vary::gap_after(1), vary::power(2), vary::gap_after(2), vary::power(3),
                       vary::gap_after(3), vary::front(4), vary::back(4)});
    check_derivatives(
        mixed_train(object_mm),
        {vary::shape(1), vary::power(1), vary::thickness(1, 0.0 * mm, 20.0 * mm), vary::shape(4)});
  }
}
