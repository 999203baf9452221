// Requirements: names, factories, checks and default budgets.
#include <array>
#include <chromacore/color.hpp>
#include <chromacore/error.hpp>
#include <cmath>

#include "evaluate.hpp"
#include "text.hpp"

namespace chromacore {
namespace {

enum class Lines : bool { none, pair };
enum class Scope : bool { train, element };

struct QuantityFacts {
  Quantity quantity;
  std::string_view name;
  Lines lines = Lines::none;
  Scope scope = Scope::train;
};

constexpr std::array kQuantities = {
    QuantityFacts{Quantity::focal_length, "focal_length_mm"},
    QuantityFacts{Quantity::back_focal_distance, "back_focal_distance_mm"},
    QuantityFacts{Quantity::image_distance, "image_distance_mm"},
    QuantityFacts{Quantity::track_length, "track_length_mm"},
    QuantityFacts{Quantity::magnification, "magnification"},
    QuantityFacts{Quantity::f_number, "f_number"},
    QuantityFacts{Quantity::petzval, "petzval_per_mm"},
    QuantityFacts{Quantity::strength, "strength"},
    QuantityFacts{Quantity::entrance_pupil_position, "entrance_pupil_position_mm"},
    QuantityFacts{Quantity::exit_pupil_position, "exit_pupil_position_mm"},
    QuantityFacts{Quantity::axial_color, "axial_color_mm", Lines::pair},
    QuantityFacts{Quantity::lateral_color, "lateral_color_mm", Lines::pair},
    QuantityFacts{Quantity::secondary_axial, "secondary_axial_mm", Lines::pair},
    QuantityFacts{Quantity::secondary_lateral, "secondary_lateral_mm", Lines::pair},
    QuantityFacts{Quantity::axial_sum, "axial_sum_mm", Lines::pair, Scope::element},
    QuantityFacts{Quantity::lateral_sum, "lateral_sum_mm", Lines::pair, Scope::element},
};

static_assert([] {
  for (std::size_t i = 0; i < kQuantities.size(); ++i) {
    if (kQuantities[i].quantity != static_cast<Quantity>(i)) return false;
  }
  return true;
}());

const QuantityFacts& facts_of(Quantity quantity) {
  return kQuantities[static_cast<std::size_t>(quantity)];
}

[[noreturn]] void fail(const Requirement& requirement, const std::string& what) {
  throw Error(ErrorCode::bad_value, std::string(to_string(requirement.quantity)) + ": " + what);
}

Requirement target_of(Quantity quantity, double target, std::optional<double> budget) {
  return {.quantity = quantity, .target = target, .budget = budget};
}

std::optional<double> plain(const std::optional<Length>& length) {
  if (!length) return {};
  return in_mm(*length);
}

Requirement color_target(Quantity quantity, std::optional<LinePair> between, Length target,
                         const std::optional<Length>& budget) {
  Requirement requirement = target_of(quantity, in_mm(target), plain(budget));
  requirement.between = std::move(between);
  return requirement;
}

void check_limits(const Requirement& requirement) {
  for (const auto& value : {requirement.target, requirement.at_least, requirement.at_most}) {
    if (value && !std::isfinite(*value)) fail(requirement, "a target or limit is not finite");
  }
  const bool limited = requirement.at_least || requirement.at_most;
  if (!requirement.target && !limited) {
    fail(requirement, "nothing is asked; give target, at_least or at_most");
  }
  if (requirement.target && limited) {
    fail(requirement, "target stands beside at_least or at_most; give one or the other");
  }
  if (requirement.at_least && requirement.at_most && *requirement.at_least > *requirement.at_most) {
    fail(requirement, "at_least " + detail::number_text(*requirement.at_least) +
                          " is above at_most " + detail::number_text(*requirement.at_most));
  }
  if (requirement.budget && !(*requirement.budget > 0 && std::isfinite(*requirement.budget))) {
    fail(requirement, "budget is " + detail::number_text(*requirement.budget) +
                          "; a budget is a number above 0");
  }
}

}  // namespace

std::string_view to_string(Quantity quantity) { return facts_of(quantity).name; }

Quantity quantity(std::string_view name) {
  std::vector<std::string_view> names;
  for (const QuantityFacts& facts : kQuantities) {
    if (facts.name == name) return facts.quantity;
    names.push_back(facts.name);
  }
  throw Error(ErrorCode::not_found, "no quantity \"" + std::string(name) + "\"; nearest: " +
                                        detail::joined(detail::nearest(name, names)));
}

void check(const Requirement& requirement, const Train& train) {
  check_limits(requirement);
  const QuantityFacts& facts = facts_of(requirement.quantity);
  if (requirement.between && facts.lines == Lines::none) {
    fail(requirement, "it has no pair of lines; leave between_um out");
  }
  if (requirement.between &&
      !(requirement.between->first.is_set() && requirement.between->second.is_set())) {
    throw Error(ErrorCode::not_set,
                std::string(facts.name) + ": a line of between_um is not set; give two");
  }
  if (requirement.between &&
      requirement.between->first.wavelength() == requirement.between->second.wavelength()) {
    fail(requirement, "between_um names one line twice; give two");
  }
  if (requirement.element != 0 && facts.scope == Scope::train) {
    fail(requirement, "it belongs to the whole train; leave element out");
  }
  const int elements = static_cast<int>(train.elements.size());
  if (requirement.element < 0 || requirement.element > elements) {
    fail(requirement, "element " + std::to_string(requirement.element) +
                          " is not there; the train has " + std::to_string(elements));
  }
}

namespace require {

Requirement focal_length(Length target, std::optional<Length> budget) {
  return target_of(Quantity::focal_length, in_mm(target), plain(budget));
}
Requirement back_focal_distance(Length target, Length budget) {
  return target_of(Quantity::back_focal_distance, in_mm(target), in_mm(budget));
}
Requirement image_distance(Length target, Length budget) {
  return target_of(Quantity::image_distance, in_mm(target), in_mm(budget));
}
Requirement track_length_at_most(Length limit, Length budget) {
  return {.quantity = Quantity::track_length, .at_most = in_mm(limit), .budget = in_mm(budget)};
}
Requirement magnification(double target, double budget) {
  return target_of(Quantity::magnification, target, budget);
}
Requirement petzval_at_most(Power limit, Power budget) {
  return {.quantity = Quantity::petzval, .at_most = in_per_mm(limit), .budget = in_per_mm(budget)};
}
Requirement strength_at_most(double limit, double budget) {
  return {.quantity = Quantity::strength, .at_most = limit, .budget = budget};
}
Requirement axial_color(Line first, Line second, Length target, std::optional<Length> budget) {
  return color_target(Quantity::axial_color, LinePair{std::move(first), std::move(second)}, target,
                      budget);
}
Requirement lateral_color(Line first, Line second, Length target, std::optional<Length> budget) {
  return color_target(Quantity::lateral_color, LinePair{std::move(first), std::move(second)},
                      target, budget);
}
Requirement secondary_axial(Length target, std::optional<Length> budget) {
  return color_target(Quantity::secondary_axial, {}, target, budget);
}
Requirement secondary_lateral(Length target, std::optional<Length> budget) {
  return color_target(Quantity::secondary_lateral, {}, target, budget);
}

}  // namespace require

namespace detail {
namespace {

LinePair pair_of(const Train& train, const Requirement& requirement) {
  return requirement.between ? *requirement.between : train.band.primary_pair();
}

double asked_for(const Requirement& requirement) {
  for (const auto& value : {requirement.target, requirement.at_least, requirement.at_most}) {
    if (value) return *value;
  }
  return 0.0;
}

double axial_budget_mm(const Train& train, double working_f_number) {
  const double lambda_mm = 1e-3 * in_um(train.band.reference.wavelength());
  return 2.0 * lambda_mm * working_f_number * working_f_number;
}

double lateral_budget_mm(const Train& train, double working_f_number) {
  if (train.pixel) return in_mm(*train.pixel);
  return 1.22e-3 * in_um(train.band.reference.wavelength()) * working_f_number;
}

}  // namespace

std::vector<Line> lines_of(const Train& train, const std::vector<Requirement>& required) {
  std::vector<Line> lines;
  for (const Requirement& requirement : required) {
    check(requirement, train);
    const LinePair pair = pair_of(train, requirement);
    lines.push_back(pair.first);
    lines.push_back(pair.second);
  }
  return lines;
}

Asked look_up(const Model& model, const Train& train, const Requirement& requirement) {
  const LinePair pair = pair_of(train, requirement);
  Asked asked;
  asked.quantity = requirement.quantity;
  asked.pair = {model.place(pair.first), model.place(pair.second)};
  if (requirement.element > 0) asked.element = static_cast<std::size_t>(requirement.element) - 1;
  return asked;
}

double budget_of(const Requirement& requirement, const Train& train, double working_f_number) {
  if (requirement.budget) return *requirement.budget;
  switch (requirement.quantity) {
    case Quantity::focal_length:
      if (const double asked = asked_for(requirement); asked != 0.0) return 1e-3 * std::abs(asked);
      break;
    case Quantity::axial_color:
    case Quantity::secondary_axial:
      return axial_budget_mm(train, working_f_number);
    case Quantity::lateral_color:
    case Quantity::secondary_lateral:
      return lateral_budget_mm(train, working_f_number);
    default:
      break;
  }
  throw Error(ErrorCode::not_set, std::string(to_string(requirement.quantity)) +
                                      ": it has no default budget; give budget");
}

}  // namespace detail
}  // namespace chromacore
