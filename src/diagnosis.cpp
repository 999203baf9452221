#include "diagnosis.hpp"

#include <algorithm>
#include <chromacore/error.hpp>
#include <cmath>
#include <limits>
#include <optional>

#include "infeasible.hpp"
#include "text.hpp"

namespace chromacore::detail {
namespace {

constexpr int trial_iterations = 60;
// Trains longer than this are not searched for one more parameter.
constexpr std::size_t most_candidates = 40;
constexpr double on_target = 1e-6;  // of a budget
constexpr double runaway_decades = 2;

std::string rounded(double value) { return number_text(value, 3); }

const RequirementResult& worst(const Analysis& analysis) {
  return *std::max_element(analysis.requirements.begin(), analysis.requirements.end(),
                           [](const auto& a, const auto& b) { return a.spent() < b.spent(); });
}

std::string parameter_text(const Vary& vary) {
  return std::string(to_string(vary.parameter)) + " of element " + std::to_string(vary.element);
}

// ---- bounds ----

// A bound of the user's own, or that of lengths at 0.
struct ActiveBound {
  std::size_t variable = 0;
  Held side = Held::free;
  double pull = 0;  // what a step of one scaled unit beyond it would lower the cost by
};

std::vector<ActiveBound> active_bounds(const LeastSquaresAnswer& answer) {
  const Eigen::VectorXd gradient = answer.at.jacobian.transpose() * answer.at.residuals;
  std::vector<ActiveBound> bounds;
  for (std::size_t i = 0; i < answer.held.size(); ++i) {
    if (answer.held[i] == Held::free) continue;
    const double slope = gradient[static_cast<Eigen::Index>(i)];
    bounds.push_back({i, answer.held[i], answer.held[i] == Held::lower ? slope : -slope});
  }
  std::sort(bounds.begin(), bounds.end(),
            [](const auto& a, const auto& b) { return a.pull > b.pull; });
  return bounds;
}

std::string bound_text(const SolveProblem& problem, const ActiveBound& bound) {
  const Variables& variables = problem.variables();
  const auto i = static_cast<Eigen::Index>(bound.variable);
  const bool low = bound.side == Held::lower;
  const double value = (low ? variables.lower() : variables.upper())[i];
  return parameter_text(problem.may_vary()[bound.variable]) + " is at its " +
         (low ? "lower" : "upper") + " bound, " +
         number_text(value * variables.unit(bound.variable), 6);
}

bool is_open(const Vary& vary, Held side) {
  if (side == Held::upper) return std::isinf(vary.max);
  return vary.min <= 0 &&
         (vary.parameter == Parameter::thickness || vary.parameter == Parameter::gap_after);
}

// ---- trying again ----

std::vector<Requirement> requirements_of(const Analysis& analysis) {
  std::vector<Requirement> required;
  for (const RequirementResult& result : analysis.requirements) {
    required.push_back(result.requirement);
  }
  return required;
}

// The worst spent share of a budget once these may vary, from this train on.
double worst_spent(const Train& train, const std::vector<Vary>& may_vary,
                   const std::vector<Requirement>& required) try {
  SolveProblem problem(train, may_vary, required);
  LeastSquares search;
  search.start = search.home = problem.variables().start();
  search.lower = problem.variables().lower();
  search.upper = problem.variables().upper();
  search.evaluate = [&](const Eigen::VectorXd& x, Linearization& at) {
    return problem.evaluate(x, at);
  };
  search.max_iterations = trial_iterations;
  const LeastSquaresAnswer answer = minimize(search);
  if (answer.ending == Ending::no_start) return std::numeric_limits<double>::infinity();
  return answer.at.residuals.cwiseAbs().maxCoeff();
} catch (const Error&) {
  return std::numeric_limits<double>::infinity();  // no such parameter in this train
}

std::string outcome_text(double spent) {
  return spent <= 1.0 ? "every requirement would be met"
                      : "the worst would still spend " + rounded(spent) + " budgets";
}

// What the release of the bounds that hold back the solution would buy; empty where none does.
std::string release_text(const SolveProblem& problem, const LeastSquaresAnswer& answer,
                         const Train& train, const Analysis& analysis) {
  const double gain = 1e-6 * answer.cost;
  std::string text;
  std::vector<Vary> may_vary = problem.may_vary();
  for (const ActiveBound& bound : active_bounds(answer)) {
    Vary& vary = may_vary[bound.variable];
    if (!(bound.pull > gain) || is_open(vary, bound.side)) continue;
    text += (text.empty() ? "" : ", ") + bound_text(problem, bound);
    (bound.side == Held::lower ? vary.min : vary.max) =
        (bound.side == Held::lower ? -1 : 1) * std::numeric_limits<double>::infinity();
  }
  if (text.empty()) return text;
  const double spent = worst_spent(train, may_vary, requirements_of(analysis));
  return text + "; without that " + outcome_text(spent);
}

std::vector<Vary> candidates(const Train& train, const SolveProblem& problem) {
  std::vector<Vary> all;
  const double infinity = std::numeric_limits<double>::infinity();
  for (int e = 1; e <= static_cast<int>(train.elements.size()); ++e) {
    const bool thick = problem.model().kind(static_cast<std::size_t>(e) - 1) == Kind::thick;
    for (const Parameter parameter :
         {Parameter::power, Parameter::curvature_front, Parameter::curvature_back}) {
      if (thick == (parameter == Parameter::power)) continue;
      all.push_back({.element = e, .parameter = parameter, .min = -infinity, .max = infinity});
    }
    all.push_back({.element = e, .parameter = Parameter::gap_after, .min = 0, .max = infinity});
  }
  return all;
}

// The one parameter more that would help most, if any does.
std::string one_more_text(const SolveProblem& problem, const Train& train,
                          const Analysis& analysis) {
  const std::vector<Vary> all = candidates(train, problem);
  if (all.size() > most_candidates) return "";
  const std::vector<Requirement> required = requirements_of(analysis);
  double least = 0.5 * worst(analysis).spent();
  std::optional<Vary> best;
  for (const Vary& one : all) {
    std::vector<Vary> may_vary = problem.may_vary();
    may_vary.push_back(one);
    const double spent = worst_spent(train, may_vary, required);
    if (!(spent < least)) continue;
    least = spent;
    best = one;
  }
  if (!best) return "";
  return "if " + parameter_text(*best) + " may vary too, " + outcome_text(least);
}

// ---- what else there is ----

std::string remedy_of(const Requirement& blocking) {
  switch (blocking.quantity) {
    case Quantity::secondary_axial:
    case Quantity::secondary_lateral:
      return "materials closer in P for their difference of V, or one element more of a third "
             "material";
    case Quantity::axial_color:
    case Quantity::axial_sum:
      return "materials further apart in V, or one element more";
    case Quantity::lateral_color:
    case Quantity::lateral_sum:
      return "another place of the stop, or one element more at some distance from it";
    case Quantity::petzval:
      return "more distance between positive and negative power, or an element of higher index";
    default:
      return "one element more";
  }
}

std::string blocking_text(const Analysis& analysis) {
  const RequirementResult& block = worst(analysis);
  std::string text = requirement_text(block.requirement) + " blocks: at " +
                     number_text(block.value, 5) + " it spends " + rounded(block.spent()) +
                     " times its budget of " + number_text(*block.requirement.budget, 5);
  const auto over = std::count_if(analysis.requirements.begin(), analysis.requirements.end(),
                                  [](const auto& result) { return !result.met(); });
  if (over > 1) text += " (" + std::to_string(over) + " requirements are over theirs)";
  return text;
}

}  // namespace

std::string why_met(const SolveProblem& problem, const LeastSquaresAnswer& answer,
                    const Analysis& analysis) {
  std::string text = "every requirement is within its budget after " +
                     std::to_string(answer.iterations) +
                     (answer.iterations == 1 ? " iteration" : " iterations");
  const RequirementResult& most = worst(analysis);
  text += most.spent() < on_target ? ", all on target"
                                   : "; most is spent by " + requirement_text(most.requirement) +
                                         ", " + rounded(most.spent()) + " of its budget";
  for (const ActiveBound& bound : active_bounds(answer)) {
    text += "; " + bound_text(problem, bound);
  }
  return text;
}

std::string why_compromise(const SolveProblem& problem, const LeastSquaresAnswer& answer,
                           const Analysis& analysis) {
  const Train train = problem.train_at(answer.x);
  std::string text = blocking_text(analysis);
  const std::size_t asked = analysis.requirements.size();
  const std::size_t variables = problem.variables().size();
  if (asked > variables) {
    text += "; " + std::to_string(asked) + " requirements stand against " +
            std::to_string(variables) + (variables == 1 ? " variable" : " variables");
  }
  for (const std::string& remedy :
       {release_text(problem, answer, train, analysis), one_more_text(problem, train, analysis)}) {
    if (!remedy.empty()) text += "; " + remedy;
  }
  const RequirementResult& block = worst(analysis);
  return text + "; else it takes " + remedy_of(block.requirement) + ", or a budget of " +
         rounded(block.spent() * *block.requirement.budget);
}

std::string why_stopped(const std::string& reason, const SolveProblem& problem,
                        const Analysis& analysis) {
  const RequirementResult& most = worst(analysis);
  std::string text = reason + " before the minimum; the train holds the best so far, where " +
                     requirement_text(most.requirement) + " spends " + rounded(most.spent()) +
                     " times its budget";
  const double now = in_mm(analysis.focal_length);
  const double before = problem.start_focal_length_mm();
  if (std::abs(std::log10(std::abs(now / before))) > runaway_decades) {
    text += "; the focal length ran from " + rounded(before) + " to " + rounded(now) +
            " mm: require one";
  }
  return text;
}

}  // namespace chromacore::detail
