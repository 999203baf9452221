#include "index_fit.hpp"

#include <Eigen/Dense>
#include <chromacore/error.hpp>
#include <cmath>
#include <string>
#include <vector>

namespace chromacore::detail {
namespace {

using Exponents = std::vector<int>;

constexpr int steepest = -8;      // 1, 2, 3 or 4 terms of falling powers: x^-2 to x^-8
constexpr int flattest = 4;       // 0, 1 or 2 of rising powers: x^2, x^4
constexpr std::size_t spare = 2;  // indices more than terms

using Index = Eigen::Index;

Eigen::MatrixXd design_matrix(std::span<const double> x, const Exponents& exponents) {
  Eigen::MatrixXd columns(static_cast<Index>(x.size()), static_cast<Index>(exponents.size()));
  for (std::size_t i = 0; i < x.size(); ++i) {
    for (std::size_t k = 0; k < exponents.size(); ++k) {
      columns(static_cast<Index>(i), static_cast<Index>(k)) = std::pow(x[i], exponents[k]);
    }
  }
  return columns;
}

Eigen::VectorXd squares(std::span<const double> n) {
  Eigen::VectorXd values(static_cast<Index>(n.size()));
  for (std::size_t i = 0; i < n.size(); ++i) values(static_cast<Index>(i)) = n[i] * n[i];
  return values;
}

struct Attempt {
  IndexFit fit = {};
  double variance = 0;
};

Attempt attempt(std::span<const double> x, std::span<const double> n, const Exponents& exponents) {
  const Eigen::MatrixXd columns = design_matrix(x, exponents);
  const Eigen::VectorXd wanted = squares(n);
  const Eigen::VectorXd norms = columns.colwise().norm();
  const Eigen::VectorXd scaled =
      (columns * norms.cwiseInverse().asDiagonal()).colPivHouseholderQr().solve(wanted);
  const Eigen::VectorXd solution = scaled.cwiseQuotient(norms);
  Attempt result;
  const std::size_t terms = exponents.size();
  result.fit.terms = terms;
  result.fit.coefficients = {solution(0)};
  for (std::size_t k = 1; k < terms; ++k) {
    result.fit.coefficients.push_back(solution(static_cast<Index>(k)));
    result.fit.coefficients.push_back(exponents[k]);
  }
  const Eigen::VectorXd fitted = (columns * solution).cwiseMax(0).cwiseSqrt();
  const Eigen::VectorXd residuals = fitted - wanted.cwiseSqrt();
  result.fit.largest_residual = residuals.cwiseAbs().maxCoeff();
  result.variance = residuals.squaredNorm() / static_cast<double>(x.size() - terms);
  return result;
}

// 0, 2, 4, ..., highest, -2, -4, ..., lowest.
Exponents exponents_of(int highest, int lowest) {
  Exponents exponents;
  for (int e = 0; e <= highest; e += 2) exponents.push_back(e);
  for (int e = -2; e >= lowest; e -= 2) exponents.push_back(e);
  return exponents;
}

}  // namespace

IndexFit fit_index(std::span<const double> wavelengths_um, std::span<const double> indices) {
  if (indices.size() < fewest_indices_to_fit) {
    throw Error(ErrorCode::bad_value, std::to_string(indices.size()) +
                                          " indices to fit; expected at least " +
                                          std::to_string(fewest_indices_to_fit));
  }
  Attempt best{.fit = {}, .variance = HUGE_VAL};
  for (int highest = 0; highest <= flattest; highest += 2) {
    for (int lowest = -2; lowest >= steepest; lowest -= 2) {
      const Exponents exponents = exponents_of(highest, lowest);
      if (exponents.size() + spare > indices.size()) continue;
      const Attempt next = attempt(wavelengths_um, indices, exponents);
      if (next.variance < best.variance) best = next;
    }
  }
  if (best.fit.terms == 0) throw Error(ErrorCode::bad_value, "no formula fits these indices");
  return best.fit;
}

}  // namespace chromacore::detail
