#include "solve_problem.hpp"

#include <algorithm>
#include <chromacore/error.hpp>

namespace chromacore::detail {
namespace {

double focal_length_of(const Model& model, const Train& train) {
  const Reference<double> reference = reference_of(model, layout_of(train));
  if (!has_power(reference)) throw_no_focus(model, 0.0);
  return reference.focal_length;
}

// The focal length that gives the variables their units.
double typical_focal_length(const std::vector<Requirement>& required, double at_start) {
  for (const Requirement& requirement : required) {
    const bool asked = requirement.quantity == Quantity::focal_length && requirement.target;
    if (asked && *requirement.target != 0.0) return *requirement.target;
  }
  return at_start;
}

Layout<Jet> jets_of(const Layout<double>& layout) {
  Layout<Jet> jets;
  for (const ElementLayout<double>& e : layout) {
    jets.push_back({Jet(e.power), Jet(e.front), Jet(e.back), Jet(e.thickness), Jet(e.gap_after)});
  }
  return jets;
}

}  // namespace

SolveProblem::SolveProblem(const Train& train, const std::vector<Vary>& may_vary,
                           const std::vector<Requirement>& required)
    : train_(train),
      may_vary_(may_vary),
      required_(required),
      model_(train, lines_of(train, required)),
      start_focal_length_mm_(focal_length_of(model_, train)),
      variables_(train, model_, may_vary, typical_focal_length(required, start_focal_length_mm_)),
      layout_(jets_of(layout_of(train))),
      values_(may_vary.size()),
      evaluator_(model_) {
  for (const Requirement& requirement : required) {
    asked_.push_back(look_up(model_, train, requirement));
  }
  update_budgets(variables_.start());
}

// Calls `store(requirement, first variable, count, value)`, with derivatives by the scaled
// variables from the first on.
template <class Store>
bool SolveProblem::for_each_value(const Eigen::VectorXd& x, Store&& store) {
  const Eigen::Index variables = x.size();
  for (Eigen::Index i = 0; i < variables; ++i) {
    values_[static_cast<std::size_t>(i)] = Jet(x[i] * variables_.unit(static_cast<std::size_t>(i)));
  }
  for (Eigen::Index first = 0; first == 0 || first < variables; first += kJetWidth) {
    const Eigen::Index count = std::min<Eigen::Index>(kJetWidth, variables - first);
    const auto seed = [&](double on) {
      for (Eigen::Index k = 0; k < count; ++k) {
        const auto i = static_cast<std::size_t>(first + k);
        values_[i].v[k] = on * variables_.unit(i);
      }
    };
    seed(1.0);
    if (!variables_.write(std::span<const Jet>(values_), layout_)) return false;
    seed(0.0);
    evaluator_.at(layout_);
    for (std::size_t r = 0; r < asked_.size(); ++r) {
      store(r, first, count, evaluator_.value(asked_[r]));
    }
  }
  return true;
}

Jet SolveProblem::residual_of(std::size_t r, const Jet& value) const {
  const Requirement& requirement = required_[r];
  if (!only_power_) return residual(requirement, budgets_[r], value);
  if (requirement.quantity != Quantity::focal_length || !requirement.target) return Jet(0.0);
  return (1.0 - *requirement.target / value) * (*requirement.target / budgets_[r]);
}

bool SolveProblem::evaluate(const Eigen::VectorXd& x, Linearization& at) try {
  const auto rows = static_cast<Eigen::Index>(asked_.size());
  at.residuals.resize(rows);
  at.jacobian.resize(rows, x.size());
  const bool exists = for_each_value(
      x, [&](std::size_t r, Eigen::Index first, Eigen::Index count, const Jet& value) {
        const Jet residual = residual_of(r, value);
        const auto row = static_cast<Eigen::Index>(r);
        at.residuals[row] = residual.a;
        for (Eigen::Index k = 0; k < count; ++k) at.jacobian(row, first + k) = residual.v[k];
      });
  return exists && at.residuals.allFinite() && at.jacobian.allFinite();
} catch (const Error& error) {
  if (error.code() != ErrorCode::degenerate) throw;
  return false;
}

void SolveProblem::evaluate_values(const Eigen::VectorXd& x, Linearization& at) {
  const auto rows = static_cast<Eigen::Index>(asked_.size());
  at.residuals.resize(rows);
  at.jacobian.resize(rows, x.size());
  const bool exists = for_each_value(
      x, [&](std::size_t r, Eigen::Index first, Eigen::Index count, const Jet& value) {
        const auto row = static_cast<Eigen::Index>(r);
        at.residuals[row] = value.a;
        for (Eigen::Index k = 0; k < count; ++k) {
          const double unit = variables_.unit(static_cast<std::size_t>(first + k));
          at.jacobian(row, first + k) = value.v[k] / unit;
        }
      });
  if (!exists) throw Error(ErrorCode::degenerate, "no element has that power and shape");
}

bool SolveProblem::update_budgets(const Eigen::VectorXd& x) {
  const Reference<double> reference = reference_of(model_, layout_at(x));
  const double f_number = 0.5 / std::abs(reference.marginal_behind.w);
  const std::vector<double> before = budgets_;
  budgets_.clear();
  for (const Requirement& requirement : required_) {
    budgets_.push_back(budget_of(requirement, train_, f_number));
  }
  return !std::equal(before.begin(), before.end(), budgets_.begin(), budgets_.end(),
                     [](double a, double b) { return std::abs(a - b) <= 1e-12 * b; });
}

Layout<double> SolveProblem::layout_at(const Eigen::VectorXd& x) const {
  std::vector<double> values;
  for (std::size_t i = 0; i < variables_.size(); ++i) {
    values.push_back(x[static_cast<Eigen::Index>(i)] * variables_.unit(i));
  }
  Layout<double> layout = layout_of(train_);
  if (!variables_.write(std::span<const double>(values), layout)) {
    throw Error(ErrorCode::degenerate, "no element has that power and shape");
  }
  return layout;
}

Train SolveProblem::train_at(const Eigen::VectorXd& x) const {
  return with_layout(train_, layout_at(x));
}

}  // namespace chromacore::detail
