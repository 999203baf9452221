#pragma once
// The account of a train that a person reads: where its colour comes from, what is left over the
// band, and what to try next.
#include <chromacore/chromacore.hpp>
#include <string>

#include "table.hpp"

namespace chromacore::cli {

// What is left over the band against the default budgets: a quarter wave on axis, the pixel or
// else the Airy radius at the edge of the field.
struct LeftOver {
  RequirementResult axial = {};            // shortest against longest
  RequirementResult secondary_axial = {};  // reference against their mean
  RequirementResult lateral = {};
  RequirementResult secondary_lateral = {};
  [[nodiscard]] double axial_budget() const { return *axial.requirement.budget; }
  [[nodiscard]] double lateral_budget() const { return *lateral.requirement.budget; }
};
[[nodiscard]] LeftOver left_over(const Train& train);

[[nodiscard]] std::string heading_text(const Train& train, const Paint& paint);
[[nodiscard]] std::string first_order_text(const Analysis& analysis, const Paint& paint);
[[nodiscard]] std::string elements_text(const Train& train, const Analysis& analysis,
                                        const Catalog& catalog, const Paint& paint);
[[nodiscard]] std::string left_over_text(const Train& train, const LeftOver& left,
                                         const Paint& paint);
[[nodiscard]] std::string curves_text(const Analysis& analysis, const LeftOver& left,
                                      const Paint& paint);
[[nodiscard]] std::string requirements_text(const Analysis& analysis, const Paint& paint);
[[nodiscard]] std::string notes_text(const Train& train, const Analysis& analysis,
                                     const Paint& paint);

// "focal_length_mm", "axial_color_mm F - C", "axial_sum_mm of element 2".
[[nodiscard]] std::string name_of(const Requirement& requirement);
// "500 +- 0.5", "at most 0.02".
[[nodiscard]] std::string wish_of(const Requirement& requirement);
// "+- 0.5000", and the value with the decimals that show a thousandth of that.
[[nodiscard]] std::string budget_of(const RequirementResult& result);
[[nodiscard]] std::string value_of(const RequirementResult& result);

// One line: "Next: ...".
[[nodiscard]] std::string advice(const std::string& path, const TrainFile& file,
                                 const Analysis& analysis, const LeftOver& left);
[[nodiscard]] std::string advice_after_solve(const Solution& solution, const LeftOver& left);

}  // namespace chromacore::cli
