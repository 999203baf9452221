#include "dispersion.hpp"

#include <algorithm>
#include <chromacore/error.hpp>
#include <cmath>
#include <string>
#include <utility>

#include "text.hpp"

namespace chromacore::detail {
namespace {

constexpr double largest_whole_exponent = 32;
// A polynomial through more points swings between them; and its preparation takes n^2 steps.
constexpr std::size_t most_points_of_polynomial = 16;
constexpr std::size_t most_coefficients = 20000;

bool is_whole(double exponent) {
  return exponent == std::nearbyint(exponent) && std::abs(exponent) <= largest_whole_exponent;
}
bool is_even(double exponent) { return std::fmod(exponent, 2) == 0; }

// coefficient k, 0 where the list ends before it
double at(std::span<const double> c, std::size_t k) { return k < c.size() ? c[k] : 0; }

double power(double x, double exponent) {
  if (exponent == 2) return x * x;
  return exponent == 0 ? 1 : std::pow(x, exponent);
}

double horner(const std::vector<double>& c, double b) {
  double sum = 0;
  for (std::size_t k = c.size(); k-- > 0;) sum = (sum + c[k]) * b;
  return sum;
}

[[noreturn]] void refuse(const std::string& message) { throw Error(ErrorCode::bad_value, message); }

Sellmeier sellmeier(std::span<const double> c, bool poles_are_squared) {
  Sellmeier result;
  result.constant = 1 + at(c, 0);
  for (std::size_t k = 1; k < c.size(); k += 2) {
    const double pole = at(c, k + 1);
    if (c[k] != 0) result.terms.push_back({c[k], poles_are_squared ? pole : pole * pole});
  }
  return result;
}

RationalSum rational_polynomial(std::span<const double> c) {
  RationalSum result;
  for (const std::size_t k : {std::size_t{1}, std::size_t{5}})
    if (at(c, k) != 0)
      result.terms.push_back({c[k], at(c, k + 1), std::pow(at(c, k + 2), at(c, k + 3))});
  result.powers = PowerSum(c[0], c.size() > 9 ? c.subspan(9) : std::span<const double>{});
  return result;
}

Herzberger herzberger(std::span<const double> c) {
  Herzberger result;
  if (c.size() > std::size(result.c))
    refuse(std::to_string(c.size()) + " coefficients; herzberger has 6 at most");
  std::copy(c.begin(), c.end(), result.c);
  return result;
}

Point point(double x, double n) {
  if (!(x > 0) || !(n > 0))
    refuse("index " + number_text(n) + " at " + number_text(x) +
           " um; both are expected to be above 0");
  return {1 / (x * x), n * n};
}

// The list, ordered from long to short wavelengths.
std::vector<Point> points(std::span<const double> c) {
  if (c.size() % 2 != 0)
    refuse(std::to_string(c.size()) + " numbers in a list of wavelengths and indices in turn; " +
           "expected an even count");
  std::vector<Point> result;
  for (std::size_t k = 0; k + 1 < c.size(); k += 2) result.push_back(point(c[k], c[k + 1]));
  std::sort(result.begin(), result.end(), [](const Point& a, const Point& b) { return a.t < b.t; });
  const auto same = std::adjacent_find(result.begin(), result.end(),
                                       [](const Point& a, const Point& b) { return a.t == b.t; });
  if (same != result.end())
    refuse("two indices at " + number_text(1 / std::sqrt(same->t), 7) + " um; expected one");
  return result;
}

// Each next point as far as can be from those before it (Leja's order), in which Newton's form
// loses the fewest digits: L. Reichel, BIT 30, 332 (1990).
void spread(std::vector<Point>& points) {
  for (std::size_t chosen = 1; chosen < points.size(); ++chosen) {
    const auto distance = [&](const Point& candidate) {
      double product = 1;
      for (std::size_t k = 0; k < chosen; ++k) product *= std::abs(candidate.t - points[k].t);
      return product;
    };
    const auto first = points.begin() + static_cast<std::ptrdiff_t>(chosen);
    std::iter_swap(first,
                   std::max_element(first, points.end(), [&](const Point& a, const Point& b) {
                     return distance(a) < distance(b);
                   }));
  }
}

ThroughPoints through_lines(std::span<const double> c) {
  if (c.size() > 2 * most_points_of_polynomial)
    refuse(std::to_string(c.size() / 2) + " points for through_lines; expected at most " +
           std::to_string(most_points_of_polynomial) + ", or the form table");
  return ThroughPoints(points(c));
}

}  // namespace

PowerSum::PowerSum(double constant, std::span<const double> pairs) : constant_(constant) {
  std::vector<Term> whole;
  for (std::size_t k = 0; k < pairs.size(); k += 2) {
    const Term term{pairs[k], at(pairs, k + 1)};
    if (term.coefficient == 0) continue;
    (is_whole(term.exponent) ? whole : other_).push_back(term);
  }
  const bool even = std::all_of(whole.begin(), whole.end(),
                                [](const Term& term) { return is_even(term.exponent); });
  step_ = even ? 2 : 1;
  for (const Term& term : whole) add_whole(term);
}

void PowerSum::add_whole(const Term& term) {
  const int power = static_cast<int>(term.exponent) / step_;
  if (power == 0) {
    constant_ += term.coefficient;
    return;
  }
  std::vector<double>& side = power > 0 ? rising_ : falling_;
  const auto place = static_cast<std::size_t>(std::abs(power)) - 1;
  if (side.size() <= place) side.resize(place + 1, 0.0);
  side[place] += term.coefficient;
}

double PowerSum::operator()(double x) const {
  const double b = step_ == 2 ? x * x : x;
  double sum = horner(rising_, b) + horner(falling_, 1 / b);
  for (const Term& term : other_) sum += term.coefficient * std::pow(x, term.exponent);
  return constant_ + sum;
}

bool PowerSum::is_constant() const { return rising_.empty() && falling_.empty() && other_.empty(); }

double RationalSum::operator()(double x) const {
  double sum = powers(x);
  for (const Term& term : terms)
    sum += term.coefficient * power(x, term.exponent) / (x * x - term.pole);
  return sum;
}

double Sellmeier::operator()(double x) const {
  const double x2 = x * x;
  double sum = constant;
  for (const Term& term : terms) sum += term.b * x2 / (x2 - term.pole);
  return sum;
}

double Herzberger::operator()(double x) const {
  const double x2 = x * x;
  const double l = 1 / (x2 - pole);
  return c[0] + l * (c[1] + l * c[2]) + x2 * (c[3] + x2 * (c[4] + x2 * c[5]));
}

ThroughPoints::ThroughPoints(std::vector<Point> points) : nodes_(std::move(points)) {
  spread(nodes_);
  const std::size_t count = nodes_.size();
  for (std::size_t order = 1; order < count; ++order)
    for (std::size_t k = count; k-- > order;)
      nodes_[k].n_squared =
          (nodes_[k].n_squared - nodes_[k - 1].n_squared) / (nodes_[k].t - nodes_[k - order].t);
}

double ThroughPoints::operator()(double x) const {
  const double t = 1 / (x * x);
  double sum = 0;
  for (std::size_t k = nodes_.size(); k-- > 0;) {
    const double next = k + 1 < nodes_.size() ? sum * (t - nodes_[k].t) : 0;
    sum = nodes_[k].n_squared + next;
  }
  return sum;
}

bool ThroughPoints::is_constant() const {
  return std::all_of(nodes_.begin() + 1, nodes_.end(),
                     [](const Point& node) { return node.n_squared == 0; });
}

// The tridiagonal equations of the second derivatives, by elimination (Thomas).
Spline::Spline(std::vector<Point> points) : knots_(std::move(points)), bend_(knots_.size(), 0.0) {
  const std::size_t last = knots_.size() - 1;
  const auto step = [this](std::size_t k) { return knots_[k + 1].t - knots_[k].t; };
  const auto slope = [&](std::size_t k) {
    return (knots_[k + 1].n_squared - knots_[k].n_squared) / step(k);
  };
  std::vector<double> above(knots_.size(), 0.0);  // the eliminated matrix's upper diagonal
  for (std::size_t k = 1; k < last; ++k) {
    const double pivot = 2 * (step(k - 1) + step(k)) - step(k - 1) * above[k - 1];
    above[k] = step(k) / pivot;
    bend_[k] = (6 * (slope(k) - slope(k - 1)) - step(k - 1) * bend_[k - 1]) / pivot;
  }
  for (std::size_t k = last; k-- > 1;) bend_[k] -= above[k] * bend_[k + 1];
}

double Spline::operator()(double x) const {
  const double t = 1 / (x * x);
  const auto after = std::upper_bound(knots_.begin() + 1, knots_.end() - 1, t,
                                      [](double value, const Point& k) { return value < k.t; });
  const auto k = static_cast<std::size_t>(after - knots_.begin()) - 1;
  const double width = knots_[k + 1].t - knots_[k].t;
  const double a = (knots_[k + 1].t - t) / width;
  const double b = (t - knots_[k].t) / width;
  return a * knots_[k].n_squared + b * knots_[k + 1].n_squared +
         ((a * a * a - a) * bend_[k] + (b * b * b - b) * bend_[k + 1]) * width * width / 6;
}

Dispersion::Dispersion(DispersionForm form, std::span<const double> coefficients)
    : formula_(prepared(form, coefficients)),
      squared_(form != DispersionForm::cauchy && form != DispersionForm::herzberger) {}

Dispersion::Formula Dispersion::prepared(DispersionForm form, std::span<const double> c) {
  if (c.empty()) refuse("no coefficients");
  if (c.size() > most_coefficients)
    refuse(std::to_string(c.size()) + " coefficients; expected at most " +
           std::to_string(most_coefficients));
  if (!std::all_of(c.begin(), c.end(), [](double value) { return std::isfinite(value); }))
    refuse("a coefficient that is not a finite number");
  switch (form) {
    case DispersionForm::sellmeier:
      return sellmeier(c, false);
    case DispersionForm::sellmeier_squared:
      return sellmeier(c, true);
    case DispersionForm::polynomial:
    case DispersionForm::cauchy:
      return PowerSum(c[0], c.subspan(1));
    case DispersionForm::rational_polynomial:
      return rational_polynomial(c);
    case DispersionForm::herzberger:
      return herzberger(c);
    case DispersionForm::through_lines:
      return through_lines(c);
    case DispersionForm::table:
      if (c.size() < 8) return through_lines(c);
      return Spline(points(c));
  }
  refuse("a dispersion form that does not exist");
}

double Dispersion::index(double x) const {
  double value = std::visit([x](const auto& formula) { return formula(x); }, formula_);
  if (squared_) value = std::sqrt(value);
  return value > 0 && std::isfinite(value) ? value : std::nan("");
}

bool Dispersion::is_constant() const {
  if (const auto* list = std::get_if<ThroughPoints>(&formula_)) return list->is_constant();
  if (const auto* sum = std::get_if<PowerSum>(&formula_)) return sum->is_constant();
  if (const auto* sum = std::get_if<Sellmeier>(&formula_)) return sum->terms.empty();
  return false;
}

bool Dispersion::has_pole(double from, double to) const {
  const auto inside = [from, to](double pole) { return pole >= from * from && pole <= to * to; };
  const auto term_inside = [&inside](const auto& term) { return inside(term.pole); };
  if (const auto* sum = std::get_if<Sellmeier>(&formula_))
    return std::any_of(sum->terms.begin(), sum->terms.end(), term_inside);
  if (const auto* sum = std::get_if<RationalSum>(&formula_))
    return std::any_of(sum->terms.begin(), sum->terms.end(), term_inside);
  return std::holds_alternative<Herzberger>(formula_) && inside(Herzberger::pole);
}

bool is_list_of_points(DispersionForm form) {
  return form == DispersionForm::through_lines || form == DispersionForm::table;
}

}  // namespace chromacore::detail
