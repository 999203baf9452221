#pragma once
// Why no train of this kind can meet its requirements: reasons that algebra gives, not a search.
#include <chromacore/color.hpp>
#include <optional>
#include <string>
#include <vector>

#include "least_squares.hpp"
#include "solve_problem.hpp"

namespace chromacore::detail {

// "axial_color_mm (F, C)", "axial_sum_mm of element 2".
[[nodiscard]] std::string requirement_text(const Requirement& requirement);

// For an answer that does not meet everything; nothing where algebra has no objection. Looks for
//   - two requirements on one value whose ranges, budgets included, do not overlap;
//   - a requirement that is not met and that no variable acts on;
//   - thin elements in contact, object at infinity, where the power at each wavelength is linear in
//     the powers: one V for all where colour is asked for, or conditions that only powers beyond
//     1000 times the total could satisfy (materials that are the same, or collinear in P against
//     V).
[[nodiscard]] std::optional<std::string> algebraic_reason(
    SolveProblem& problem, const LeastSquaresAnswer& answer,
    const std::vector<RequirementResult>& results);

}  // namespace chromacore::detail
