#pragma once
// A solve as numbers: residuals in budgets and their exact derivatives, from the one trace on Jets.
#include <ceres/jet.h>

#include <chromacore/solve.hpp>
#include <vector>

#include "evaluate.hpp"
#include "least_squares.hpp"
#include "solve_variables.hpp"

namespace chromacore::detail {

// Derivatives are taken four at a time: wider numbers cost more than they save for few variables.
inline constexpr int kJetWidth = 4;
using Jet = ceres::Jet<double, kJetWidth>;

class SolveProblem {
 public:
  // Throws Error as `solve` does.
  SolveProblem(const Train& train, const std::vector<Vary>& may_vary,
               const std::vector<Requirement>& required);
  SolveProblem(const SolveProblem&) = delete;
  SolveProblem& operator=(const SolveProblem&) = delete;

  [[nodiscard]] const Train& train() const { return train_; }
  [[nodiscard]] const Model& model() const { return model_; }
  [[nodiscard]] const std::vector<Vary>& may_vary() const { return may_vary_; }
  [[nodiscard]] const std::vector<Requirement>& required() const { return required_; }
  [[nodiscard]] const Variables& variables() const { return variables_; }
  // Before the start is brought within the bounds.
  [[nodiscard]] double start_focal_length_mm() const { return start_focal_length_mm_; }
  // The requirements with their lines looked up.
  [[nodiscard]] const std::vector<Asked>& asked() const { return asked_; }

  // Residuals and derivatives in budgets and scaled variables; false where the train has no focus
  // or pupil there.
  [[nodiscard]] bool evaluate(const Eigen::VectorXd& x, Linearization& at);

  // The same of the values themselves, in their own units.
  void evaluate_values(const Eigen::VectorXd& x, Linearization& at);

  // Takes the default budgets of the train at x, whose f-number they depend on. True where one of
  // them changed by more than rounding.
  bool update_budgets(const Eigen::VectorXd& x);

  // Counts nothing but the focal length, and that in power, (1/target - 1/f) target^2/budget: the
  // same near the target, but without a pole between f < 0 and f > 0.
  void count_only_power(bool on) { only_power_ = on; }

  [[nodiscard]] Layout<double> layout_at(const Eigen::VectorXd& x) const;
  [[nodiscard]] Train train_at(const Eigen::VectorXd& x) const;

 private:
  template <class Store>
  [[nodiscard]] bool for_each_value(const Eigen::VectorXd& x, Store&& store);
  [[nodiscard]] Jet residual_of(std::size_t r, const Jet& value) const;

  Train train_;
  std::vector<Vary> may_vary_;
  std::vector<Requirement> required_;
  Model model_;
  double start_focal_length_mm_ = 0;
  Variables variables_;
  std::vector<Asked> asked_;
  std::vector<double> budgets_;
  bool only_power_ = false;
  Layout<Jet> layout_;
  std::vector<Jet> values_;
  Evaluator<Jet> evaluator_;
};

}  // namespace chromacore::detail
