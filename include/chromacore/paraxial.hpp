#pragma once
/// The paraxial trace and what follows from it at one wavelength.
///
/// Transfer y' = y + t u; refraction n'u' = n u - y phi; bars mark the chief ray. n is relative to
/// the surroundings, so that outside the elements n = 1.
#include <chromacore/train.hpp>
#include <chromacore/units.hpp>
#include <cstddef>
#include <limits>
#include <optional>
#include <span>
#include <vector>

namespace chromacore {

/// First-order quantities. Positions count along +z from the first vertex (entrance pupil) or the
/// last one (back focus, image, exit pupil).
struct FirstOrder {
  Length focal_length{};         ///< infinite: afocal, which needs an object at a distance
  Length back_focal_distance{};  ///< infinite likewise
  Length image_distance{};
  std::optional<double> f_number = {};  ///< |focal length|/entrance pupil diameter; absent with it
  double working_f_number = 0;          ///< 1/(2 n'|u'|)
  double magnification = 0;             ///< 0 for an object at infinity
  std::optional<Length> entrance_pupil_position = {};  ///< absent: at infinity (telecentric)
  std::optional<Length> entrance_pupil_diameter = {};
  std::optional<Length> exit_pupil_position = {};
  Length lagrange_invariant{};  ///< H = n (u ybar - ubar y)
  Power petzval{};              ///< sum phi/(n n'), positive for a positive lens
  Length track_length{};        ///< first vertex to image
};

/// At the band's reference wavelength.
/// @throws Error  as `check(train)`; degenerate: no focus (zero power and the object at infinity,
///                image at infinity), the stop imaged onto the object, both pupil and object at
///                infinity, an aperture or field that the train's pupil or power can't have;
///                out_of_range
[[nodiscard]] FirstOrder first_order(const Train& train);

/// Both rays at one vertex, heights there and slopes behind it.
struct TracePoint {
  int element = 0;
  Side side = Side::front;  ///< elements without thickness have one point, the front
  Length marginal_height{};
  double marginal_slope = 0;  ///< u', tangent of the angle to the axis, behind the vertex
  Length chief_height{};
  double chief_slope = 0;
};

/// Marginal and chief ray of the train's aperture and field, traced at one wavelength: they start
/// from the object points that the reference wavelength fixes.
/// @throws Error  as `first_order`
[[nodiscard]] std::vector<TracePoint> trace(const Train& train, const Line& wavelength);

/// Surfaces whose indices the caller has at hand, for many wavelengths at once. K surfaces, W
/// wavelengths.
struct BatchSurfaces {
  std::span<const Curvature> curvatures = {};  ///< K
  std::span<const Length> thicknesses = {};    ///< K - 1, behind each surface but the last
  std::span<const double> indices = {};        ///< (K + 1) rows of W: before, between, behind
  std::size_t wavelengths = 0;                 ///< W
};

/// Two rays at W wavelengths. In: at the first surface, before refraction. Out: behind the last.
struct BatchRays {
  std::span<Length> marginal_height = {};
  std::span<double> marginal_slope = {};
  std::span<Length> chief_height = {};
  std::span<double> chief_slope = {};
};

/// The same trace over all wavelengths together, in the widest vectors that the processor has; the
/// last digits may differ between processors. Allocates nothing.
/// @throws Error  bad_value: spans whose sizes do not fit together
void trace_batch(const BatchSurfaces& surfaces, const BatchRays& rays);

}  // namespace chromacore
