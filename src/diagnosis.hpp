#pragma once
// What became of a solve, in an engineer's words.
#include <chromacore/solve.hpp>
#include <string>

#include "least_squares.hpp"
#include "solve_problem.hpp"

namespace chromacore::detail {

// Every requirement within its budget: after how many steps, which one comes nearest to its budget,
// which bounds were met on the way.
[[nodiscard]] std::string why_met(const SolveProblem& problem, const LeastSquaresAnswer& answer,
                                  const Analysis& analysis);

// The requirement that blocks, and what would free it, tried out by solving again: without the
// bounds that hold, with one more parameter; else more elements, materials, budget.
[[nodiscard]] std::string why_compromise(const SolveProblem& problem,
                                         const LeastSquaresAnswer& answer,
                                         const Analysis& analysis);

// `reason`: "max_iterations 200 was reached".
[[nodiscard]] std::string why_stopped(const std::string& reason, const SolveProblem& problem,
                                      const Analysis& analysis);

}  // namespace chromacore::detail
