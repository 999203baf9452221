// Solves against two judges that know nothing of ours: SciPy's least squares on a model of its own
// (reference/solves.json, made by reference/solves.py), and ceres::Solve with bounds.
#include <ceres/ceres.h>
#include <doctest/doctest.h>

#include <algorithm>
#include <array>
#include <chromacore/catalog.hpp>
#include <chromacore/solve.hpp>
#include <chromacore/train_file.hpp>
#include <cmath>
#include <fstream>
#include <nlohmann/json.hpp>
#include <random>

#include "close.hpp"
#include "least_squares.hpp"
#include "solve_problem.hpp"

using namespace chromacore;
using namespace chromacore::test;
using namespace chromacore::units;

namespace {

const Catalog& catalog() {
  static const Catalog built_in = Catalog::built_in();
  return built_in;
}

const nlohmann::json& references() {
  static const nlohmann::json table =
      nlohmann::json::parse(std::ifstream(CHROMACORE_FOLDER "/tests/reference/solves.json"));
  return table.at("solves");
}

TrainFile file_of(const nlohmann::json& reference) {
  return parse_train(reference.at("toml").get<std::string>(), catalog());
}

// A problem in scaled variables, as Ceres wants it.
class Residuals final : public ceres::CostFunction {
 public:
  explicit Residuals(detail::SolveProblem& problem) : problem_(problem) {
    set_num_residuals(static_cast<int>(problem.required().size()));
    mutable_parameter_block_sizes()->push_back(static_cast<int>(problem.variables().size()));
  }

  bool Evaluate(double const* const* parameters, double* residuals,
                double** jacobians) const override {
    const auto size = static_cast<Eigen::Index>(problem_.variables().size());
    const Eigen::VectorXd x = Eigen::Map<const Eigen::VectorXd>(parameters[0], size);
    if (!problem_.evaluate(x, at_)) return false;
    Eigen::Map<Eigen::VectorXd>(residuals, at_.residuals.size()) = at_.residuals;
    if (jacobians == nullptr || jacobians[0] == nullptr) return true;
    using RowMajor = Eigen::Matrix<double, Eigen::Dynamic, Eigen::Dynamic, Eigen::RowMajor>;
    Eigen::Map<RowMajor>(jacobians[0], at_.jacobian.rows(), at_.jacobian.cols()) = at_.jacobian;
    return true;
  }

 private:
  detail::SolveProblem& problem_;
  mutable detail::Linearization at_;
};

struct Judged {
  double cost = 0;
  Eigen::VectorXd values;  // in the parameters' own units
};

Judged ceres_solve(const TrainFile& file) {
  detail::SolveProblem problem(file.train, file.may_vary, file.required);
  const detail::Variables& variables = problem.variables();
  Eigen::VectorXd x = variables.start();
  ceres::Problem judge;
  judge.AddResidualBlock(new Residuals(problem), nullptr, x.data());
  for (int i = 0; i < static_cast<int>(x.size()); ++i) {
    if (std::isfinite(variables.lower()[i])) {
      judge.SetParameterLowerBound(x.data(), i, variables.lower()[i]);
    }
    if (std::isfinite(variables.upper()[i])) {
      judge.SetParameterUpperBound(x.data(), i, variables.upper()[i]);
    }
  }
  ceres::Solver::Options options;
  options.max_num_iterations = 2000;
  options.function_tolerance = options.gradient_tolerance = options.parameter_tolerance = 1e-16;
  options.logging_type = ceres::SILENT;
  ceres::Solver::Summary summary;
  ceres::Solve(options, &judge, &summary);
  Judged judged{summary.final_cost, x};
  for (Eigen::Index i = 0; i < x.size(); ++i) {
    judged.values[i] *= variables.unit(static_cast<std::size_t>(i));
  }
  return judged;
}

double unit_of(const Vary& vary, double focal_length) {
  const bool length =
      vary.parameter == Parameter::thickness || vary.parameter == Parameter::gap_after;
  return length ? focal_length / 10 : 1 / focal_length;
}

}  // namespace

TEST_CASE("solve: what SciPy's bounded least squares finds") {
  for (const nlohmann::json& reference : references()) {
    const TrainFile file = file_of(reference);
    CAPTURE(file.train.name);
    const nlohmann::json& expect = reference.at("expect");
    const Solution solution = solve(file.train, file.may_vary, file.required);
    CHECK(to_string(solution.status) == expect.at("status").get<std::string>());
    // The reference's values are good to 1e-9 of their scale.
    CHECK(close(solution.cost, expect.at("cost").get<double>(), {.rel = 1e-8, .abs = 1e-12}));
    for (std::size_t i = 0; i < solution.varied.size(); ++i) {
      const nlohmann::json& varied = expect.at("varied").at(i);
      CAPTURE(i);
      const double f = in_mm(solution.analysis.focal_length);
      CHECK(close(solution.varied[i].value, varied.at("value").get<double>(),
                  {.rel = 1e-8, .abs = 1e-8 * unit_of(solution.varied[i].vary, std::abs(f))}));
      CHECK(solution.varied[i].at_bound == varied.at("at_bound").get<bool>());
    }
  }
}

TEST_CASE("solve: never above the cost that ceres::Solve reaches with bounds, else the same") {
  int same = 0;
  for (const nlohmann::json& reference : references()) {
    const TrainFile file = file_of(reference);
    CAPTURE(file.train.name);
    const Judged judged = ceres_solve(file);
    const Solution solution = solve(file.train, file.may_vary, file.required);
    CHECK(solution.cost <= judged.cost * (1 + 1e-8) + 1e-8);
    // Ceres projects its steps, and crawls along a bound until it gives up: it may end above.
    if (!close(judged.cost, solution.cost, {.rel = 1e-8, .abs = 1e-8})) continue;
    ++same;
    if (file.required.size() < file.may_vary.size()) continue;  // it goes to any of the minima
    for (std::size_t i = 0; i < solution.varied.size(); ++i) {
      const double f = std::abs(in_mm(solution.analysis.focal_length));
      CHECK(close(solution.varied[i].value, judged.values[static_cast<Eigen::Index>(i)],
                  {.rel = 1e-6, .abs = 1e-6 * unit_of(solution.varied[i].vary, f)}));
    }
  }
  CHECK(same >= 12);
}

TEST_CASE("solve: ceres::Solve finds nothing better from the answer on") {
  for (const nlohmann::json& reference : references()) {
    TrainFile file = file_of(reference);
    CAPTURE(file.train.name);
    const Solution solution = solve(file.train, file.may_vary, file.required);
    file.train = solution.train;
    CHECK(close(ceres_solve(file).cost, solution.cost, {.rel = 1e-8, .abs = 1e-8}));
  }
}

namespace {

// Residuals A x - b, with more or fewer rows than columns; in the unit box.
detail::LeastSquares linear_problem(std::mt19937_64& random, Eigen::MatrixXd& a,
                                    Eigen::VectorXd& b) {
  std::uniform_int_distribution<int> size(1, 9);
  std::normal_distribution<double> normal;
  const auto draw = [&] { return normal(random); };
  a = Eigen::MatrixXd::NullaryExpr(size(random), size(random), draw);
  b = 3 * Eigen::VectorXd::NullaryExpr(a.rows(), draw);
  detail::LeastSquares problem;
  problem.lower = Eigen::VectorXd::Constant(a.cols(), -1.0);
  problem.upper = Eigen::VectorXd::Constant(a.cols(), 1.0);
  problem.start = problem.home =
      0.5 * Eigen::VectorXd::NullaryExpr(a.cols(), draw).cwiseMax(-2.0).cwiseMin(2.0);
  problem.evaluate = [&](const Eigen::VectorXd& x, detail::Linearization& at) {
    at.residuals = a * x - b;
    at.jacobian = a;
    return true;
  };
  return problem;
}

// How far x is from satisfying the conditions of a bounded minimum with this gradient.
double violation(const Eigen::VectorXd& x, const Eigen::VectorXd& gradient,
                 const Eigen::VectorXd& lower, const Eigen::VectorXd& upper) {
  return (x - (x - gradient).cwiseMax(lower).cwiseMin(upper)).cwiseAbs().maxCoeff();
}

// Two to six thin elements with gaps, more or fewer requirements than variables, bounds on all.
TrainFile random_problem(std::mt19937_64& random) {
  std::uniform_real_distribution<double> unit(0, 1);
  const std::array names = {"N-BK7", "SCHOTT/F2", "N-SK16", "N-SF6", "N-KZFS4"};
  TrainFile file;
  file.train.band = Band::of_lines({"F", "d", "C"}, "d");
  file.train.aperture = EntrancePupilDiameter{20.0 * mm};
  file.train.field = HalfAngle{5.0 * deg};
  const int elements = 2 + static_cast<int>(5 * unit(random));
  for (int e = 1; e <= elements; ++e) {
    const char* name = names[static_cast<std::size_t>(5 * unit(random))];
    const double power = (2 * unit(random) - 0.8) * 0.015;
    file.train.elements.push_back(Thin{catalog().at(name), power * per_mm, 15 * unit(random) * mm});
    file.may_vary.push_back(vary::power(e, -0.03 * per_mm, 0.03 * per_mm));
    if (e == elements || unit(random) < 0.5) continue;
    file.may_vary.push_back(vary::gap_after(e, 0.5 * mm, 30.0 * mm));
  }
  file.required = {require::focal_length(100.0 * mm, 0.1 * mm),
                   require::axial_color("F", "C", 0.0 * mm, 0.02 * mm),
                   require::petzval_at_most(0.006 * per_mm, 1e-4 * per_mm)};
  if (unit(random) < 0.5) file.required.push_back(require::secondary_axial(0.0 * mm, 0.02 * mm));
  if (unit(random) < 0.5) {
    file.required.push_back(require::lateral_color("F", "C", 0.0 * mm, 0.005 * mm));
  }
  return file;
}

}  // namespace

TEST_CASE("least squares: random linear problems in a box end where the gradient allows no more") {
  std::mt19937_64 random(test_seed());
  CAPTURE(test_seed());
  for (int i = 0; i < 500; ++i) {
    CAPTURE(i);
    Eigen::MatrixXd a;
    Eigen::VectorXd b;
    const detail::LeastSquares problem = linear_problem(random, a, b);
    const detail::LeastSquaresAnswer answer = detail::minimize(problem);
    REQUIRE(answer.ending == detail::Ending::minimum);
    CHECK(violation(answer.x, a.transpose() * (a * answer.x - b), problem.lower, problem.upper) <
          1e-7);
  }
}

TEST_CASE("least squares: of all minima in a box, the nearest to home") {
  std::mt19937_64 random(test_seed() + 1);
  CAPTURE(test_seed());
  for (int i = 0; i < 500; ++i) {
    CAPTURE(i);
    Eigen::MatrixXd a;
    Eigen::VectorXd b;
    const detail::LeastSquares problem = linear_problem(random, a, b);
    const detail::LeastSquaresAnswer answer = detail::minimize(problem);
    // A weak pull towards home picks the same minimum, up to the strength of the pull.
    detail::LeastSquares pulled = problem;
    const double pull = 1e-4;
    pulled.evaluate = [&](const Eigen::VectorXd& x, detail::Linearization& at) {
      at.residuals.resize(a.rows() + a.cols());
      at.residuals << a * x - b, pull * (x - problem.home);
      at.jacobian.resize(a.rows() + a.cols(), a.cols());
      at.jacobian << a, pull * Eigen::MatrixXd::Identity(a.cols(), a.cols());
      return true;
    };
    const detail::LeastSquaresAnswer expected = detail::minimize(pulled);
    CHECK((answer.x - problem.home).norm() <= (expected.x - problem.home).norm() + 1e-3);
    CHECK((answer.x - expected.x).norm() < 1e-3);
  }
}

TEST_CASE("solve: random trains end where the exact gradient allows no more") {
  std::mt19937_64 random(test_seed() + 2);
  CAPTURE(test_seed());
  int stopped = 0;  // a crooked valley now and then takes more than 200 iterations
  for (int i = 0; i < 200; ++i) {
    CAPTURE(i);
    const TrainFile file = random_problem(random);
    const Solution solution = solve(file.train, file.may_vary, file.required);
    if (solution.status == SolveStatus::infeasible) continue;
    if (solution.status == SolveStatus::stopped) {
      ++stopped;
      continue;
    }
    detail::SolveProblem problem(solution.train, file.may_vary, file.required);
    const detail::Variables& variables = problem.variables();
    detail::Linearization at;
    REQUIRE(problem.evaluate(variables.start(), at));
    const Eigen::VectorXd gradient = at.jacobian.transpose() * at.residuals;
    CHECK(violation(variables.start(), gradient / at.jacobian.squaredNorm(), variables.lower(),
                    variables.upper()) < 1e-7);
  }
  CHECK(stopped <= 2);
}
