#pragma once
/// Least squares over a train: what may vary, what is required, and what became of it.
#include <chromacore/color.hpp>
#include <chromacore/train.hpp>
#include <limits>
#include <memory>
#include <string>
#include <string_view>
#include <type_traits>
#include <utility>
#include <vector>

namespace chromacore {

/// What may vary. The solver varies curvature, never radius. The unit is in the name that
/// `to_string` gives.
enum class Parameter { power, curvature_front, curvature_back, shape, thickness, gap_after };
/// As in files: "power_per_mm", "gap_after_mm", "shape".
[[nodiscard]] std::string_view to_string(Parameter parameter);
/// @throws Error  not_found, with the nearest
[[nodiscard]] Parameter parameter(std::string_view name);

/// One thing that may vary, between bounds in the parameter's own unit (1/mm, mm, none). Thickness
/// and gap are never below 0, nor is a gap shorter than the way to a stop that floats in it. The
/// two faces of a joint marked cemented move as one, whichever is named. The power of a thick
/// element varies at fixed shape, its shape at fixed power (of the whole element, at the
/// reference); neither goes with one of its curvatures or with a cemented face.
struct Vary {
  int element = 0;  ///< counted from 1
  Parameter parameter = Parameter::power;
  double min = -std::numeric_limits<double>::infinity();
  double max = std::numeric_limits<double>::infinity();
};

/// Parameters by name.
namespace vary {
[[nodiscard]] Vary power(int element);
[[nodiscard]] Vary power(int element, Power min, Power max);
[[nodiscard]] Vary front(int element);
[[nodiscard]] Vary front(int element, Curvature min, Curvature max);
[[nodiscard]] Vary back(int element);
[[nodiscard]] Vary back(int element, Curvature min, Curvature max);
/// Bending at fixed power: shape = (c1 + c2)/(c1 - c2).
[[nodiscard]] Vary shape(int element);
[[nodiscard]] Vary thickness(int element, Length min, Length max);
[[nodiscard]] Vary gap_after(int element);
[[nodiscard]] Vary gap_after(int element, Length min, Length max);
}  // namespace vary

enum class SolveStatus {
  met,         ///< at the minimum, every |residual| <= 1; the train holds the solution
  compromise,  ///< at the minimum, some |residual| > 1; the train holds the best found
  infeasible,  ///< an algebraic reason, which `why` names; the train is unchanged
  stopped,     ///< by time, count or hand; the train holds the best so far
};
[[nodiscard]] std::string_view to_string(SolveStatus status);

struct SolveProgress {
  int iteration = 0;
  double cost = 0;
};

/// A function of your own that is called once an iteration; false stops the solve. (std::function
/// in small: its header would take longer to compile than all of this one's others.)
class SolveCallback {
 public:
  SolveCallback() = default;  ///< none
  template <class F>
  requires std::is_invocable_r_v<bool, F&, const SolveProgress&> SolveCallback(
      F function)  // NOLINT: a lambda is a callback
      : function_(std::make_shared<F>(std::move(function))),
        call_([](void* f, const SolveProgress& progress) -> bool {
          return (*static_cast<F*>(f))(progress);
        }) {}
  [[nodiscard]] explicit operator bool() const { return call_ != nullptr; }
  bool operator()(const SolveProgress& progress) const { return call_(function_.get(), progress); }

 private:
  std::shared_ptr<void> function_;
  bool (*call_)(void*, const SolveProgress&) = nullptr;
};

struct SolveOptions {
  int max_iterations = 200;
  /// Stops when (cost before - cost after) < function_tolerance * cost before. Cost in budgets^2.
  double function_tolerance = 1e-14;
  double time_limit_s = std::numeric_limits<double>::infinity();
  /// Called once an iteration; false stops.
  SolveCallback progress = {};
};

struct Varied {
  Vary vary = {};
  double value = 0;
  bool at_bound = false;
};

struct Solution {
  SolveStatus status = SolveStatus::stopped;
  std::string why = {};  ///< in an engineer's words: what blocks, what would free it
  Train train = {};
  double cost = std::numeric_limits<double>::quiet_NaN();  ///< half the sum of squared residuals
  int iterations = 0;
  std::vector<Varied> varied = {};
  Analysis analysis = {};  ///< of `train`, the requirements in it
};

/// Minimises half the sum of squared residuals, in budgets, over the varied parameters. Where
/// several settings reach the minimum: the least scaled change from the start (powers and
/// curvatures in units of 1/|f|, lengths in units of |f|/10, f the focal length asked for, else
/// that at the start). A start outside the bounds is brought within them first. Default budgets are
/// those of the answer.
/// @throws Error  as `analyze`; not_set: nothing to vary, nothing required; bad_value: an element
/// or
///                a parameter that is not there, one parameter twice, min above max
[[nodiscard]] Solution solve(const Train& train, const std::vector<Vary>& may_vary,
                             const std::vector<Requirement>& required,
                             const SolveOptions& options = {});

/// d(requirement's value)/d(parameter), in the units of both; exact, by automatic differentiation
/// through the one trace.
struct Derivatives {
  std::size_t requirements = 0;
  std::size_t parameters = 0;
  std::vector<double> values = {};  ///< row by row
  [[nodiscard]] double at(std::size_t requirement, std::size_t parameter) const {
    return values.at(requirement * parameters + parameter);
  }
};
/// @throws Error  as `solve`
[[nodiscard]] Derivatives derivatives(const Train& train, const std::vector<Vary>& may_vary,
                                      const std::vector<Requirement>& required);

}  // namespace chromacore
