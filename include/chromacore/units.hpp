#pragma once
/// Quantities with units: what every public call takes and returns (Boost.Units).
///
/// A length in mm, a wavelength in um and a power in 1/mm are different types; none converts into
/// another unasked, so that `Length d = 5.0 * um` and `d + w` do not compile. Inside the library
/// are plain scalars in mm, 1/mm, um, radians, degrees Celsius and Pa.
#include <boost/units/absolute.hpp>
#include <boost/units/make_scaled_unit.hpp>
#include <boost/units/quantity.hpp>
#include <boost/units/systems/angle/degrees.hpp>
#include <boost/units/systems/si/length.hpp>
#include <boost/units/systems/si/pressure.hpp>
#include <boost/units/systems/temperature/celsius.hpp>

namespace chromacore {

namespace detail {
template <long Exponent>
using MetreScaled = typename boost::units::make_scaled_unit<
    boost::units::si::length,
    boost::units::scale<10, boost::units::static_rational<Exponent>>>::type;
using Millimetre = MetreScaled<-3>;
using Micrometre = MetreScaled<-6>;
using Nanometre = MetreScaled<-9>;
using PerMillimetre =
    boost::units::power_typeof_helper<Millimetre, boost::units::static_rational<-1>>::type;
using PerMetre = boost::units::power_typeof_helper<boost::units::si::length,
                                                   boost::units::static_rational<-1>>::type;
using Celsius = boost::units::absolute<boost::units::celsius::temperature>;
}  // namespace detail

using Length = boost::units::quantity<detail::Millimetre>;      ///< mm, along +z or upwards
using Wavelength = boost::units::quantity<detail::Micrometre>;  ///< um, in standard air
using Power = boost::units::quantity<detail::PerMillimetre>;    ///< 1/mm, positive converges
using Curvature = Power;  ///< 1/mm, 1/radius; positive when the centre lies to the right
using Angle = boost::units::quantity<boost::units::degree::plane_angle>;  ///< degrees
using Temperature =
    boost::units::quantity<detail::Celsius>;  ///< degrees Celsius, a point on the scale
using Pressure = boost::units::quantity<boost::units::si::pressure>;  ///< Pa

namespace units {
inline constexpr detail::Millimetre mm;
inline constexpr detail::Micrometre um;
inline constexpr detail::Nanometre nm;  ///< `Wavelength(587.6 * nm)`: asked for by name
inline constexpr detail::PerMillimetre per_mm;
inline constexpr detail::PerMetre per_m;  ///< a dioptre; `Power(2.0 * per_m)`
inline constexpr boost::units::degree::plane_angle deg;
inline constexpr detail::Celsius celsius;
inline constexpr boost::units::si::pressure Pa;
}  // namespace units

[[nodiscard]] constexpr double in_mm(Length v) { return v.value(); }
[[nodiscard]] constexpr double in_um(Wavelength v) { return v.value(); }
[[nodiscard]] constexpr double in_per_mm(Power v) { return v.value(); }
[[nodiscard]] constexpr double in_deg(Angle v) { return v.value(); }
[[nodiscard]] constexpr double in_rad(Angle v) { return v.value() * 0.017453292519943295769; }
[[nodiscard]] constexpr double in_celsius(Temperature v) { return v.value(); }
[[nodiscard]] constexpr double in_Pa(Pressure v) { return v.value(); }

}  // namespace chromacore
