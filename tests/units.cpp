#include <doctest/doctest.h>

#include <chromacore/units.hpp>
#include <concepts>
#include <numbers>

#include "close.hpp"

using namespace chromacore;
using namespace chromacore::units;
using chromacore::test::close;

namespace {

template <class A, class B>
concept addable = requires(A a, B b) {
  a + b;
};
template <class A, class B>
concept comparable = requires(A a, B b) {
  a < b;
};
template <class From, class To>
concept becomes = std::convertible_to<From, To>;

// What must compile.
static_assert(addable<Length, Length> && addable<Wavelength, Wavelength>);
static_assert(comparable<Length, Length> && comparable<Temperature, Temperature>);
static_assert(std::same_as<Power, Curvature>);
static_assert(becomes<decltype(5.0 * mm), Length> && becomes<decltype(0.5 * um), Wavelength>);
static_assert(becomes<decltype(20.0 * celsius), Temperature> &&
              becomes<decltype(1.0 * Pa), Pressure>);
static_assert(becomes<decltype(1.0 / (5.0 * mm)), Power>);
static_assert(becomes<decltype((0.1 * per_mm) * (5.0 * mm)), double>);

// What must not: units mixed up, and plain numbers taken for quantities.
static_assert(!addable<Length, Power> && !addable<Length, Wavelength> && !addable<Length, Angle>);
static_assert(!addable<Length, double>);  // two points of a scale: Boost stops the build itself
static_assert(!comparable<Length, Wavelength> && !comparable<Length, double>);
static_assert(!becomes<double, Length> && !becomes<double, Wavelength> && !becomes<double, Power>);
static_assert(!becomes<double, Angle> && !becomes<double, Temperature>);
static_assert(!becomes<double, Pressure> && !becomes<Length, double>);
static_assert(!becomes<decltype(5.0 * um), Length> && !becomes<decltype(5.0 * mm), Wavelength>);
static_assert(!becomes<decltype(500.0 * nm), Wavelength>);  // only when asked for by name
static_assert(!becomes<decltype(2.0 * per_m), Power>);
static_assert(!becomes<Length, Power> && !becomes<Angle, double>);

// All of it is known while compiling.
static_assert(in_mm(5.0 * mm) == 5.0 && in_um(0.55 * um) == 0.55 && in_per_mm(0.1 * per_mm) == 0.1);
static_assert(in_deg(2.0 * deg) == 2.0 && in_celsius(-40.0 * celsius) == -40.0);
static_assert(in_Pa(101325.0 * Pa) == 101325.0);

}  // namespace

TEST_CASE("units: another unit of the same quantity converts where it is named") {
  CHECK(close(in_um(Wavelength(587.5618 * nm)), 0.5875618, {.rel = 1e-15}));
  CHECK(close(in_mm(Length(587.5618 * um)), 0.5875618, {.rel = 1e-15}));
  CHECK(close(in_um(Wavelength(0.0005 * mm)), 0.5, {.rel = 1e-15}));
  CHECK(close(in_per_mm(Power(2.0 * per_m)), 0.002, {.rel = 1e-15}));
}

TEST_CASE("units: an angle is kept in degrees and read in either way") {
  CHECK(in_deg(90.0 * deg) == 90.0);
  CHECK(close(in_rad(90.0 * deg), std::numbers::pi / 2, {.rel = 1e-15}));
}
