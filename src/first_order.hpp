#pragma once
// First-order quantities from the trace, for any scalar type. Outside the elements n = 1, so that w
// is the slope there.
#include <chromacore/error.hpp>
#include <cmath>
#include <cstddef>
#include <limits>
#include <string>

#include "model.hpp"
#include "trace.hpp"

namespace chromacore::detail {

// Below this part of the terms that make it up, a number is rounding only: a pupil is at infinity,
// a power is none.
inline constexpr double kVanishing = 1e-13;

// The train up to the stop's plane, and all of it, at one wavelength.
template <class T>
struct Traced {
  System<T> to_stop;
  System<T> whole;
};

[[noreturn]] void throw_no_focus(const Model& model, double power_per_mm);
[[noreturn]] void throw_image_at_infinity(double object_distance_mm);
[[noreturn]] void throw_stop_on_object();
[[noreturn]] void throw_pupil_at_infinity(const char* asked_for);
[[noreturn]] void throw_no_position(const char* pupil);

// Calls `at_vertex(element, side, power, reduced)` for each vertex in order: its power, and the
// reduced thickness behind it. An element without thickness has its front vertex only.
template <class T, class AtVertex>
constexpr void for_each_vertex(const Model& model, const Layout<T>& layout, std::size_t w,
                               AtVertex&& at_vertex) {
  for (std::size_t e = 0; e < layout.size(); ++e) {
    const ElementLayout<T>& element = layout[e];
    if (model.kind(e) == Kind::thick) {
      const double n = model.index(w, e);
      at_vertex(e, Side::front, surface_power(element.front, 1.0, n), T(element.thickness / n));
      at_vertex(e, Side::back, surface_power(element.back, n, 1.0), element.gap_after);
    } else {
      at_vertex(e, Side::front, T(element.power * model.relative_power(w, e)), element.gap_after);
    }
  }
}

// Both basis rays through the train. The gap behind the last element has no effect.
template <class T>
[[nodiscard]] Traced<T> trace_train(const Model& model, const Layout<T>& layout, std::size_t w) {
  Traced<T> traced;
  System<T>& now = traced.whole;
  const std::size_t stop_element = static_cast<std::size_t>(model.stop().element) - 1;
  const bool stop_in_front = model.stop().side == Side::front;
  const T offset = T(in_mm(model.stop().offset));
  const auto mark_stop = [&] {
    traced.to_stop = now;
    traced.to_stop.transfer_both(offset);
  };
  for_each_vertex(model, layout, w,
                  [&](std::size_t e, Side side, const T& power, const T& reduced) {
                    const bool first_vertex = side == Side::front;
                    const bool last_vertex = side == Side::back || model.kind(e) != Kind::thick;
                    if (e == stop_element && stop_in_front && first_vertex) mark_stop();
                    now.refract_both(power);
                    if (e == stop_element && !stop_in_front && last_vertex) mark_stop();
                    if (!(last_vertex && e + 1 == layout.size())) now.transfer_both(reduced);
                  });
  return traced;
}

// Slope behind the train of the ray from the axial object point that meets the first vertex at
// height 1; v = 1/(object distance).
template <class T>
[[nodiscard]] T image_slope(const System<T>& whole, double v) {
  return whole.from_height.w + whole.from_slope.w * v;
}

// Distance of that object point's image from the last vertex.
template <class T>
[[nodiscard]] T image_distance(const System<T>& whole, double v) {
  return -(whole.from_height.y + whole.from_slope.y * v) / image_slope(whole, v);
}

// Image height over object height; 0 for an object at infinity.
template <class T>
[[nodiscard]] T magnification(const System<T>& whole, double v) {
  return v == 0.0 ? T(0.0) : v / image_slope(whole, v);
}

// The entrance pupil's centre as seen from the object: 1 + p v times `a` of the way to the stop, p
// the pupil's position. It vanishes where the stop is imaged onto the object.
template <class T>
[[nodiscard]] T pupil_term(const System<T>& to_stop, double v) {
  return to_stop.from_height.y + to_stop.from_slope.y * v;
}

// The chief ray at the first vertex. q is the object point: minus its height times v, for an object
// at infinity the slope of its rays. It passes the stop's centre by construction.
template <class T>
[[nodiscard]] Ray<T> chief_ray(const System<T>& to_stop, double v, const T& q) {
  const T scale = q / pupil_term(to_stop, v);
  return {-to_stop.from_slope.y * scale, to_stop.from_height.y * scale};
}

// What the reference wavelength fixes for all others, and its own first-order quantities.
template <class T>
struct Reference {
  Traced<T> traced;
  T focal_length{};
  T image_distance{};
  T object_point{};   // q, see `chief_ray`
  Ray<T> marginal{};  // at the first vertex
  Ray<T> chief{};
  Ray<T> marginal_behind{};  // behind the last vertex
  Ray<T> chief_behind{};
};

// Infinite for a train without power.
template <class T>
[[nodiscard]] T focal_length(const Model& model, const Layout<T>& layout, const System<T>& whole,
                             std::size_t w) {
  double sum = 0;
  for_each_vertex(model, layout, w, [&](std::size_t, Side, const T& power, const T&) {
    sum += std::abs(value_of(power));
  });
  if (!(std::abs(value_of(whole.from_height.w)) > kVanishing * sum)) {
    return T(std::numeric_limits<double>::infinity());
  }
  return T(-1.0) / whole.from_height.w;
}

template <class T>
[[nodiscard]] bool has_power(const Reference<T>& r) {
  return std::isfinite(value_of(r.focal_length));
}

template <class T>
[[nodiscard]] bool pupil_at_infinity(const System<T>& to_stop) {
  return std::abs(value_of(to_stop.from_height.y)) <= kVanishing;
}

// The marginal ray at the first vertex, from whichever aperture the train has.
template <class T>
[[nodiscard]] Ray<T> marginal_ray(const Model& model, const Reference<T>& r) {
  const double v = model.vergence();
  if (const auto* na = std::get_if<ObjectNa>(&model.aperture())) {
    return {T(na->value / v), T(na->value)};
  }
  if (pupil_at_infinity(r.traced.to_stop)) throw_pupil_at_infinity("diameter");
  using std::abs;
  T diameter{};
  if (const auto* given = std::get_if<EntrancePupilDiameter>(&model.aperture())) {
    diameter = T(in_mm(given->value));
  } else {
    if (!has_power(r)) throw_no_focus(model, -value_of(r.traced.whole.from_height.w));
    diameter = abs(r.focal_length) / std::get<FNumber>(model.aperture()).value;
  }
  const T y = diameter * 0.5 * r.traced.to_stop.from_height.y / pupil_term(r.traced.to_stop, v);
  return {y, y * v};
}

// Height of the chief ray of object point q in a plane behind the last vertex.
template <class T>
[[nodiscard]] T chief_height(const Traced<T>& traced, double v, const T& q, const T& plane) {
  Ray<T> chief = traced.whole.apply(chief_ray(traced.to_stop, v, q));
  transfer(chief, plane);
  return chief.y;
}

// q from whichever field the train has.
template <class T>
[[nodiscard]] T object_point(const Model& model, const Reference<T>& r) {
  const double v = model.vergence();
  if (const auto* height = std::get_if<ObjectHeight>(&model.field())) {
    return T(-in_mm(height->value) * v);
  }
  if (const auto* height = std::get_if<ImageHeight>(&model.field())) {
    // Of all rays from the object point; ad - bc = 1 makes it independent of the stop.
    return -in_mm(height->value) * image_slope(r.traced.whole, v);
  }
  if (pupil_at_infinity(r.traced.to_stop)) throw_pupil_at_infinity("field angle");
  const double slope = std::tan(in_rad(std::get<HalfAngle>(model.field()).value));
  return slope * pupil_term(r.traced.to_stop, v) / r.traced.to_stop.from_height.y;
}

template <class T>
[[nodiscard]] Reference<T> reference_of(const Model& model, const Layout<T>& layout) {
  const double v = model.vergence();
  Reference<T> r;
  r.traced = trace_train(model, layout, 0);
  const System<T>& whole = r.traced.whole;
  r.focal_length = focal_length(model, layout, whole, 0);
  if (v == 0.0 && !has_power(r)) throw_no_focus(model, -value_of(whole.from_height.w));
  const double slope = value_of(image_slope(whole, v));
  const double scale =
      std::abs(value_of(whole.from_height.w)) + std::abs(value_of(whole.from_slope.w) * v);
  if (!(std::abs(slope) > kVanishing * scale)) throw_image_at_infinity(1.0 / v);
  if (std::abs(value_of(pupil_term(r.traced.to_stop, v))) <= kVanishing) throw_stop_on_object();
  r.image_distance = image_distance(whole, v);
  r.marginal = marginal_ray(model, r);
  r.object_point = object_point(model, r);
  r.chief = chief_ray(r.traced.to_stop, v, r.object_point);
  r.marginal_behind = whole.apply(r.marginal);
  r.chief_behind = whole.apply(r.chief);
  return r;
}

template <class T>
[[nodiscard]] T entrance_pupil_position(const System<T>& to_stop) {
  if (pupil_at_infinity(to_stop)) throw_no_position("entrance");
  return to_stop.from_slope.y / to_stop.from_height.y;
}

template <class T>
[[nodiscard]] T entrance_pupil_diameter(const Reference<T>& r) {
  using std::abs;
  const T position = entrance_pupil_position(r.traced.to_stop);
  return abs(r.marginal.y + r.marginal.w * position) * 2.0;
}

// The ray that leaves the stop's centre with slope 1, behind the last vertex.
template <class T>
[[nodiscard]] Ray<T> ray_from_stop(const Traced<T>& traced) {
  return traced.whole.apply({-traced.to_stop.from_slope.y, traced.to_stop.from_height.y});
}

// Where a part is 0 but for rounding, its products are no measure of the rest; as for the entrance
// pupil, it is 1.
template <class T>
[[nodiscard]] bool exit_pupil_at_infinity(const Traced<T>& traced) {
  const double first = value_of(traced.whole.from_height.w) * value_of(traced.to_stop.from_slope.y);
  const double second =
      value_of(traced.whole.from_slope.w) * value_of(traced.to_stop.from_height.y);
  return std::abs(second - first) <= kVanishing * (1.0 + std::abs(first) + std::abs(second));
}

template <class T>
[[nodiscard]] T exit_pupil_position(const Traced<T>& traced) {
  if (exit_pupil_at_infinity(traced)) throw_no_position("exit");
  const Ray<T> chief = ray_from_stop(traced);
  return -chief.y / chief.w;
}

// From the first vertex to the last.
template <class T>
[[nodiscard]] T vertex_length(const Layout<T>& layout) {
  T length = layout.back().thickness;
  for (std::size_t e = 0; e + 1 < layout.size(); ++e) {
    length = length + layout[e].thickness + layout[e].gap_after;
  }
  return length;
}

// sum phi/(n n').
template <class T>
[[nodiscard]] T petzval_sum(const Model& model, const Layout<T>& layout) {
  T sum(0.0);
  for (std::size_t e = 0; e < layout.size(); ++e) {
    const double n = model.index(0, e);
    if (model.kind(e) == Kind::thick) {
      sum = sum + (layout[e].front - layout[e].back) * ((n - 1.0) / n);
    } else if (model.kind(e) == Kind::thin) {
      sum = sum + layout[e].power / n;
    }
  }
  return sum;
}

// Power of one element in the surroundings, at the reference wavelength.
template <class T>
[[nodiscard]] T element_power(const Model& model, const Layout<T>& layout, std::size_t e) {
  return model.kind(e) == Kind::thick ? thick_power(layout[e], model.index(0, e)) : layout[e].power;
}

}  // namespace chromacore::detail
