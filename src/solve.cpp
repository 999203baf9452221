#include <algorithm>
#include <chromacore/error.hpp>
#include <chromacore/solve.hpp>
#include <chrono>
#include <cmath>

#include "diagnosis.hpp"
#include "infeasible.hpp"
#include "least_squares.hpp"
#include "solve_problem.hpp"
#include "text.hpp"

namespace chromacore {
namespace detail {
namespace {

// Default budgets follow the f-number of the answer; they settle in two or three rounds.
constexpr int most_budget_rounds = 12;
constexpr int approach_iterations = 20;
constexpr double near_zero = 0.05;  // of a power, in units of 1/|f|

// One solve: the search, and who may stop it.
class Search {
 public:
  Search(SolveProblem& problem, const SolveOptions& options)
      : problem_(problem), options_(options), begun_(std::chrono::steady_clock::now()) {
    const Variables& variables = problem.variables();
    search_.start = search_.home = variables.start();
    search_.lower = variables.lower();
    search_.upper = variables.upper();
    search_.function_tolerance = options.function_tolerance;
    search_.evaluate = [this](const Eigen::VectorXd& x, Linearization& at) {
      return problem_.evaluate(x, at);
    };
    if (options.progress || std::isfinite(options.time_limit_s)) {
      search_.carry_on = [this](int iteration, double cost) { return carry_on(iteration, cost); };
    }
  }

  LeastSquaresAnswer run() {
    const bool approached = approach();
    LeastSquaresAnswer answer = descend();
    if (approached && !meets_all(answer) && answer.ending != Ending::by_hand) {
      search_.start = search_.home;
      LeastSquaresAnswer direct = descend();
      if (direct.cost < answer.cost) answer = std::move(direct);
    }
    rest_at_zero(answer);
    for (int round = 0; answer.ending == Ending::minimum && round < most_budget_rounds; ++round) {
      if (!problem_.update_budgets(answer.x)) break;
      search_.start = answer.x;
      answer = descend();
    }
    answer.iterations = iterations_;
    return answer;
  }

  [[nodiscard]] const std::string& stopped_by() const { return stopped_by_; }

 private:
  // A focal length of the wrong sign, or far off, is first brought near in power.
  bool approach() {
    if (!far_from_focal_length()) return false;
    problem_.count_only_power(true);
    search_.max_iterations = std::min(approach_iterations, options_.max_iterations);
    LeastSquaresAnswer answer = minimize(search_);
    problem_.count_only_power(false);
    iterations_ += answer.iterations;
    search_.start = std::move(answer.x);
    return true;
  }

  static bool meets_all(const LeastSquaresAnswer& answer) {
    return answer.ending == Ending::minimum && answer.at.residuals.cwiseAbs().maxCoeff() <= 1.0;
  }

  [[nodiscard]] bool far_from_focal_length() const {
    for (const Requirement& requirement : problem_.required()) {
      if (requirement.quantity != Quantity::focal_length || !requirement.target) continue;
      const double ratio = problem_.start_focal_length_mm() / *requirement.target;
      if (!(ratio > 0.5 && ratio < 2.0)) return true;
    }
    return false;
  }

  // The sum of |power| in a strength has a kink where a power is 0, and steps end short of the
  // bottom there: such a power is set to 0 where that lowers the cost.
  void rest_at_zero(LeastSquaresAnswer& answer) {
    if (answer.ending != Ending::minimum || !strength_pulls(answer)) return;
    const LeastSquares free = search_;
    for (Eigen::Index i = 0; i < answer.x.size(); ++i) {
      const Vary& vary = problem_.may_vary()[static_cast<std::size_t>(i)];
      const bool inside = free.lower[i] < 0.0 && free.upper[i] > 0.0;
      if (vary.parameter != Parameter::power || !inside || std::abs(answer.x[i]) > near_zero) {
        continue;
      }
      search_.start = answer.x;
      search_.start[i] = search_.lower[i] = search_.upper[i] = 0.0;
      LeastSquaresAnswer rested = descend();
      if (rested.ending == Ending::minimum && rested.cost < answer.cost) {
        answer = std::move(rested);
      } else {
        search_.lower[i] = free.lower[i];
        search_.upper[i] = free.upper[i];
      }
    }
    for (Eigen::Index i = 0; i < answer.x.size(); ++i) {
      const bool inside = free.lower[i] < 0.0 && free.upper[i] > 0.0;
      if (inside && answer.x[i] == 0.0) answer.held[static_cast<std::size_t>(i)] = Held::free;
    }
    search_.lower = free.lower;
    search_.upper = free.upper;
  }

  [[nodiscard]] bool strength_pulls(const LeastSquaresAnswer& answer) const {
    for (std::size_t r = 0; r < problem_.required().size(); ++r) {
      const bool pulls = answer.at.residuals[static_cast<Eigen::Index>(r)] != 0.0;
      if (pulls && problem_.required()[r].quantity == Quantity::strength) return true;
    }
    return false;
  }

  LeastSquaresAnswer descend() {
    search_.max_iterations = options_.max_iterations - iterations_;
    LeastSquaresAnswer answer = minimize(search_);
    iterations_ += answer.iterations;
    if (answer.ending == Ending::max_iterations) {
      stopped_by_ = "max_iterations, " + std::to_string(options_.max_iterations) + ", was reached";
    }
    return answer;
  }

  bool carry_on(int iteration, double cost) {
    const std::chrono::duration<double> taken = std::chrono::steady_clock::now() - begun_;
    if (taken.count() > options_.time_limit_s) {
      stopped_by_ = "time_limit_s, " + number_text(options_.time_limit_s) + ", was reached";
      return false;
    }
    if (options_.progress && !options_.progress({iterations_ + iteration, cost})) {
      stopped_by_ = "the progress callback stopped it";
      return false;
    }
    return true;
  }

  SolveProblem& problem_;
  const SolveOptions& options_;
  LeastSquares search_;
  std::chrono::steady_clock::time_point begun_;
  int iterations_ = 0;
  std::string stopped_by_;
};

void check_asked(const Train& train, const std::vector<Vary>& may_vary,
                 const std::vector<Requirement>& required) {
  check(train);
  for (const Requirement& requirement : required) check(requirement, train);
  if (may_vary.empty()) {
    const bool thick = std::holds_alternative<Thick>(train.elements.front());
    throw Error(ErrorCode::not_set,
                std::string("nothing to vary; name at least one parameter, such as ") +
                    (thick ? "curvature_back_per_mm" : "power_per_mm") + " of element 1");
  }
  if (required.empty()) {
    throw Error(ErrorCode::not_set,
                "nothing is required; name at least one requirement, such as focal_length_mm");
  }
}

double cost_of(const Analysis& analysis) {
  double sum = 0;
  for (const RequirementResult& result : analysis.requirements) {
    sum += 0.5 * result.residual * result.residual;
  }
  return sum;
}

// The train and all that belongs to it.
void set_train(Solution& solution, Train train, const std::vector<Requirement>& required) {
  solution.train = std::move(train);
  solution.analysis = analyze(solution.train, required);
  solution.cost = cost_of(solution.analysis);
}

void set_varied(Solution& solution, const SolveProblem& problem, const Eigen::VectorXd& x) {
  const Variables& variables = problem.variables();
  for (std::size_t i = 0; i < variables.size(); ++i) {
    const auto k = static_cast<Eigen::Index>(i);
    const bool at_bound = x[k] <= variables.lower()[k] || x[k] >= variables.upper()[k];
    solution.varied.push_back({problem.may_vary()[i], x[k] * variables.unit(i), at_bound});
  }
}

bool all_met(const Analysis& analysis) {
  for (const RequirementResult& result : analysis.requirements) {
    if (!result.met()) return false;
  }
  return true;
}

// Where the start itself cannot be traced, this says why.
[[noreturn]] void throw_bad_start(const SolveProblem& problem,
                                  const std::vector<Requirement>& required) {
  (void)analyze(problem.train_at(problem.variables().start()), required);
  throw Error(ErrorCode::degenerate, "a requirement has no finite value at the start");
}

Solution judge(SolveProblem& problem, const LeastSquaresAnswer& answer, const Search& search) {
  const std::vector<Requirement>& required = problem.required();
  Solution solution;
  solution.iterations = answer.iterations;
  set_train(solution, problem.train_at(answer.x), required);
  if (answer.ending != Ending::minimum) {
    solution.status = SolveStatus::stopped;
    solution.why = why_stopped(search.stopped_by(), problem, solution.analysis);
  } else if (all_met(solution.analysis)) {
    solution.status = SolveStatus::met;
    solution.why = why_met(problem, answer, solution.analysis);
  } else if (auto reason = algebraic_reason(problem, answer, solution.analysis.requirements)) {
    solution.status = SolveStatus::infeasible;
    solution.why = std::move(*reason);
    set_train(solution, problem.train(), required);
    set_varied(solution, problem, problem.variables().start());
    return solution;
  } else {
    solution.status = SolveStatus::compromise;
    solution.why = why_compromise(problem, answer, solution.analysis);
  }
  set_varied(solution, problem, answer.x);
  return solution;
}

}  // namespace
}  // namespace detail

Solution solve(const Train& train, const std::vector<Vary>& may_vary,
               const std::vector<Requirement>& required, const SolveOptions& options) {
  detail::check_asked(train, may_vary, required);
  detail::SolveProblem problem(train, may_vary, required);
  detail::Search search(problem, options);
  const detail::LeastSquaresAnswer answer = search.run();
  if (answer.ending == detail::Ending::no_start) detail::throw_bad_start(problem, required);
  return detail::judge(problem, answer, search);
}

Derivatives derivatives(const Train& train, const std::vector<Vary>& may_vary,
                        const std::vector<Requirement>& required) {
  detail::check_asked(train, may_vary, required);
  detail::SolveProblem problem(train, may_vary, required);
  detail::Linearization at;
  problem.evaluate_values(problem.variables().start(), at);
  Derivatives result{required.size(), may_vary.size()};
  for (Eigen::Index r = 0; r < at.jacobian.rows(); ++r) {
    for (Eigen::Index i = 0; i < at.jacobian.cols(); ++i) {
      result.values.push_back(at.jacobian(r, i));
    }
  }
  return result;
}

}  // namespace chromacore
