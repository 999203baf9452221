#pragma once
// Ciddor's equations of dry and moist air: dispersion, compressibility, density.

namespace chromacore::detail {

// All constants: P. E. Ciddor, Appl. Opt. 35, 1566 (1996), appendices A and B.
inline constexpr double kelvin_offset = 273.15;
inline constexpr double gas_constant = 8.314510;         // J/(mol K), the value of 1996
inline constexpr double molar_mass_of_water = 0.018015;  // kg/mol
inline constexpr double standard_pressure_Pa = 101325;
inline constexpr double standard_co2_ppm = 450;

// A gas as Ciddor's equations count it.
struct MoistAir {
  double celsius = 20;
  double pressure_Pa = standard_pressure_Pa;
  double water_fraction = 0;  // molar
  double co2_ppm = standard_co2_ppm;

  [[nodiscard]] constexpr double kelvin() const { return celsius + kelvin_offset; }
};

// n - 1 of dry air of 15 C, 101325 Pa, 450 ppm CO2. s = 1/(wavelength in vacuum)^2, um^-2
constexpr double dry_refractivity(double s) {
  return 1e-8 * (5792105.0 / (238.0185 - s) + 167917.0 / (57.362 - s));
}

// n - 1 of water vapour of 20 C, 1333 Pa
constexpr double vapour_refractivity(double s) {
  return 1e-8 * 1.022 * (295.235 + s * (2.6422 + s * (-0.032380 + s * 0.004028)));
}

constexpr double compressibility(const MoistAir& g) {
  const double t = g.celsius;
  const double x = g.water_fraction;
  const double p_over_t = g.pressure_Pa / g.kelvin();
  const double first = 1.58123e-6 + t * (-2.9331e-8 + t * 1.1043e-10) +
                       (5.707e-6 - 2.051e-8 * t) * x + (1.9898e-4 - 2.376e-6 * t) * x * x;
  return 1 - p_over_t * first + p_over_t * p_over_t * (1.83e-11 - 0.765e-8 * x * x);
}

// mol/m^3
constexpr double amount_density(const MoistAir& g) {
  return g.pressure_Pa / (compressibility(g) * gas_constant * g.kelvin());
}

constexpr double molar_mass_of_dry_air(double co2_ppm) {
  return 1e-3 * (28.9635 + 12.011e-6 * (co2_ppm - 400));
}

// kg/m^3
constexpr double air_density(const MoistAir& g) {
  return amount_density(g) * molar_mass_of_dry_air(g.co2_ppm) * (1 - g.water_fraction);
}
constexpr double vapour_density(const MoistAir& g) {
  return amount_density(g) * molar_mass_of_water * g.water_fraction;
}

inline constexpr double reference_vapour_density =
    vapour_density({.celsius = 20, .pressure_Pa = 1333, .water_fraction = 1, .co2_ppm = 0});
constexpr double dry_air_density_15_C(double co2_ppm) {
  return air_density({.celsius = 15,
                      .pressure_Pa = standard_pressure_Pa,
                      .water_fraction = 0,
                      .co2_ppm = co2_ppm});
}

// n - 1 of a gas, by the parts that air and vapour have in its density.
constexpr double refractivity(double s, const MoistAir& g) {
  const double co2_factor = 1 + 0.534e-6 * (g.co2_ppm - standard_co2_ppm);
  const double dry = air_density(g) / dry_air_density_15_C(g.co2_ppm);
  double result = dry * co2_factor * dry_refractivity(s);
  if (g.water_fraction > 0)
    result += vapour_density(g) / reference_vapour_density * vapour_refractivity(s);
  return result;
}

// Standard air is at 20 C, the formula's at 15 C; both dry and of the same CO2.
inline constexpr double standard_over_15_C =
    air_density(MoistAir{}) / dry_air_density_15_C(standard_co2_ppm);

}  // namespace chromacore::detail
