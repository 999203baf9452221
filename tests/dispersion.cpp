// The formulas themselves, each against its definition written out in long double.
#include "dispersion.hpp"

#include <doctest/doctest.h>

#include <cmath>
#include <functional>
#include <random>

#include "close.hpp"
#include "message_of.hpp"

using chromacore::DispersionForm;
using chromacore::detail::Dispersion;
using chromacore::test::close;
using chromacore::test::message_of;
using chromacore::test::test_seed;

namespace {

using Numbers = std::vector<double>;
using Wide = long double;
constexpr double wavelengths_um[] = {0.35, 0.4358343, 0.5, 0.5875618, 1.0, 1.01398, 2.2};

Wide at(const Numbers& c, std::size_t k) { return k < c.size() ? c[k] : 0; }

Wide sellmeier(const Numbers& c, Wide x) {
  Wide sum = 1 + at(c, 0);
  for (std::size_t k = 1; k < c.size(); k += 2)
    sum += at(c, k) * x * x / (x * x - at(c, k + 1) * at(c, k + 1));
  return std::sqrt(sum);
}

Wide sellmeier_squared(const Numbers& c, Wide x) {
  Wide sum = 1 + at(c, 0);
  for (std::size_t k = 1; k < c.size(); k += 2) sum += at(c, k) * x * x / (x * x - at(c, k + 1));
  return std::sqrt(sum);
}

Wide powers(const Numbers& c, std::size_t first, Wide x) {
  Wide sum = at(c, 0);
  for (std::size_t k = first; k < c.size(); k += 2) sum += at(c, k) * std::pow(x, at(c, k + 1));
  return sum;
}

Wide rational_polynomial(const Numbers& c, Wide x) {
  Wide sum = powers(c, 9, x);
  for (std::size_t k : {1U, 5U})
    if (at(c, k) != 0)
      sum += at(c, k) * std::pow(x, at(c, k + 1)) / (x * x - std::pow(at(c, k + 2), at(c, k + 3)));
  return std::sqrt(sum);
}

void compare(DispersionForm form, const Numbers& c, const std::function<Wide(Wide)>& plain) {
  const Dispersion formula(form, c);
  for (const double x : wavelengths_um) {
    CAPTURE(x);
    CHECK(close(formula.index(x), static_cast<double>(plain(x)), {.rel = 4e-15}));
  }
}

std::string said(DispersionForm form, const Numbers& c) {
  return message_of([&] { (void)Dispersion(form, c); });
}

// A smooth list of points: N-BK7 by its maker's coefficients.
const Numbers n_bk7 = {0,          1.03961212, 0.00600069867, 0.231792344, 0.0200179144,
                       1.01046945, 103.560653};

Numbers points_of_n_bk7(double from, double to, int count) {
  const Dispersion formula(DispersionForm::sellmeier_squared, n_bk7);
  Numbers points;
  for (int i = 0; i < count; ++i) {
    const double x = from + (to - from) * i / (count - 1);
    points.push_back(x);
    points.push_back(formula.index(x));
  }
  return points;
}

}  // namespace

TEST_CASE("sellmeier: poles as wavelengths, an extra constant, a missing last coefficient") {
  // Fused silica, I. H. Malitson, J. Opt. Soc. Am. 55, 1205 (1965).
  const Numbers silica = {0, 0.6961663, 0.0684043, 0.4079426, 0.1162414, 0.8974794, 9.896161};
  for (const Numbers& c :
       {silica, Numbers{0.33973, 0.69913, 0.09374, 0.11994, 21.18}, Numbers{0.5}, Numbers{0, 1.1}})
    compare(DispersionForm::sellmeier, c, [&c](Wide x) { return sellmeier(c, x); });
  // n_d = 1.45846, Malitson's table II, from memory.
  CHECK(close(Dispersion(DispersionForm::sellmeier, silica).index(0.58756), 1.45846,
              {.abs = 0.5e-5}));
}

TEST_CASE("sellmeier_squared: poles as squares, negative ones too") {
  for (const Numbers& c : {n_bk7, Numbers{0, 1.2, 0.01, 0.3, -0.02}})
    compare(DispersionForm::sellmeier_squared, c, [&c](Wide x) { return sellmeier_squared(c, x); });
}

TEST_CASE("polynomial: even, whole and broken exponents") {
  // HOYA FCD1; then odd, repeated and zero exponents; broken and very large ones.
  for (const Numbers& c : {Numbers{2.2181132, -0.005799427, 2, 0.0083470679, -2, 6.5046523e-05, -4,
                                   8.5142186e-06, -6, -5.8852269e-07, -8},
                           Numbers{2.2, 0.01, 1, -0.002, 3, 0.01, -1, 0.003, -3, 0.1, 0, 0.01, 1},
                           Numbers{2.2, 0.01, 1.5, 0.01, -3.5, 0.002, 2},
                           Numbers{2.2, 1e-30, 60, 1e-12, -33}, Numbers{2.2, 0.01}, Numbers{2.2}})
    compare(DispersionForm::polynomial, c, [&c](Wide x) { return std::sqrt(powers(c, 1, x)); });
}

TEST_CASE("cauchy: the same for n itself, as Conrady's formula has it") {
  const Numbers c = {1.5, 0.008, -1, 0.0004, -3.5};
  compare(DispersionForm::cauchy, c, [&c](Wide x) { return powers(c, 1, x); });
}

TEST_CASE("rational_polynomial: two rational terms, then powers; unused slots are no terms") {
  // KRS-6, ZnS (M. Debenham, Appl. Opt. 23, 2238 (1984)), YAG, and a term with a broken exponent.
  for (const Numbers& c : {Numbers{1, 3.821, 2, 0.02234, 2, 0, 0, 0, 1, -0.000877, 2},
                           Numbers{8.393, 0.14383, 0, 0.2421, 2, 4430.99, 0, 36.71, 2},
                           Numbers{1.882, 1.404, 2, 0.1338, 2, 0, 0, 0, 0, -0.0137, 2},
                           Numbers{2, 0.1, 1.5, 0.02, 1, 0, 0, 0, 1, 0.01, -1}})
    compare(DispersionForm::rational_polynomial, c,
            [&c](Wide x) { return rational_polynomial(c, x); });
}

TEST_CASE("herzberger") {
  // Silicon, D. F. Edwards, E. Ochoa, Appl. Opt. 19, 4130 (1980).
  const Numbers c = {3.41983, 0.159906, -0.123109, 1.26878e-6, -1.95104e-9};
  const Dispersion formula(DispersionForm::herzberger, c);
  for (const double um : {2.5, 4.0, 10.0, 24.0}) {
    const Wide x2 = Wide(um) * um;
    const Wide l = 1 / (x2 - Wide(0.028));
    const Wide want = c[0] + c[1] * l + c[2] * l * l + c[3] * x2 + c[4] * x2 * x2;
    CHECK(close(formula.index(um), static_cast<double>(want), {.rel = 4e-15}));
  }
  CHECK(said(DispersionForm::herzberger, Numbers(7, 1.0)) ==
        "bad_value: 7 coefficients; herzberger has 6 at most");
}

TEST_CASE("through_lines: hits its points, in any order, 16 of them too") {
  for (const int count : {2, 3, 5, 16}) {
    const Numbers points = points_of_n_bk7(0.36, 1.1, count);
    const Dispersion formula(DispersionForm::through_lines, points);
    Numbers mixed;
    for (std::size_t k = points.size(); k > 0; k -= 2)
      mixed.insert(mixed.end(), {points[k - 2], points[k - 1]});
    CAPTURE(count);
    for (std::size_t k = 0; k < points.size(); k += 2) {
      CHECK(close(formula.index(points[k]), points[k + 1], {.rel = 1e-15 * count}));
      CHECK(Dispersion(DispersionForm::through_lines, mixed).index(points[k]) ==
            formula.index(points[k]));
    }
  }
}

TEST_CASE("through_lines: n^2 is a polynomial in 1/x^2") {
  const Numbers square = {2.25, 0.01, -2, 1e-4, -4};
  const Dispersion exact(DispersionForm::polynomial, square);
  Numbers points;
  for (const double x : {0.4, 0.55, 0.9}) points.insert(points.end(), {x, exact.index(x)});
  const Dispersion formula(DispersionForm::through_lines, points);
  for (const double x : {0.42, 0.5, 0.7, 0.85})
    CHECK(close(formula.index(x), exact.index(x), {.rel = 1e-14}));
}

TEST_CASE("through_lines: one line, or equal indices, has no dispersion") {
  CHECK(Dispersion(DispersionForm::through_lines, Numbers{0.5, 1.6}).is_constant());
  CHECK(Dispersion(DispersionForm::through_lines, Numbers{0.5, 1.6, 0.6, 1.6}).is_constant());
  CHECK(Dispersion(DispersionForm::through_lines, Numbers{0.5, 1.6}).index(12) == 1.6);
  CHECK_FALSE(Dispersion(DispersionForm::through_lines, Numbers{0.5, 1.6, 0.6, 1.5}).is_constant());
}

TEST_CASE("table: the natural spline in 1/x^2") {
  // Want: scipy.interpolate.CubicSpline(1/x^2, n^2, bc_type="natural"), SciPy 1.10.
  const Dispersion formula(
      DispersionForm::table,
      Numbers{3, 2.6266, 4, 2.6210, 5, 2.6173, 6, 2.6142, 8, 2.6088, 10, 2.6023, 12, 2.5942});
  CHECK(close(formula.index(3.3), 2.6245493024072184, {.rel = 1e-14}));
  CHECK(close(formula.index(4.5), 2.6190411100540523, {.rel = 1e-14}));
  CHECK(close(formula.index(7), 2.611372391662656, {.rel = 1e-14}));
  CHECK(close(formula.index(11.5), 2.595989682388365, {.rel = 1e-14}));
  CHECK(close(formula.index(3), 2.6266, {.rel = 1e-15}));
  CHECK(close(formula.index(12), 2.5942, {.rel = 1e-15}));
}

TEST_CASE("table: many points follow a glass closely, few go through all lines") {
  const Dispersion glass(DispersionForm::sellmeier_squared, n_bk7);
  const Dispersion table(DispersionForm::table, points_of_n_bk7(0.36, 1.1, 75));
  for (double x = 0.4; x < 1.05; x += 0.003)
    CHECK(close(table.index(x), glass.index(x), {.abs = 1e-7}));
  const Numbers few = points_of_n_bk7(0.4, 0.7, 3);
  CHECK(Dispersion(DispersionForm::table, few).index(0.5) ==
        Dispersion(DispersionForm::through_lines, few).index(0.5));
}

TEST_CASE("formulas: where there is no index there is NaN, and poles are found") {
  CHECK(std::isnan(Dispersion(DispersionForm::polynomial, Numbers{-1}).index(0.5)));
  CHECK(std::isnan(Dispersion(DispersionForm::cauchy, Numbers{-1.5}).index(0.5)));
  CHECK(std::isnan(Dispersion(DispersionForm::sellmeier_squared, Numbers{0, 1, 0.25}).index(0.5)));
  const Dispersion glass(DispersionForm::sellmeier_squared, n_bk7);
  CHECK(glass.has_pole(0.1, 0.3));  // at 0.077, 0.141 and 10.2 um
  CHECK_FALSE(glass.has_pole(0.3, 2.5));
  CHECK(Dispersion(DispersionForm::sellmeier, Numbers{0, 1, 1.135}).has_pole(1.1, 1.2));
  CHECK(Dispersion(DispersionForm::herzberger, Numbers{3.4, 0.1}).has_pole(0.1, 0.2));
  CHECK(
      Dispersion(DispersionForm::rational_polynomial, Numbers{2, 1, 2, 0.5, 1}).has_pole(0.7, 0.8));
}

TEST_CASE("formulas: coefficients that are none") {
  const auto lines = DispersionForm::through_lines;
  CHECK(said(DispersionForm::sellmeier, {}) == "bad_value: no coefficients");
  CHECK(said(DispersionForm::sellmeier, {0, std::nan("")}) ==
        "bad_value: a coefficient that is not a finite number");
  CHECK(
      said(lines, {0.5, 1.5, 0.6}) ==
      "bad_value: 3 numbers in a list of wavelengths and indices in turn; expected an even count");
  CHECK(said(lines, {0.5, 1.5, 0.5, 1.6}) == "bad_value: two indices at 0.5 um; expected one");
  CHECK(said(lines, {0, 1.5}) == "bad_value: index 1.5 at 0 um; both are expected to be above 0");
  CHECK(said(lines, {0.5, -1.5}).starts_with("bad_value: index -1.5 at 0.5 um"));
  CHECK(said(lines, points_of_n_bk7(0.4, 0.8, 17)) ==
        "bad_value: 17 points for through_lines; expected at most 16, or the form table");
  CHECK(said(DispersionForm::table, points_of_n_bk7(0.4, 0.8, 10001)) ==
        "bad_value: 20002 coefficients; expected at most 20000");
  CHECK(said(static_cast<DispersionForm>(99), {1}) ==
        "bad_value: a dispersion form that does not exist");
}

TEST_CASE("formulas: random sums of powers agree with their definition") {
  const auto seed = test_seed();
  CAPTURE(seed);
  std::mt19937_64 random(seed);
  std::uniform_real_distribution<double> size(0, 0.05);
  std::uniform_int_distribution<int> whole(-12, 12);
  for (int i = 0; i < 200; ++i) {
    Numbers c = {2.5};
    for (int term = 0; term < 6; ++term) {
      const int exponent = whole(random);
      // At 0.35 and 2.2 um no term is to drown the others.
      c.push_back(size(random) * std::pow(exponent > 0 ? 2.2 : 0.35, -exponent));
      c.push_back(exponent + (i % 3 == 0 ? 0.5 : 0));
    }
    compare(DispersionForm::polynomial, c, [&c](Wide x) { return std::sqrt(powers(c, 1, x)); });
  }
}
