#pragma once
/// Colour correction in closed form, for thin elements: starting points, and answers to "why not".
///
/// Each call throws Error(degenerate) where no such train exists, and names the number that shows
/// it.
#include <array>
#include <chromacore/band.hpp>
#include <chromacore/material.hpp>
#include <chromacore/units.hpp>

namespace chromacore {

/// Powers of an achromat of two thin elements in contact: the ends of the band share a focus.
///   phi_a = phi V_a/(V_a - V_b), phi_b = -phi V_b/(V_a - V_b)
/// @throws Error  degenerate: equal V; bad_value: zero power
[[nodiscard]] std::array<Power, 2> contact_achromat(Power total, const Material& a,
                                                    const Material& b, const Band& band);
/// The same from V-numbers alone.
[[nodiscard]] std::array<Power, 2> contact_achromat(Power total, double v_a, double v_b);

/// Powers of three thin elements in contact of which the ends and the reference share a focus:
///   sum phi_i = phi, sum phi_i/V_i = 0, sum phi_i P_i/V_i = 0, P over (ref, long)
/// @throws Error  degenerate: the materials are collinear in the P against V plane; the message has
///                the strength (sum |phi_i|/|phi|) that they would need, which is above 1000
/// Source: R. E. Stephens, J. Opt. Soc. Am. 49, 398 (1959), as an equivalent construction.
[[nodiscard]] std::array<Power, 3> contact_apochromat(Power total, const Material& a,
                                                      const Material& b, const Material& c,
                                                      const Band& band);
struct VAndP {
  double v = 0;
  double p_ref_long = 0;
};
[[nodiscard]] std::array<Power, 3> contact_apochromat(Power total, const std::array<VAndP, 3>& of);

/// Spacing of two separated thin lenses whose focal length, and so the size of the image, is the
/// same at both ends of the band (no lateral colour for a pupil far away).
///   d = (f_a/V_b + f_b/V_a)/(1/V_a + 1/V_b); of one material d = (f_a + f_b)/2
/// @throws Error  degenerate: the spacing would be negative; the message has the number; bad_value:
///                a focal length or a V that is 0 or not a number
[[nodiscard]] Length lateral_color_spacing(Length focal_length_a, double v_a, Length focal_length_b,
                                           double v_b);

/// Two separated thin elements, object at infinity, whose ends of the band share a focus.
///   phi_a = phi V_a k/(V_a k - V_b),  phi_b = -phi V_b/(k (V_a k - V_b)),  k = 1 - d phi_a,
/// k the relative height at b; from phi_a/V_a + k^2 phi_b/V_b = 0 and phi_a + k phi_b = phi. With
/// x = phi_a/phi, r = V_b/V_a, D = d phi: D x^2 - (1 + D - r) x + 1 = 0. Of its two roots that
/// which goes over into the achromat in contact. Positive D and r: reaches up to D = (1 - sqrt
/// r)^2.
struct Dialyte {
  Power front{};
  Power back{};
  Length back_focal_distance{};
};
/// @throws Error  degenerate: equal V in contact, a spacing out of reach (the message says which
///                spacings are in reach); bad_value: zero power, a negative spacing
[[nodiscard]] Dialyte dialyte(Power total, double v_a, double v_b, Length spacing);

}  // namespace chromacore
