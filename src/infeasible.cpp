#include "infeasible.hpp"

#include <Eigen/QR>
#include <algorithm>
#include <cmath>
#include <limits>

#include "text.hpp"

namespace chromacore::detail {
namespace {

constexpr double no_influence = 1e-9;  // budgets, for a large change of a variable
constexpr double equal_v = 1e-9;       // relative
constexpr double largest_strength = 1e3;

using Reason = std::optional<std::string>;

std::string rounded(double value) { return number_text(value, 6); }

// ---- two requirements on one value ----

struct Range {
  double low = -std::numeric_limits<double>::infinity();
  double high = std::numeric_limits<double>::infinity();
};

Range allowed(const Requirement& requirement) {
  const double budget = *requirement.budget;
  if (requirement.target) return {*requirement.target - budget, *requirement.target + budget};
  Range range;
  if (requirement.at_least) range.low = *requirement.at_least - budget;
  if (requirement.at_most) range.high = *requirement.at_most + budget;
  return range;
}

std::string wish_text(const Requirement& requirement) {
  std::string text;
  if (requirement.target) text = rounded(*requirement.target);
  if (requirement.at_least) text = "at least " + rounded(*requirement.at_least);
  if (requirement.at_most) {
    text += (text.empty() ? "at most " : " and at most ") + rounded(*requirement.at_most);
  }
  return text + " (budget " + rounded(*requirement.budget) + ")";
}

bool same_value(const Asked& a, const Asked& b) {
  return a.quantity == b.quantity && a.element == b.element && a.pair.first == b.pair.first &&
         a.pair.second == b.pair.second;
}

bool overlap(const Range& a, const Range& b) { return a.low <= b.high && b.low <= a.high; }

Reason clash(const SolveProblem& problem, const std::vector<RequirementResult>& results) {
  const std::vector<Asked>& asked = problem.asked();
  for (std::size_t i = 0; i < asked.size(); ++i) {
    for (std::size_t j = i + 1; j < asked.size(); ++j) {
      const Requirement& a = results[i].requirement;
      const Requirement& b = results[j].requirement;
      if (!same_value(asked[i], asked[j]) || overlap(allowed(a), allowed(b))) continue;
      return requirement_text(a) + " is to be " + wish_text(a) + " and " + wish_text(b) +
             " as well: no value is both; drop one of the two";
    }
  }
  return {};
}

// ---- a requirement without a variable ----

// Three places tell an extreme from a value that never changes: the start, the answer, and one
// beside it.
Reason untouched(SolveProblem& problem, const LeastSquaresAnswer& answer,
                 const std::vector<RequirementResult>& results) {
  Linearization start;
  Linearization beside;
  const Eigen::VectorXd step = Eigen::VectorXd::LinSpaced(answer.x.size(), 0.01, 0.02)
                                   .cwiseMin(problem.variables().upper() - answer.x);
  if (!problem.evaluate(problem.variables().start(), start)) return {};
  if (!problem.evaluate(answer.x + step, beside)) return {};
  for (std::size_t r = 0; r < results.size(); ++r) {
    if (results[r].met()) continue;
    const auto row = static_cast<Eigen::Index>(r);
    const double largest =
        std::max({answer.at.jacobian.row(row).norm(), start.jacobian.row(row).norm(),
                  beside.jacobian.row(row).norm()});
    if (largest > no_influence) continue;
    return "nothing that may vary acts on " + requirement_text(results[r].requirement) +
           ", which is and stays " + rounded(results[r].value) + ", asked to be " +
           wish_text(results[r].requirement) + "; vary something that does";
  }
  return {};
}

// ---- thin elements in contact ----

bool in_contact(const SolveProblem& problem, const LeastSquaresAnswer& answer) {
  const Model& model = problem.model();
  const Layout<double> layout = problem.layout_at(answer.x);
  if (model.vergence() != 0.0) return false;
  for (std::size_t e = 0; e < model.elements(); ++e) {
    if (model.kind(e) == Kind::thick) return false;
    if (e + 1 < model.elements() && layout[e].gap_after != 0.0) return false;
  }
  return std::none_of(problem.may_vary().begin(), problem.may_vary().end(),
                      [](const Vary& vary) { return vary.parameter == Parameter::gap_after; });
}

const RequirementResult* focal_length_target(const std::vector<RequirementResult>& results) {
  for (const RequirementResult& result : results) {
    const Requirement& requirement = result.requirement;
    if (requirement.quantity == Quantity::focal_length && requirement.target) return &result;
  }
  return nullptr;
}

// "N-BK7 V 64.17, P 0.6923; ...", over the band's ends.
std::string v_and_p_text(const SolveProblem& problem) {
  const Train& train = problem.train();
  const Model& model = problem.model();
  const std::size_t first = model.place(train.band.shortest());
  const std::size_t last = model.place(train.band.longest());
  std::string text;
  for (std::size_t e = 0; e < model.elements(); ++e) {
    const auto* thin = std::get_if<Thin>(&train.elements[e]);
    const double spread = model.relative_power(first, e) - model.relative_power(last, e);
    const double p = (1.0 - model.relative_power(last, e)) / spread;
    text += (e > 0 ? "; " : "") + (thin ? thin->material.name() : std::string("diffractive")) +
            " V " + rounded(1.0 / spread) + ", P " + number_text(p, 4);
  }
  return text;
}

// Does one V serve all? Then the focal length at each wavelength is f times the same factor.
Reason one_v(const SolveProblem& problem, const RequirementResult& focal_length,
             const RequirementResult& result, const Asked& asked) {
  if (asked.quantity != Quantity::axial_color || result.met()) return {};
  const Model& model = problem.model();
  const auto at = [&](std::size_t w, std::size_t e) { return model.relative_power(w, e); };
  const double spread = at(asked.pair.first, 0) - at(asked.pair.second, 0);
  for (std::size_t e = 1; e < model.elements(); ++e) {
    const double other = at(asked.pair.first, e) - at(asked.pair.second, e);
    if (std::abs(other - spread) > equal_v * std::abs(spread)) return {};
  }
  const double per_length = 1.0 / at(asked.pair.first, 0) - 1.0 / at(asked.pair.second, 0);
  const double target = *focal_length.requirement.target;
  const double middle = target * per_length;
  const double half = *focal_length.requirement.budget * std::abs(per_length);
  if (overlap({middle - half, middle + half}, allowed(result.requirement))) return {};
  return "thin in contact, materials of one V (" + v_and_p_text(problem) +
         ") have the same colour whatever their powers: at a focal length of " + rounded(target) +
         " mm " + requirement_text(result.requirement) + " is " + rounded(middle) +
         ", asked to be " + wish_text(result.requirement) +
         "; take a material of another V, or separate the elements";
}

// Coefficient of an element's power in a colour that is to vanish; NaN where it is no such row.
double color_coefficient(const SolveProblem& problem, const Asked& asked,
                         const Requirement& requirement, std::size_t e) {
  const auto at = [&](std::size_t w) { return problem.model().relative_power(w, e); };
  if (requirement.target == 0.0 && asked.quantity == Quantity::axial_color) {
    return at(asked.pair.first) - at(asked.pair.second);
  }
  if (requirement.target == 0.0 && asked.quantity == Quantity::secondary_axial) {
    return 1.0 - 0.5 * (at(asked.pair.first) + at(asked.pair.second));
  }
  return std::numeric_limits<double>::quiet_NaN();
}

// Rows: sum p = 1 and each colour that is to vanish. All powers have to vary.
Eigen::MatrixXd contact_conditions(const SolveProblem& problem,
                                   const std::vector<RequirementResult>& results) {
  const auto elements = static_cast<Eigen::Index>(problem.model().elements());
  Eigen::MatrixXd rows = Eigen::MatrixXd::Ones(1, elements);
  for (std::size_t r = 0; r < results.size(); ++r) {
    Eigen::RowVectorXd row(elements);
    for (Eigen::Index e = 0; e < elements; ++e) {
      row[e] = color_coefficient(problem, problem.asked()[r], results[r].requirement,
                                 static_cast<std::size_t>(e));
    }
    if (!row.allFinite()) continue;
    rows.conservativeResize(rows.rows() + 1, elements);
    rows.bottomRows(1) = row;
  }
  return rows;
}

Reason too_strong(const SolveProblem& problem, const std::vector<RequirementResult>& results) {
  const std::size_t elements = problem.model().elements();
  if (problem.variables().size() != elements) return {};
  Eigen::MatrixXd rows = contact_conditions(problem, results);
  if (rows.rows() < 3 || rows.rows() > rows.cols()) return {};
  rows.rowwise().normalize();
  Eigen::VectorXd right = Eigen::VectorXd::Zero(rows.rows());
  right[0] = 1.0 / std::sqrt(static_cast<double>(elements));
  Eigen::CompleteOrthogonalDecomposition<Eigen::MatrixXd> cod;
  cod.setThreshold(1e-12);
  const Eigen::VectorXd powers = cod.compute(rows).solve(right);
  const double strength = powers.lpNorm<1>();
  const bool consistent = (rows * powers - right).norm() < 1e-6 * right[0];
  if (consistent && strength <= largest_strength) return {};
  return std::to_string(rows.rows() - 1) + " colour conditions in contact, but the materials lie " +
         "on one line of P against V (" + v_and_p_text(problem) + ")" +
         (consistent ? ": powers that meet them would add up to " + rounded(strength) +
                           " times the total (limit " + rounded(largest_strength) + ")"
                     : "") +
         "; take a material off that line";
}

Reason contact_reason(const SolveProblem& problem, const LeastSquaresAnswer& answer,
                      const std::vector<RequirementResult>& results) {
  const RequirementResult* focal_length = focal_length_target(results);
  if (focal_length == nullptr || !in_contact(problem, answer)) return {};
  for (std::size_t r = 0; r < results.size(); ++r) {
    if (Reason reason = one_v(problem, *focal_length, results[r], problem.asked()[r])) {
      return reason;
    }
  }
  return too_strong(problem, results);
}

}  // namespace

std::string requirement_text(const Requirement& requirement) {
  std::string text(to_string(requirement.quantity));
  if (requirement.between) {
    text +=
        " (" + requirement.between->first.name() + ", " + requirement.between->second.name() + ")";
  }
  if (requirement.element > 0) text += " of element " + std::to_string(requirement.element);
  return text;
}

std::optional<std::string> algebraic_reason(SolveProblem& problem, const LeastSquaresAnswer& answer,
                                            const std::vector<RequirementResult>& results) {
  if (Reason reason = clash(problem, results)) return reason;
  if (Reason reason = untouched(problem, answer, results)) return reason;
  return contact_reason(problem, answer, results);
}

}  // namespace chromacore::detail
