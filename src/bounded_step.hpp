#pragma once
// The linear problem inside each step of the least squares: minimise |J p + r| between bounds.
#include <Eigen/QR>
#include <vector>

namespace chromacore::detail {

// What a step starts from: residuals and their derivatives, a column for each variable.
struct Linearization {
  Eigen::VectorXd residuals;
  Eigen::MatrixXd jacobian;
};

// Which bound a variable is held at.
enum class Held : signed char { lower = -1, free = 0, upper = 1 };

// A primal active set over the bounds; each free problem by an orthogonal factorisation of J
// itself, never of J^T J.
class BoundedStep {
 public:
  // Least |J p + r|^2 + damping |p|^2, lower <= p <= upper; damping > 0, 0 between the bounds.
  const Eigen::VectorXd& damped(const Linearization& at, double damping,
                                const Eigen::VectorXd& lower, const Eigen::VectorXd& upper);

  // Of all p with the least |J p + r| between the bounds that with the least |p + from|.
  const Eigen::VectorXd& nearest(const Linearization& at, const Eigen::VectorXd& from,
                                 const Eigen::VectorXd& lower, const Eigen::VectorXd& upper);

  // Of the free columns of J in the last call of `nearest`; below their number, some can move
  // without any effect.
  [[nodiscard]] Eigen::Index rank() const { return rank_; }
  [[nodiscard]] Eigen::Index free() const { return static_cast<Eigen::Index>(free_.size()); }

 private:
  template <class SolveFree, class Pull>
  const Eigen::VectorXd& active_set(const Eigen::VectorXd& lower, const Eigen::VectorXd& upper,
                                    SolveFree&& solve_free, Pull&& pull);
  void begin(const Linearization& at, const Eigen::VectorXd& lower, const Eigen::VectorXd& upper);
  bool advance(const Eigen::VectorXd& lower, const Eigen::VectorXd& upper);
  template <class Pull>
  bool release(Pull&& pull);
  void list_free();
  void gather(const Linearization& at);

  std::vector<Held> held_;
  std::vector<Eigen::Index> free_;
  Eigen::Index rank_ = 0;
  Eigen::VectorXd p_;       // the step so far, within the bounds
  Eigen::VectorXd target_;  // of the free variables, where they would go
  Eigen::VectorXd rest_;    // J p + r, p of the held variables only
  Eigen::MatrixXd stacked_;
  Eigen::VectorXd right_;
  Eigen::HouseholderQR<Eigen::MatrixXd> qr_;
  Eigen::CompleteOrthogonalDecomposition<Eigen::MatrixXd> cod_;
};

}  // namespace chromacore::detail
