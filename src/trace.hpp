#pragma once
// The paraxial trace for scalars: double, ceres::Jet, long double, multiprecision numbers.
// Lengths in mm, powers and curvatures in 1/mm.

namespace chromacore::detail {

#define CHROMACORE_TRACE_INLINE constexpr
#include "trace.inl"
#undef CHROMACORE_TRACE_INLINE

// The value of a number without its derivatives, for decisions.
template <class T>
[[nodiscard]] constexpr double value_of(const T& x) {
  if constexpr (requires {
                  x.a;
                  x.v;
                }) {
    return static_cast<double>(x.a);
  } else {
    return static_cast<double>(x);
  }
}

// What lies between the first vertex and some plane: y = a y0 + b w0, w = c y0 + d w0. Its columns
// are two traced rays.
template <class T>
struct System {
  Ray<T> from_height{T(1.0), T(0.0)};  // a, c
  Ray<T> from_slope{T(0.0), T(1.0)};   // b, d

  constexpr void refract_both(const T& power) {
    refract(from_height, power);
    refract(from_slope, power);
  }
  constexpr void transfer_both(const T& reduced) {
    transfer(from_height, reduced);
    transfer(from_slope, reduced);
  }
  // A ray behind the system from that before it.
  [[nodiscard]] constexpr Ray<T> apply(const Ray<T>& r) const {
    return {from_height.y * r.y + from_slope.y * r.w, from_height.w * r.y + from_slope.w * r.w};
  }
};

}  // namespace chromacore::detail
