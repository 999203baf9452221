#pragma once
/// A refractive train: elements, gaps, stop, conjugates, aperture and field.
#include <chromacore/air.hpp>
#include <chromacore/band.hpp>
#include <chromacore/material.hpp>
#include <chromacore/units.hpp>
#include <limits>
#include <optional>
#include <span>
#include <string>
#include <variant>
#include <vector>

namespace chromacore {

/// Curvature of a surface from its radius; an infinite radius is flat.
/// @param r  positive when the centre lies to the right
/// @throws Error  bad_value: 0 or not a number
[[nodiscard]] Curvature radius(Length r);
inline constexpr Curvature flat{};
inline constexpr Length infinity = std::numeric_limits<double>::infinity() * units::mm;

/// An element without thickness; phi(lambda) = phi (n(lambda) - 1)/(n_ref - 1).
struct Thin {
  Material material = {};
  Power power{};  ///< at the reference wavelength
  Length gap_after{};
};

/// An element with two spherical surfaces and a centre thickness.
struct Thick {
  Material material = {};
  Curvature front{};
  Curvature back{};
  Length thickness{};
  std::optional<Length> clear_diameter = {};
  Length gap_after{};
  bool cemented = false;  ///< to the next element: gap 0 and equal curvatures are checked, and the
                          ///< joint moves as one in a solve
};

/// A diffractive surface without thickness; phi(lambda) = phi lambda/lambda_ref, wavelengths in the
/// surroundings. Its V = lambda_ref/(lambda_short - lambda_long) is negative.
struct Diffractive {
  Power power{};  ///< at the reference wavelength
  Length gap_after{};
};

using Element = std::variant<Thin, Thick, Diffractive>;

[[nodiscard]] Length gap_after(const Element& element);
/// Centre thickness; 0 for elements without one.
[[nodiscard]] Length thickness(const Element& element);

/// The aperture: one of these.
struct EntrancePupilDiameter {
  Length value{};
};
struct FNumber {
  double value = 0;  ///< |focal length| over entrance pupil diameter
};
struct ObjectNa {
  double value = 0;  ///< n times the paraxial slope of the marginal ray (sine condition)
};
using Aperture = std::variant<std::monostate, EntrancePupilDiameter, FNumber, ObjectNa>;

/// The field: one of these, turned at the reference wavelength into one object point.
struct HalfAngle {
  Angle value{};  ///< its tangent is the chief ray's slope at the entrance pupil
};
struct ObjectHeight {
  Length value{};
};
struct ImageHeight {
  Length value{};  ///< signed, in the reference image plane
};
using Field = std::variant<std::monostate, HalfAngle, ObjectHeight, ImageHeight>;

enum class Side { front, back };

/// The aperture stop: at a vertex, or floating in the gap beside it. At every wavelength the chief
/// ray passes its centre.
struct Stop {
  int element = 1;          ///< counted from 1
  Side side = Side::front;  ///< the vertex of that element
  Length offset{};          ///< from that vertex, positive to the right, into the gap only
};

/// One row of a surface list, as engineers keep them.
struct Surface {
  Curvature curvature{};
  Length thickness_after{};
  Material material_after = {};  ///< not set: the surroundings
  std::optional<Length> clear_diameter = {};
  bool is_stop = false;
};

struct Train {
  std::string name = {};
  Band band = {};
  Aperture aperture = {};
  Field field = {};
  Length object_distance = infinity;  ///< ahead of the first vertex, positive
  Stop stop = {};
  std::optional<Length> pixel = {};               ///< of the detector; the lateral budget
  std::optional<Surroundings> surroundings = {};  ///< absent: where the sources were measured
  std::vector<Element> elements = {};             ///< the last gap has no effect

  /// Elements and stop from a list of surfaces; band, aperture and field stay unset. Two glasses
  /// behind one another become a cemented joint; a flat between two airs is a plane without effect,
  /// which only the stop may stand on.
  /// @throws Error  bad_value: glass behind the last surface, a curved surface between equal media
  [[nodiscard]] static Train from_surfaces(std::span<const Surface> surfaces);
};

/// Everything about a train that can be said before tracing it.
/// @throws Error  not_set: no element, no band, no aperture, no field, no material; bad_value: a
///                value that is not finite, a negative gap or thickness, a joint marked cemented
///                with a gap or unequal curvatures, a stop past the end, inside glass or past a
///                neighbour. The element is in the error's place.
void check(const Train& train);

}  // namespace chromacore
