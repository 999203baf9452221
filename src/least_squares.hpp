#pragma once
// Bounded nonlinear least squares for small dense problems: Levenberg-Marquardt, each step the
// exact minimum of its damped linear problem between the bounds, corrected to second order where it
// bends.
//
// Source: J. J. More, The Levenberg-Marquardt algorithm, Lecture Notes in Mathematics 630 (1978);
// the rule for the damping: H. B. Nielsen, report IMM-REP-1999-05 (1999).
#include <Eigen/Core>
#include <functional>
#include <vector>

#include "bounded_step.hpp"

namespace chromacore::detail {

struct LeastSquares {
  // Variables scaled so that 1 is a large change. Both are between the bounds.
  Eigen::VectorXd start;
  Eigen::VectorXd home;  // of several minima, that nearest to it
  Eigen::VectorXd lower;
  Eigen::VectorXd upper;
  // Residuals and their Jacobian at x; false where there are none. Sizes stay the same.
  std::function<bool(const Eigen::VectorXd& x, Linearization& at)> evaluate;
  int max_iterations = 200;
  double function_tolerance = 1e-14;  // see SolveOptions
  // Once an iteration, with its number and the cost; false stops.
  std::function<bool(int iteration, double cost)> carry_on;
};

enum class Ending { minimum, max_iterations, by_hand, no_start };

struct LeastSquaresAnswer {
  Ending ending = Ending::no_start;
  Eigen::VectorXd x;
  Linearization at;  // residuals and Jacobian at x
  double cost = 0;   // half the sum of squared residuals
  int iterations = 0;
  std::vector<Held> held;  // which variables stand at a bound
};

// The minimum that the start leads to; where several x reach it, that nearest to home.
[[nodiscard]] LeastSquaresAnswer minimize(const LeastSquares& problem);

}  // namespace chromacore::detail
