#pragma once
// A source's dispersion formula, prepared for speed.
#include <chromacore/material.hpp>
#include <cstddef>
#include <span>
#include <variant>
#include <vector>

namespace chromacore::detail {

// c0 + sum c x^e. Small whole exponents are two polynomials by Horner's rule, in b and in 1/b, with
// b = x^2 where all of them are even, else b = x; the rest goes through std::pow.
class PowerSum {
 public:
  PowerSum() = default;
  // `pairs`: coefficient and exponent in turn; a coefficient of 0 is no term.
  PowerSum(double constant, std::span<const double> pairs);
  [[nodiscard]] double operator()(double x) const;
  [[nodiscard]] bool is_constant() const;

 private:
  struct Term {
    double coefficient = 0;
    double exponent = 0;
  };
  void add_whole(const Term& term);

  double constant_ = 0;
  int step_ = 2;                 // 2: b = x^2, 1: b = x
  std::vector<double> rising_;   // of b, b^2, ...
  std::vector<double> falling_;  // of 1/b, 1/b^2, ...
  std::vector<Term> other_;
};

// sum a x^p/(x^2 - pole) + powers: Sellmeier's forms (p = 2) and their relatives.
struct RationalSum {
  struct Term {
    double coefficient = 0;
    double exponent = 2;
    double pole = 0;  // um^2; none where negative
  };
  std::vector<Term> terms = {};
  PowerSum powers = {};
  [[nodiscard]] double operator()(double x) const;
};

// Sellmeier's form proper, the commonest one: constant + sum b x^2/(x^2 - pole).
struct Sellmeier {
  struct Term {
    double b = 0;
    double pole = 0;
  };
  double constant = 1;
  std::vector<Term> terms = {};
  [[nodiscard]] double operator()(double x) const;
};

struct Herzberger {
  static constexpr double pole = 0.028;  // um^2
  double c[6] = {};
  [[nodiscard]] double operator()(double x) const;
};

// A point of a list, in the variable in which n^2 is smooth.
struct Point {
  double t = 0;  // 1/x^2
  double n_squared = 0;
};

// The polynomial in t through all points, in Newton's form.
class ThroughPoints {
 public:
  explicit ThroughPoints(std::vector<Point> points);
  [[nodiscard]] double operator()(double x) const;
  [[nodiscard]] bool is_constant() const;

 private:
  std::vector<Point> nodes_;  // `n_squared` holds the divided differences
};

// The natural cubic spline in t (second derivative 0 at both ends), three or more points.
class Spline {
 public:
  explicit Spline(std::vector<Point> points);  // sorted by t, all different
  [[nodiscard]] double operator()(double x) const;

 private:
  std::vector<Point> knots_;
  std::vector<double> bend_;  // second derivative at each knot
};

// The formula as a function of x, the wavelength in um in the medium that the source counts in.
class Dispersion {
 public:
  // @throws Error  bad_value: none or not finite coefficients, too many, a list of points with an
  //                odd count, equal wavelengths, or values that are not positive
  Dispersion(DispersionForm form, std::span<const double> coefficients);

  // NaN where the formula has none (n^2 or n not positive, or not finite).
  [[nodiscard]] double index(double x) const;
  // One point, or equal indices: no wavelength dependence at all.
  [[nodiscard]] bool is_constant() const;
  // Whether a term of the formula is infinite between these.
  [[nodiscard]] bool has_pole(double from, double to) const;

 private:
  using Formula = std::variant<Sellmeier, RationalSum, PowerSum, Herzberger, ThroughPoints, Spline>;
  static Formula prepared(DispersionForm form, std::span<const double> coefficients);

  Formula formula_;
  bool squared_;  // the formula gives n^2, not n
};

// Whether the form's coefficients are points: wavelength and index in turn.
[[nodiscard]] bool is_list_of_points(DispersionForm form);

}  // namespace chromacore::detail
