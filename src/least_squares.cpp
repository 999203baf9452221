#include "least_squares.hpp"

#include <Eigen/Eigenvalues>
#include <algorithm>
#include <cmath>

namespace chromacore::detail {
namespace {

constexpr double first_damping = 1e-9;  // of the largest squared column
constexpr double largest_damping = 1e16;
constexpr double good_gain = 1e-4;        // actual over predicted decrease that a step must bring
constexpr double poor_gain = 0.7;         // below it, a step is tried again along its curve
constexpr double rounding = 4e-16;        // of a cost, and of a variable
constexpr double zero_residual = 1e-10;   // in budgets
constexpr double slow_decrease = 0.1;     // of the cost in a step; after some of them in a row
constexpr int slow_steps = 6;             // the curvature of the residuals is taken in
constexpr double curvature_step = 1e-6;   // of a variable
constexpr double flat_curvature = 1e-13;  // of the largest
constexpr int nearest_rounds = 60;
constexpr double nearest_tolerance = 1e-13;

double half_square(const Eigen::VectorXd& residuals) { return 0.5 * residuals.squaredNorm(); }

class Minimizer {
 public:
  explicit Minimizer(const LeastSquares& problem) : problem_(problem) {}

  LeastSquaresAnswer run() {
    answer_.x = problem_.start;
    if (!problem_.evaluate(answer_.x, answer_.at)) return answer_;
    answer_.cost = half_square(answer_.at.residuals);
    answer_.ending = descend();
    if (answer_.ending == Ending::minimum) go_nearest();
    note_held();
    return answer_;
  }

 private:
  [[nodiscard]] double zero_cost() const {
    return zero_residual * zero_residual * static_cast<double>(answer_.at.residuals.size());
  }

  void set_room() {
    room_below_ = problem_.lower - answer_.x;
    room_above_ = problem_.upper - answer_.x;
  }

  void move(const Eigen::VectorXd& p) {
    trial_x_ = (answer_.x + p).cwiseMax(problem_.lower).cwiseMin(problem_.upper);
  }

  void accept(double cost) {
    answer_.x.swap(trial_x_);
    std::swap(answer_.at, trial_);
    answer_.cost = cost;
  }

  Ending descend() {
    const auto& jacobian = answer_.at.jacobian;
    const double largest = jacobian.size() > 0 ? jacobian.colwise().squaredNorm().maxCoeff() : 0;
    scale_ = std::max(largest, 1e-300);
    damping_ = first_damping;
    growth_ = 2.0;
    while (answer_.cost > zero_cost()) {
      if (answer_.iterations >= problem_.max_iterations) return Ending::max_iterations;
      ++answer_.iterations;
      if (problem_.carry_on && !problem_.carry_on(answer_.iterations, answer_.cost)) {
        return Ending::by_hand;
      }
      if (!improve()) break;
    }
    return Ending::minimum;
  }

  // One step downwards, with as much damping as it takes. False where there is none, or no more
  // that counts.
  bool improve() {
    set_room();
    const bool curved = slow_ >= slow_steps && take_curvature();
    const Linearization& model = curved ? curved_ : answer_.at;
    for (; damping_ < largest_damping; damping_ *= growth_, growth_ *= 2.0) {
      const Eigen::VectorXd& p = step_.damped(model, damping_ * scale_, room_below_, room_above_);
      linear_ = model.residuals;
      linear_.noalias() += model.jacobian * p;
      const double predicted = half_square(model.residuals) - half_square(linear_);
      const bool resolved = p.norm() > rounding * (1.0 + answer_.x.norm());
      if (!(predicted > rounding * answer_.cost) || !resolved) return false;
      move(p);
      if (!problem_.evaluate(trial_x_, trial_)) continue;
      const double straight = answer_.cost - half_square(trial_.residuals);
      if (straight < poor_gain * predicted) {
        if (curved)
          slow_ = -1;
        else
          correct();
      }
      const double decrease = answer_.cost - half_square(trial_.residuals);
      if (decrease > good_gain * predicted) return take_step(decrease, decrease / predicted);
    }
    return false;
  }

  // In a curved valley the straight step climbs its wall. What the trial's residuals are beside the
  // linear ones is the curvature along the step: the same step with it taken in.
  void correct() {
    bent_.residuals = answer_.at.residuals + (trial_.residuals - linear_);
    bent_.jacobian = answer_.at.jacobian;
    const double straight = half_square(trial_.residuals);
    const Eigen::VectorXd straight_x = trial_x_;
    std::swap(straight_, trial_);
    move(step_.damped(bent_, damping_ * scale_, room_below_, room_above_));
    if (problem_.evaluate(trial_x_, trial_) && half_square(trial_.residuals) < straight) return;
    trial_x_ = straight_x;
    std::swap(straight_, trial_);
  }

  bool take_step(double decrease, double gain) {
    const bool counts = decrease >= problem_.function_tolerance * answer_.cost;
    slow_ = decrease < slow_decrease * answer_.cost ? slow_ + 1 : 0;
    accept(half_square(trial_.residuals));
    damping_ = std::max(1e-16, damping_ * std::max(0.1, 1.0 - std::pow(2.0 * gain - 1.0, 3)));
    growth_ = 2.0;
    return counts;
  }

  // Where large residuals remain, J^T J misses the curvature of the residuals themselves, and steps
  // grow short. The whole second derivative of the cost, as the residuals and Jacobian of a linear
  // problem with the same gradient; directions that curve down count as curving up.
  bool take_curvature() {
    const Eigen::VectorXd gradient = answer_.at.jacobian.transpose() * answer_.at.residuals;
    Eigen::MatrixXd hessian(gradient.size(), gradient.size());
    if (!second_derivatives(gradient, hessian)) return false;
    const Eigen::SelfAdjointEigenSolver<Eigen::MatrixXd> eigen(0.5 *
                                                               (hessian + hessian.transpose()));
    const Eigen::VectorXd sizes = eigen.eigenvalues().cwiseAbs();
    const double least = flat_curvature * sizes.maxCoeff();
    if (!(least > 0.0) || !std::isfinite(least)) return false;
    const Eigen::VectorXd roots = sizes.cwiseMax(least).cwiseSqrt();
    curved_.jacobian = roots.asDiagonal() * eigen.eigenvectors().transpose();
    curved_.residuals =
        roots.cwiseInverse().asDiagonal() * (eigen.eigenvectors().transpose() * gradient);
    return true;
  }

  // Central differences of the exact gradient. Variables that a bound holds stay out of it.
  bool second_derivatives(const Eigen::VectorXd& gradient, Eigen::MatrixXd& hessian) {
    for (Eigen::Index i = 0; i < gradient.size(); ++i) {
      const double up = std::min(curvature_step, room_above_[i]);
      const double down = std::max(-curvature_step, room_below_[i]);
      hessian.col(i).setZero();
      if (held_outward(gradient, i)) continue;
      for (const double step : {up, down}) {
        trial_x_ = answer_.x;
        trial_x_[i] += step;
        if (!problem_.evaluate(trial_x_, trial_)) return false;
        const double weight = (step == up ? 1.0 : -1.0) / (up - down);
        hessian.col(i) += weight * (trial_.jacobian.transpose() * trial_.residuals);
      }
    }
    for (Eigen::Index i = 0; i < gradient.size(); ++i) {
      if (!held_outward(gradient, i)) continue;
      hessian.row(i).setZero();
      hessian(i, i) = scale_;
    }
    return true;
  }

  [[nodiscard]] bool held_outward(const Eigen::VectorXd& gradient, Eigen::Index i) const {
    return (room_below_[i] >= 0.0 && gradient[i] >= 0.0) ||
           (room_above_[i] <= 0.0 && gradient[i] <= 0.0);
  }

  // Slides along the minimum towards home. Kept only where it arrives and costs nothing.
  void go_nearest() {
    const LeastSquaresAnswer before = answer_;
    const double allowed = before.cost * (1.0 + 1e-9) + zero_cost();
    for (int round = 0; round < nearest_rounds; ++round) {
      set_room();
      const Eigen::VectorXd p =
          step_.nearest(answer_.at, answer_.x - problem_.home, room_below_, room_above_);
      if (round == 0 && step_.rank() == step_.free()) return;  // nothing is left to choose
      const bool arrived = p.norm() <= nearest_tolerance * (1.0 + answer_.x.norm());
      move(p);
      if (!problem_.evaluate(trial_x_, trial_)) break;
      accept(half_square(trial_.residuals));
      if (arrived && answer_.cost <= allowed) return;
    }
    answer_ = before;
  }

  void note_held() {
    set_room();
    answer_.held.assign(static_cast<std::size_t>(answer_.x.size()), Held::free);
    for (Eigen::Index i = 0; i < answer_.x.size(); ++i) {
      if (room_below_[i] >= 0.0) answer_.held[static_cast<std::size_t>(i)] = Held::lower;
      if (room_above_[i] <= 0.0) answer_.held[static_cast<std::size_t>(i)] = Held::upper;
    }
  }

  const LeastSquares& problem_;
  LeastSquaresAnswer answer_;
  BoundedStep step_;
  Linearization trial_;
  Linearization straight_;
  Linearization bent_;
  Linearization curved_;
  int slow_ = 0;  // steps in a row that brought little
  Eigen::VectorXd trial_x_, room_below_, room_above_, linear_;
  double scale_ = 1.0;    // of the damping: the largest squared column at the start
  double damping_ = 0.0;  // relative to `scale_`
  double growth_ = 2.0;
};

}  // namespace

LeastSquaresAnswer minimize(const LeastSquares& problem) { return Minimizer(problem).run(); }

}  // namespace chromacore::detail
