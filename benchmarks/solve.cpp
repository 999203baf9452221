// A thin three-element solve against ceres::Solve, and, through solve.py, against SciPy.
//   bench_solve            the ratio to ceres::Solve
//   bench_solve --problem  the problem as JSON, with our answer
//   bench_solve --time     seconds a solve
#include <ceres/ceres.h>

#include <array>
#include <chromacore/catalog.hpp>
#include <chromacore/solve.hpp>
#include <cmath>
#include <cstring>
#include <nlohmann/json.hpp>
#include <string>
#include <vector>

#include "pairs.hpp"

namespace {

using namespace chromacore;
using namespace chromacore::units;

// The apochromat of three thin elements in contact: focal length, F - C, and d against their mean,
// from three equal powers.
struct Problem {
  std::array<const char*, 3> glasses{"N-PK51", "N-KZFS4", "N-SF6"};
  std::array<double, 3> start{1.0 / 1500, 1.0 / 1500, 1.0 / 1500};
  double bound = 0.05;
  double target_mm = 500.0;
  double focal_budget_mm = 0.5;
  double color_budget_mm = 0.05;
  std::array<const char*, 3> lines{"F", "d", "C"};
  // What each colour is made of: so much of the focus at each line.
  std::array<std::array<double, 3>, 2> colors{{{1.0, 0.0, -1.0}, {-0.5, 1.0, -0.5}}};
};

struct Ours {
  Train train;
  std::vector<Vary> may_vary;
  std::vector<Requirement> required;

  explicit Ours(const Problem& p) {
    const Catalog catalog = Catalog::built_in();
    train.band = Band::of_lines({"F", "d", "C"}, "d");
    train.aperture = EntrancePupilDiameter{50.0 * mm};
    train.field = HalfAngle{1.0 * deg};
    const Length color_budget = p.color_budget_mm * mm;
    required = {require::focal_length(p.target_mm * mm, p.focal_budget_mm * mm),
                require::axial_color("F", "C", 0.0 * mm, color_budget),
                require::secondary_axial(0.0 * mm, color_budget)};
    for (std::size_t i = 0; i < 3; ++i) {
      train.elements.push_back(
          Thin{.material = catalog.at(p.glasses[i]), .power = p.start[i] * per_mm});
      may_vary.push_back(vary::power(static_cast<int>(i) + 1, -p.bound * per_mm, p.bound * per_mm));
    }
  }
  [[nodiscard]] Solution run() const { return solve(train, may_vary, required); }
};

// phi(lambda)/phi(ref) of the three glasses at a line; d is the reference.
using RelativePowers = std::array<double, 3>;

RelativePowers relative_powers(const Ours& ours, const Line& line) {
  RelativePowers at{};
  for (std::size_t i = 0; i < 3; ++i) {
    const Material& glass = std::get<Thin>(ours.train.elements[i]).material;
    at[i] = (index(glass, line.wavelength()) - 1) / (index(glass, Line("d").wavelength()) - 1);
  }
  return at;
}

template <class T>
T focus(const T* powers, const RelativePowers& at) {
  return T(1.0) / (powers[0] * at[0] + powers[1] * at[1] + powers[2] * at[2]);
}

// The same residuals, written for the judge.
struct Residuals {
  Problem problem;
  std::array<RelativePowers, 3> at;  // of each line

  template <class T>
  bool operator()(const T* powers, T* residual) const {
    const RelativePowers reference{1.0, 1.0, 1.0};
    residual[0] = (focus(powers, reference) - problem.target_mm) / problem.focal_budget_mm;
    const std::array<T, 3> foci{focus(powers, at[0]), focus(powers, at[1]), focus(powers, at[2])};
    for (std::size_t i = 0; i < problem.colors.size(); ++i) {
      const auto& of = problem.colors[i];
      residual[i + 1] =
          (of[0] * foci[0] + of[1] * foci[1] + of[2] * foci[2]) / problem.color_budget_mm;
    }
    return true;
  }
};

Residuals residuals(const Problem& problem, const Ours& ours) {
  Residuals r{problem, {}};
  for (std::size_t i = 0; i < problem.lines.size(); ++i) {
    r.at[i] = relative_powers(ours, problem.lines[i]);
  }
  return r;
}

double judge(const Problem& problem, const Residuals& residuals) {
  std::array<double, 3> powers = problem.start;
  ceres::Problem judged;
  judged.AddResidualBlock(
      new ceres::AutoDiffCostFunction<Residuals, 3, 3>(new Residuals(residuals)), nullptr,
      powers.data());
  for (int i = 0; i < 3; ++i) {
    judged.SetParameterLowerBound(powers.data(), i, -problem.bound);
    judged.SetParameterUpperBound(powers.data(), i, problem.bound);
  }
  ceres::Solver::Options options;
  options.linear_solver_type = ceres::DENSE_QR;
  options.logging_type = ceres::SILENT;
  options.function_tolerance = 1e-12;
  ceres::Solver::Summary summary;
  ceres::Solve(options, &judged, &summary);
  return summary.final_cost;
}

int print_problem(const Problem& problem, const Ours& ours) {
  nlohmann::ordered_json json;
  json["start"] = problem.start;
  json["bound"] = problem.bound;
  json["target_mm"] = problem.target_mm;
  json["focal_budget_mm"] = problem.focal_budget_mm;
  json["color_budget_mm"] = problem.color_budget_mm;
  json["relative_powers"] = residuals(problem, ours).at;
  json["colors"] = problem.colors;
  json["cost"] = ours.run().cost;
  fmt::print("{}\n", json.dump());
  return 0;
}

int compare(const Problem& problem, const Ours& ours) {
  const Residuals same = residuals(problem, ours);
  const double cost = ours.run().cost;
  const double judged = judge(problem, same);
  if (!(std::abs(cost - judged) <= 1e-6)) {
    fmt::print("solve: cost {} is not that of ceres::Solve, {}\n", cost, judged);
    return 1;
  }
  const auto candidate = [&] { pairs::keep(ours.run().cost); };
  const bool pass = pairs::ratio(
      "solve, thin three elements: solve() / ceres::Solve", candidate,
      [&] { pairs::keep(judge(problem, same)); }, 1.0);
  fmt::print("solve: {:.1f} us\n", 1e6 * pairs::quickest(candidate));
  return pass ? 0 : 1;
}

}  // namespace

int main(int argc, char** argv) {
  const Problem problem;
  const Ours ours(problem);
  const std::string what = argc > 1 ? argv[1] : "";
  if (what == "--problem") return print_problem(problem, ours);
  if (what == "--time") {
    fmt::print("{}\n", pairs::quickest([&] { pairs::keep(ours.run().cost); }));
    return 0;
  }
  return compare(problem, ours);
}
