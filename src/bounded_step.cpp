#include "bounded_step.hpp"

#include <algorithm>
#include <cmath>
#include <limits>

namespace chromacore::detail {
namespace {

// Singular values below this part of the largest count as 0.
constexpr double rank_threshold = 1e-10;
// A pull of the residuals this small, against |column| (1 + |residuals|), is none.
constexpr double no_pull = 1e-10;

double pull_of(const Eigen::MatrixXd& jacobian, Eigen::Index i, const Eigen::VectorXd& residuals) {
  const double pull = -jacobian.col(i).dot(residuals);
  const double limit = no_pull * jacobian.col(i).norm() * (1.0 + residuals.norm());
  return std::abs(pull) > limit ? pull : 0.0;
}

}  // namespace

void BoundedStep::begin(const Linearization& at, const Eigen::VectorXd& lower,
                        const Eigen::VectorXd& upper) {
  p_.setZero(at.jacobian.cols());
  target_.resize(p_.size());
  held_.assign(static_cast<std::size_t>(p_.size()), Held::free);
  for (Eigen::Index i = 0; i < p_.size(); ++i) {
    if (lower[i] < 0.0 && upper[i] > 0.0) continue;
    Held& held = held_[static_cast<std::size_t>(i)];
    const double pull = pull_of(at.jacobian, i, at.residuals);
    if (lower[i] >= 0.0 && pull < 0.0) held = Held::lower;
    if (upper[i] <= 0.0 && pull > 0.0) held = Held::upper;
  }
}

void BoundedStep::list_free() {
  free_.clear();
  for (std::size_t i = 0; i < held_.size(); ++i) {
    if (held_[i] == Held::free) free_.push_back(static_cast<Eigen::Index>(i));
  }
}

// The free columns of J on top of `stacked_`, and what the held variables leave of the residuals.
void BoundedStep::gather(const Linearization& at) {
  const Eigen::Index rows = at.residuals.size();
  rest_ = at.residuals;
  for (Eigen::Index i = 0; i < p_.size(); ++i) {
    if (held_[static_cast<std::size_t>(i)] != Held::free && p_[i] != 0.0) {
      rest_ += at.jacobian.col(i) * p_[i];
    }
  }
  for (Eigen::Index k = 0; k < free(); ++k) {
    stacked_.col(k).head(rows) = at.jacobian.col(free_[static_cast<std::size_t>(k)]);
  }
}

// Moves the free variables towards `target_` as far as the bounds allow, and holds the one that
// stops it. True where nothing did.
bool BoundedStep::advance(const Eigen::VectorXd& lower, const Eigen::VectorXd& upper) {
  double share = 1.0;
  Eigen::Index stops = -1;
  for (Eigen::Index k = 0; k < free(); ++k) {
    const Eigen::Index i = free_[static_cast<std::size_t>(k)];
    const double step = target_[k] - p_[i];
    const double room = step < 0 ? lower[i] - p_[i] : upper[i] - p_[i];
    if (std::abs(step) <= std::abs(room) || room / step >= share) continue;
    share = room / step;
    stops = i;
  }
  for (Eigen::Index k = 0; k < free(); ++k) {
    const Eigen::Index i = free_[static_cast<std::size_t>(k)];
    p_[i] = stops < 0 ? target_[k] : p_[i] + share * (target_[k] - p_[i]);
    p_[i] = std::clamp(p_[i], lower[i], upper[i]);
  }
  if (stops < 0) return true;
  const bool down = lower[stops] - p_[stops] >= p_[stops] - upper[stops];
  p_[stops] = down ? lower[stops] : upper[stops];
  held_[static_cast<std::size_t>(stops)] = down ? Held::lower : Held::upper;
  return false;
}

// Frees the variable that its bound keeps back most. `pull(i)` is positive where variable i would
// go up if it were free.
template <class Pull>
bool BoundedStep::release(Pull&& pull) {
  double most = 0.0;
  std::size_t freed = held_.size();
  for (std::size_t i = 0; i < held_.size(); ++i) {
    if (held_[i] == Held::free) continue;
    const double inwards = pull(static_cast<Eigen::Index>(i)) * (held_[i] == Held::lower ? 1 : -1);
    if (inwards <= most) continue;
    most = inwards;
    freed = i;
  }
  if (freed == held_.size()) return false;
  held_[freed] = Held::free;
  return true;
}

template <class SolveFree, class Pull>
const Eigen::VectorXd& BoundedStep::active_set(const Eigen::VectorXd& lower,
                                               const Eigen::VectorXd& upper, SolveFree&& solve_free,
                                               Pull&& pull) {
  // Each round holds or frees one variable; degenerate corners could make it go in circles.
  const Eigen::Index most_rounds = 4 * p_.size() + 8;
  for (Eigen::Index round = 0; round < most_rounds; ++round) {
    list_free();
    solve_free();
    if (advance(lower, upper) && !release(pull)) break;
  }
  list_free();
  return p_;
}

const Eigen::VectorXd& BoundedStep::damped(const Linearization& at, double damping,
                                           const Eigen::VectorXd& lower,
                                           const Eigen::VectorXd& upper) {
  const Eigen::Index rows = at.residuals.size();
  const Eigen::Index columns = at.jacobian.cols();
  stacked_.resize(rows + columns, columns);
  right_.resize(rows + columns);
  begin(at, lower, upper);
  const auto solve_free = [&] {
    gather(at);
    if (free() == 0) return;
    auto matrix = stacked_.topLeftCorner(rows + free(), free());
    matrix.bottomRows(free()).setZero();
    matrix.bottomRows(free()).diagonal().setConstant(std::sqrt(damping));
    right_.setZero();
    right_.head(rows) = -rest_;
    qr_.compute(matrix);
    target_.head(free()) = qr_.solve(right_.head(rows + free()));
  };
  const auto pull = [&](Eigen::Index i) {
    const double gradient = at.jacobian.col(i).dot(at.jacobian * p_ + at.residuals);
    return -(gradient + damping * p_[i]);
  };
  return active_set(lower, upper, solve_free, pull);
}

const Eigen::VectorXd& BoundedStep::nearest(const Linearization& at, const Eigen::VectorXd& from,
                                            const Eigen::VectorXd& lower,
                                            const Eigen::VectorXd& upper) {
  const Eigen::Index rows = at.residuals.size();
  stacked_.resize(rows, at.jacobian.cols());
  Eigen::VectorXd multipliers;
  begin(at, lower, upper);
  // With q = p + from the free problem is the least |q| of all with the least |J q - right|.
  const auto solve_free = [&] {
    gather(at);
    rank_ = 0;
    if (free() == 0) {
      multipliers.setZero(rows);
      return;
    }
    cod_.setThreshold(rank_threshold);
    cod_.compute(stacked_.leftCols(free()));
    rank_ = cod_.rank();
    right_ = -rest_;
    for (Eigen::Index k = 0; k < free(); ++k) {
      right_ += stacked_.col(k) * from[free_[static_cast<std::size_t>(k)]];
    }
    const Eigen::VectorXd q = cod_.solve(right_);
    multipliers = cod_.transpose().solve(q);
    for (Eigen::Index k = 0; k < free(); ++k) {
      target_[k] = q[k] - from[free_[static_cast<std::size_t>(k)]];
    }
  };
  // The residuals decide; where they do not care, the distance does.
  const auto pull = [&](Eigen::Index i) {
    const double by_residuals = pull_of(at.jacobian, i, at.jacobian * p_ + at.residuals);
    if (by_residuals != 0.0) return by_residuals;
    return at.jacobian.col(i).dot(multipliers) - (from[i] + p_[i]);
  };
  return active_set(lower, upper, solve_free, pull);
}

}  // namespace chromacore::detail
