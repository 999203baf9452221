#pragma once
/// Air: its refractive index, and the way between wavelengths in standard air and in vacuum.
///
/// "Standard air" is dry, 20 C, 101325 Pa, 450 ppm CO2. A wavelength in this library is that in
/// standard air and names the light's frequency, whatever the surroundings of the train.
#include <chromacore/units.hpp>
#include <string>
#include <vector>

namespace chromacore {

/// The gas around a train: air of a temperature, pressure, humidity and CO2 content.
struct Surroundings {
  Temperature temperature = 20.0 * units::celsius;
  Pressure pressure = 101325.0 * units::Pa;  ///< 0 is vacuum
  double humidity = 0.0;                     ///< relative, 0 to 1
  double co2_ppm = 450.0;                    ///< umol/mol
};

/// Air of the standard atmosphere at a height above sea level: its temperature and pressure, dry.
/// @param altitude  geopotential height, -2 to 20 km
/// @throws Error    out_of_range
/// Source: ISO 2533:1975, standard atmosphere (troposphere and lower stratosphere).
[[nodiscard]] Surroundings standard_atmosphere(Length altitude);

/// Refractive index of air, relative to vacuum; no unit.
///
/// The full set of equations: dispersion of dry air and of water vapour, CO2, density with
/// compressibility, saturation pressure with enhancement factor.
/// @param wavelength  in standard air
/// @throws Error      bad_value: as `check` does; a wavelength that is not positive and finite;
///                    more vapour than the pressure allows. out_of_range: below 0.135 um (a pole
///                    of the formula is at 0.132 um); a state so far off that the compressibility
///                    leaves 0.5 to 1.5
/// Source: P. E. Ciddor, Appl. Opt. 35, 1566-1573 (1996).
[[nodiscard]] double air_index(Wavelength wavelength, const Surroundings& air = {});

/// A note for each limit of Ciddor's equations that the state or the wavelengths are beyond
/// (0.3 to 1.69 um, -40 to 100 C, 80 to 120 kPa; vacuum is exact); empty inside them.
[[nodiscard]] std::vector<std::string> air_notes(const Surroundings& air, Wavelength shortest,
                                                 Wavelength longest);

/// Wavelength in vacuum of light whose wavelength in standard air is given, and back.
/// @throws Error  bad_value: not positive and finite; out_of_range: below 0.135 um
[[nodiscard]] Wavelength vacuum_wavelength(Wavelength in_standard_air);
[[nodiscard]] Wavelength standard_air_wavelength(Wavelength in_vacuum);

/// @throws Error  bad_value: a temperature at or below absolute zero, a negative pressure, humidity
///                outside 0 to 1, CO2 outside 0 to 1e6 ppm, a value that is not finite
void check(const Surroundings& air);

}  // namespace chromacore
