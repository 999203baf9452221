// The last line of an account: what to try next.
#include <fmt/format.h>

#include <algorithm>
#include <cmath>

#include "account.hpp"

namespace chromacore::cli {
namespace {

int over_count(const Analysis& analysis) {
  return static_cast<int>(std::count_if(analysis.requirements.begin(), analysis.requirements.end(),
                                        [](const auto& result) { return !result.met(); }));
}

// The element with the largest of one of the sums.
int strongest(const Analysis& analysis, Length ElementColor::*sum) {
  int element = 1;
  double most = 0;
  for (const ElementColor& row : analysis.elements) {
    const double size = std::abs(in_mm(row.*sum));
    if (size > most * (1 + 1e-9)) {
      most = size;
      element = row.element;
    }
  }
  return element;
}

std::string for_requirements(const std::string& path, const TrainFile& file, int over) {
  const char* verb = over == 1 ? "requirement is" : "requirements are";
  if (file.may_vary.empty()) {
    return fmt::format(
        "{} {} over budget and nothing may vary: paste a [[vary]] block from "
        "chromacore solve --help, then chromacore solve {}",
        over, verb, path);
  }
  return fmt::format("{} {} over budget: chromacore solve {} --out solved.toml", over, verb, path);
}

// What the band still shows when every requirement is met.
std::string for_color(const Analysis& analysis, const LeftOver& left) {
  if (!left.axial.met()) {
    return fmt::format(
        "the ends of the band do not share a focus, and element {} makes most of "
        "it: require axial_color_mm and let powers or curvatures vary",
        strongest(analysis, &ElementColor::axial_sum));
  }
  if (!left.lateral.met()) {
    return fmt::format(
        "the image is larger at one end of the band, and element {} makes most of "
        "it: require lateral_color_mm and let gaps or powers on both sides of the "
        "stop vary",
        strongest(analysis, &ElementColor::lateral_sum));
  }
  if (!left.secondary_axial.met()) {
    return "the ends share a focus and the middle of the band does not: a third material (solve "
           "--start apochromat), or two of nearer P (chromacore materials --sort p)";
  }
  return "the ends have one height and the middle of the band does not: materials of nearer P "
         "where "
         "most lateral colour is made";
}

bool nothing_over(const LeftOver& left) {
  return left.axial.met() && left.secondary_axial.met() && left.lateral.met() &&
         left.secondary_lateral.met();
}

}  // namespace

std::string advice_after_solve(const Solution& solution, const LeftOver& left) {
  if (solution.status != SolveStatus::met) {
    return "Next: free what the line at the top names, or give that [[require]] a wider budget\n";
  }
  if (!nothing_over(left)) return "Next: " + for_color(solution.analysis, left) + '\n';
  return "Next: nothing more for colour: every default budget is kept as well\n";
}

std::string advice(const std::string& path, const TrainFile& file, const Analysis& analysis,
                   const LeftOver& left) {
  const int over = over_count(analysis);
  std::string next;
  if (over > 0) {
    next = for_requirements(path, file, over);
  } else if (!nothing_over(left)) {
    next = for_color(analysis, left);
  } else if (file.required.empty()) {
    next =
        "nothing is over the default budgets; [[require]] blocks in the file would hold it there";
  } else {
    next = "nothing: every requirement and every default budget is kept";
  }
  return "Next: " + next + '\n';
}

}  // namespace chromacore::cli
