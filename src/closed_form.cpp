#include <algorithm>
#include <chromacore/closed_form.hpp>
#include <chromacore/error.hpp>
#include <cmath>
#include <string>
#include <string_view>

#include "text.hpp"

namespace chromacore {
namespace {

using detail::number_text;

// Two V this close, relative, are one: the powers would be beyond 1e9 times the total.
constexpr double equal_v = 1e-9;
// Above this strength three materials count as collinear: P is not known better than to 1e-5.
constexpr double collinear_strength = 1e3;

std::string rounded(double value) { return number_text(value, 6); }

[[noreturn]] void degenerate(const std::string& message) {
  throw Error(ErrorCode::degenerate, message);
}

void require_finite_nonzero(double value, std::string_view what) {
  if (std::isfinite(value) && value != 0.0) return;
  throw Error(ErrorCode::bad_value,
              std::string(what) + " is " + number_text(value) + "; expected a number other than 0");
}

// 1/V; an element without dispersion has an infinite V, which is allowed here.
double dispersive_power(double v, std::string_view what) {
  if (std::isinf(v)) return 0.0;
  require_finite_nonzero(v, what);
  return 1.0 / v;
}

bool same_v(double w_a, double w_b) {
  return std::abs(w_a - w_b) <= equal_v * std::max(std::abs(w_a), std::abs(w_b));
}

VAndP v_and_p(const Material& material, const Band& band) {
  return {v_number(material, band),
          partial_dispersion(material, {band.reference, band.longest()}, band)};
}

// Of a = phi_i/V_i the two conditions say sum a_i = 0 and sum a_i P_i = 0: a is the cross product
// of the rows (1, 1, 1) and P, and the total power is its product with V.
std::array<double, 3> apochromat_parts(const std::array<VAndP, 3>& of) {
  std::array<double, 3> parts{};
  for (std::size_t i = 0; i < 3; ++i) {
    require_finite_nonzero(of[i].v, "V of material " + std::to_string(i + 1));
    require_finite_nonzero(of[i].p_ref_long, "P of material " + std::to_string(i + 1));
    parts[i] = of[i].v * (of[(i + 1) % 3].p_ref_long - of[(i + 2) % 3].p_ref_long);
  }
  return parts;
}

[[noreturn]] void throw_collinear(const std::array<VAndP, 3>& of, double strength) {
  std::string message = "the three materials lie on one line of P against V (";
  for (std::size_t i = 0; i < 3; ++i) {
    message += (i > 0 ? "; V " : "V ") + rounded(of[i].v) + ", P " + rounded(of[i].p_ref_long);
  }
  degenerate(message + "): three colours would need a strength, sum |phi_i| over the total, of " +
             rounded(strength) + ", where " + rounded(collinear_strength) +
             " is the limit; take one material off that line");
}

// The smallest spacing from which on no dialyte of positive power reaches, times that power; r is
// V_b/V_a.
double spacing_limit(double r) {
  const double root = 1.0 - std::sqrt(r);
  return root * root;
}

[[noreturn]] void throw_out_of_reach(double total, double v_a, double v_b, double spacing) {
  const double limit = v_a == v_b ? 0.0 : spacing_limit(v_b / v_a) / total;
  degenerate(
      "a spacing of " + rounded(spacing) + " mm is out of reach for V " + rounded(v_a) +
      " in front of " + rounded(v_b) + " and a focal length of " + rounded(1.0 / total) + " mm: " +
      (limit > 0
           ? "it reaches from 0 to " + rounded(limit) + " mm; a larger ratio of V reaches further"
           : "with equal V no spacing will do; take materials of different V"));
}

// phi_a/phi of the dialyte, x: D x^2 - (1 + D - r) x + 1 = 0, D = d phi. Of the two roots that
// which goes over into the achromat in contact as D goes to 0; NaN where there is none.
double dialyte_front_share(double d, double r) {
  const double b = 1.0 + d - r;
  const double root = std::sqrt(b * b - 4.0 * d);
  return 2.0 / (r <= 1.0 ? b + root : b - root);
}

}  // namespace

std::array<Power, 2> contact_achromat(Power total, double v_a, double v_b) {
  require_finite_nonzero(in_per_mm(total), "the total power");
  const double w_a = dispersive_power(v_a, "V of the first material");
  const double w_b = dispersive_power(v_b, "V of the second material");
  if (same_v(w_a, w_b)) {
    degenerate("the two materials have equal V, " + rounded(v_a) + " and " + rounded(v_b) +
               ": no powers of theirs cancel their colour; take materials of different V");
  }
  return {total * (w_b / (w_b - w_a)), total * (-w_a / (w_b - w_a))};
}

std::array<Power, 2> contact_achromat(Power total, const Material& a, const Material& b,
                                      const Band& band) {
  return contact_achromat(total, v_number(a, band), v_number(b, band));
}

std::array<Power, 3> contact_apochromat(Power total, const std::array<VAndP, 3>& of) {
  require_finite_nonzero(in_per_mm(total), "the total power");
  const std::array<double, 3> parts = apochromat_parts(of);
  const double sum = parts[0] + parts[1] + parts[2];
  const double strength =
      (std::abs(parts[0]) + std::abs(parts[1]) + std::abs(parts[2])) / std::abs(sum);
  if (!(strength <= collinear_strength)) throw_collinear(of, strength);
  return {total * (parts[0] / sum), total * (parts[1] / sum), total * (parts[2] / sum)};
}

std::array<Power, 3> contact_apochromat(Power total, const Material& a, const Material& b,
                                        const Material& c, const Band& band) {
  return contact_apochromat(total, {v_and_p(a, band), v_and_p(b, band), v_and_p(c, band)});
}

Length lateral_color_spacing(Length focal_length_a, double v_a, Length focal_length_b, double v_b) {
  require_finite_nonzero(in_mm(focal_length_a), "the first focal length");
  require_finite_nonzero(in_mm(focal_length_b), "the second focal length");
  const double w_a = dispersive_power(v_a, "V of the first lens");
  const double w_b = dispersive_power(v_b, "V of the second lens");
  if (w_a + w_b == 0.0) {
    degenerate("1/V_a + 1/V_b is 0 (V " + rounded(v_a) + " and " + rounded(v_b) +
               "): the spacing has no effect on the colour");
  }
  const Length spacing = (focal_length_a * w_b + focal_length_b * w_a) / (w_a + w_b);
  if (in_mm(spacing) < 0) {
    degenerate("the spacing without lateral colour would be " + rounded(in_mm(spacing)) +
               " mm; two lenses of positive power always have one above 0");
  }
  return spacing;
}

Dialyte dialyte(Power total, double v_a, double v_b, Length spacing) {
  const double phi = in_per_mm(total);
  const double d = in_mm(spacing);
  require_finite_nonzero(phi, "the total power");
  require_finite_nonzero(v_a, "V of the front element");
  require_finite_nonzero(v_b, "V of the back element");
  if (!(std::isfinite(d) && d >= 0)) {
    throw Error(ErrorCode::bad_value,
                "the spacing is " + number_text(d) + " mm; expected 0 or more");
  }
  if (d == 0.0) {
    const auto [front, back] = contact_achromat(total, v_a, v_b);
    return {front, back, 1.0 / total};
  }
  const double x = dialyte_front_share(d * phi, v_b / v_a);
  const double k = 1.0 - d * phi * x;
  if (!(k > 0.0)) throw_out_of_reach(phi, v_a, v_b, d);
  return {total * x, total * ((1.0 - x) / k), k / total};
}

}  // namespace chromacore
