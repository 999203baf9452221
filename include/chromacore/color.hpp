#pragma once
/// Colour: each element's Seidel sums, exact paraxial curves, requirements and what is spent.
///
///   per surface   C_I = A y D(dn/n),  C_II = Abar y D(dn/n),  A = n(u + y c),
///                 dn = n_first - n_second, D() after minus before refraction
///   thin in air   C_I = y^2 phi/V,    C_II = y ybar phi/V
///   as lengths    axial = -C_I/(n'u'^2), lateral = C_II/(n'u')
///
/// Source: W. T. Welford, Aberrations of Optical Systems (1986), ch. 10; signs as above.
#include <chromacore/paraxial.hpp>
#include <chromacore/train.hpp>
#include <optional>
#include <string>
#include <string_view>
#include <utility>
#include <vector>

namespace chromacore {

/// What can be asked of a train. The unit is in the name that `to_string` gives.
enum class Quantity {
  focal_length,
  back_focal_distance,
  image_distance,
  track_length,
  magnification,
  f_number,
  petzval,
  strength,  ///< sum |phi_i| / |phi|
  entrance_pupil_position,
  exit_pupil_position,
  axial_color,        ///< image distance(first) - image distance(second), exact
  lateral_color,      ///< chief-ray height in the reference image plane, first - second, exact
  secondary_axial,    ///< focus(ref) - mean(focus(first), focus(second))
  secondary_lateral,  ///< likewise for the chief-ray height
  axial_sum,          ///< C_I, of one element or of all
  lateral_sum,        ///< C_II, of one element or of all
};
/// With its unit, as in files: "focal_length_mm", "petzval_per_mm", "strength".
[[nodiscard]] std::string_view to_string(Quantity quantity);
/// @throws Error  not_found, with the nearest
[[nodiscard]] Quantity quantity(std::string_view name);

/// One requirement. Its residual, without unit, is (value - target)/budget, or the overshoot over
/// the budget for `at_least` and `at_most`. Values are in the quantity's own unit (mm, 1/mm, none).
struct Requirement {
  Quantity quantity = Quantity::focal_length;
  std::optional<LinePair> between = {};  ///< of colour quantities; absent: the primary pair
  int element = 0;                       ///< of `axial_sum`, `lateral_sum`; 0: the whole train
  std::optional<double> target = {};     ///< this, or one or both of the next two
  std::optional<double> at_least = {};
  std::optional<double> at_most = {};
  /// Absent: 0.1 % of the focal length's target or limit; +-2 lambda N^2 for axial colour (a
  /// quarter wave); the pixel, or else the Airy radius 1.22 lambda N, for lateral colour; N the
  /// working f-number and lambda the reference. Other quantities need one.
  std::optional<double> budget = {};
};

/// Requirements by name, in quantities with units.
namespace require {
[[nodiscard]] Requirement focal_length(Length target, std::optional<Length> budget = {});
[[nodiscard]] Requirement back_focal_distance(Length target, Length budget);
[[nodiscard]] Requirement image_distance(Length target, Length budget);
[[nodiscard]] Requirement track_length_at_most(Length limit, Length budget);
[[nodiscard]] Requirement magnification(double target, double budget);
[[nodiscard]] Requirement petzval_at_most(Power limit, Power budget);
[[nodiscard]] Requirement strength_at_most(double limit, double budget);
[[nodiscard]] Requirement axial_color(Line first, Line second, Length target = {},
                                      std::optional<Length> budget = {});
[[nodiscard]] Requirement lateral_color(Line first, Line second, Length target = {},
                                        std::optional<Length> budget = {});
[[nodiscard]] Requirement secondary_axial(Length target = {}, std::optional<Length> budget = {});
[[nodiscard]] Requirement secondary_lateral(Length target = {}, std::optional<Length> budget = {});
}  // namespace require

/// What became of a requirement. `spent` is |residual|: above 1 it is not met.
struct RequirementResult {
  Requirement requirement = {};  ///< its budget filled in
  double value = 0;
  double residual = 0;
  [[nodiscard]] double spent() const { return residual < 0 ? -residual : residual; }
  [[nodiscard]] bool met() const { return spent() <= 1.0; }
};

/// One element's share of the colour, over the primary pair, at the reference wavelength.
struct ElementColor {
  int element = 0;
  std::string material = {};  ///< "" for a diffractive surface
  Power power{};              ///< of the whole element, in the surroundings
  std::optional<double> v = {};
  std::optional<double> p_ref_long = {};
  std::optional<double> abbe_number = {};
  Length marginal_height{};  ///< at the front surface
  Length chief_height{};
  Length axial_sum{};    ///< C_I
  Length lateral_sum{};  ///< C_II
};

/// One surface of a thick element.
struct SurfaceColor {
  int element = 0;
  Curvature curvature{};
  Length marginal_height{};
  Length chief_height{};
  Length axial_sum{};
  Length lateral_sum{};
};

struct ColorTotals {
  Length axial_color{};    ///< image distance(short) - image distance(long), exact
  Length lateral_color{};  ///< chief-ray height(short) - that(long) in the reference image plane
  Length axial_sum{};      ///< C_I over the primary pair
  Length lateral_sum{};    ///< C_II
  Length secondary_axial_sum{};    ///< C_I over (ref, long)
  Length secondary_lateral_sum{};  ///< C_II over (ref, long)
  Length axial_color_from_sums{};
  Length lateral_color_from_sums{};
  Length secondary_axial{};    ///< focus(ref) - mean(focus(short), focus(long))
  Length secondary_lateral{};  ///< likewise for the chief-ray height
  Length rms_focus{};          ///< weighted, about best focus
};

/// Exact paraxial curves at the band's wavelengths, in the band's order.
struct Curves {
  std::vector<Line> wavelengths = {};
  std::vector<Length> focus_difference = {};    ///< image distance - that at the reference
  std::vector<Length> lateral_difference = {};  ///< chief-ray height in the reference image plane
  std::vector<Length> focal_length = {};
};

/// The whole account of a train. `why` gives the reason for each value that is absent, by its key
/// in JSON ("exit_pupil_position_mm").
struct Analysis : FirstOrder, ColorTotals {
  std::vector<ElementColor> elements = {};
  std::vector<SurfaceColor> surfaces = {};
  Curves curves = {};
  std::vector<RequirementResult> requirements = {};
  std::vector<std::string> notes = {};  ///< what had to be assumed, in full sentences
  std::vector<std::pair<std::string, std::string>> why = {};
};

/// @throws Error  as `first_order`; not_set: a requirement without a budget that has no default
[[nodiscard]] Analysis analyze(const Train& train, const std::vector<Requirement>& required = {});

/// The seidel colour sums of one element or of all (element 0), over any pair of lines, for the
/// pairs that `Analysis` does not hold.
struct ColorSums {
  Length axial{};    ///< C_I
  Length lateral{};  ///< C_II
};
[[nodiscard]] ColorSums color_sums(const Train& train, const LinePair& pair, int element = 0);

/// @throws Error  bad_value: no target and no limit, a target and a limit, at_least above at_most,
///                a value that is not finite, a budget that is not positive, an element that the
///                train does not have, `between` or `element` where the quantity has none, one
///                line twice; not_set: a line of `between`
void check(const Requirement& requirement, const Train& train);

}  // namespace chromacore
