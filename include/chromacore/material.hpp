#pragma once
/// Optical materials: dispersion from the source's own formula, V, P, and the effect of
/// temperature and surroundings.
#include <chromacore/air.hpp>
#include <chromacore/band.hpp>
#include <chromacore/units.hpp>
#include <limits>
#include <memory>
#include <optional>
#include <string>
#include <string_view>
#include <vector>

namespace chromacore {

/// How a source writes its dispersion. x is the wavelength in um; coefficients c0, c1, ... in the
/// order shown; further terms of the same form may follow; missing ones are 0.
enum class DispersionForm {
  sellmeier,            ///< n^2 - 1 = c0 + c1 x^2/(x^2 - c2^2) + c3 x^2/(x^2 - c4^2) + ...
  sellmeier_squared,    ///< n^2 - 1 = c0 + c1 x^2/(x^2 - c2) + c3 x^2/(x^2 - c4) + ...
  polynomial,           ///< n^2 = c0 + c1 x^c2 + c3 x^c4 + ...
  rational_polynomial,  ///< n^2 = c0 + c1 x^c2/(x^2 - c3^c4) + c5 x^c6/(x^2 - c7^c8) + c9 x^c10 +
                        ///< ...
  cauchy,               ///< n = c0 + c1 x^c2 + c3 x^c4 + ... (Conrady: exponents -1 and -3.5)
  herzberger,           ///< n = c0 + c1 L + c2 L^2 + c3 x^2 + c4 x^4 + c5 x^6, L = 1/(x^2 - 0.028)
  through_lines,        ///< c = x0, n0, x1, n1, ...: n^2 = polynomial in 1/x^2 through all of them,
                        ///< 16 at most; one, or equal indices: no dispersion
  table,  ///< c = x0, n0, x1, n1, ...: n^2 by the natural cubic spline in 1/x^2 (second
          ///< derivative 0 at both ends); fewer than four points: as through_lines
};
/// The form's name as it stands in the enumeration, in files too.
[[nodiscard]] std::string_view to_string(DispersionForm form);
/// @throws Error  not_found, with the names that exist
[[nodiscard]] DispersionForm dispersion_form(std::string_view name);

enum class Medium { air, vacuum, unknown };  ///< unknown counts as air, and a note says so
enum class Status { current, on_request, withdrawn, unknown };
[[nodiscard]] std::string_view to_string(Status status);

/// Thermal coefficients of the absolute index ("formula A"), t = T - T0:
///   n_abs(T) - n_abs(T0) = (n^2-1)/(2n) [D0 t + D1 t^2 + D2 t^3 + (E0 t + E1 t^2)/(x^2 - x_TK^2)]
/// Source: H.-J. Hoffmann, W. W. Jochs, G. Westenberger (1990); SCHOTT TIE-19.
struct ThermalCoefficients {
  double d0 = 0, d1 = 0, d2 = 0;  ///< 1/K, 1/K^2, 1/K^3
  double e0 = 0, e1 = 0;          ///< um^2/K, um^2/K^2
  double lambda_tk_um = 0;
};

/// A constant dn/dT as data sheets of crystals and plastics give it.
struct ThermalConstant {
  double dn_dt_per_K = 0;
  Medium relative_to = Medium::unknown;  ///< unknown counts as relative to air
};

/// What a material is made of for this library. Everything but name, form, coefficients and range
/// may be left out; a value that a source does not state is absent, never 0.
struct MaterialData {
  std::string name = {};
  std::string maker = {};  ///< "" where the material has none, as crystals
  std::string code = {};   ///< six digits, (n_d - 1) 1000 and 10 V_d; "" where it has none
  Status status = Status::unknown;
  DispersionForm form = DispersionForm::sellmeier;
  std::vector<double> coefficients = {};
  /// The source's range, in standard air. Left out: the ends of the points of `through_lines` and
  /// `table`, and 0 to infinity for a material without dispersion (one line, equal indices).
  Wavelength shortest{};
  Wavelength longest{};
  Medium index_relative_to = Medium::air;
  Medium wavelength_in = Medium::air;               ///< the formula's x
  Temperature temperature = 20.0 * units::celsius;  ///< T0 of the formula
  std::optional<ThermalCoefficients> thermal = {};
  std::optional<ThermalConstant> thermal_constant = {};
  std::optional<double> expansion_per_K = {};  ///< linear, near room temperature
  std::optional<double> density_kg_m3 = {};
  std::string axis = {};  ///< "ordinary" or "extraordinary" for birefringent entries
  std::vector<std::string> cautions = {};  ///< "toxic", "radioactive", "soluble", ... one line each
  std::vector<std::string> notes = {};  ///< doubts about the source, refused values, approximations
  std::string source = {};              ///< the publication
};

/// A material: a light handle by value, immutable, shared between threads, outliving its catalogue.
class Material {
 public:
  Material() = default;  ///< not set; using it is an error by name
  /// @throws Error  bad_value: no name, a range that is empty, not positive or beyond the points of
  ///                a list; a coefficient that is not finite; an index that is not above 0
  ///                somewhere in the range, or a pole there (of the thermal formula too); equal
  ///                lines
  explicit Material(MaterialData data);

  [[nodiscard]] bool is_set() const { return record_ != nullptr; }
  /// @throws Error  not_set
  [[nodiscard]] const MaterialData& data() const;
  [[nodiscard]] const std::string& name() const { return data().name; }
  [[nodiscard]] const std::string& maker() const { return data().maker; }
  /// "MAKER/NAME", or the plain name where there is no maker.
  [[nodiscard]] std::string full_name() const;

  struct Record;  // the prepared formula; src/material_record.hpp
  [[nodiscard]] const Record& record() const;

 private:
  std::shared_ptr<const Record> record_;
};

enum class Extrapolate { no, yes };

/// Index of refraction from the material's own published formula, at its T0.
/// @param wavelength  in standard air; converted where the source counts in vacuum
/// @return            relative to standard air (an absolute source is divided by air's index)
/// @throws Error      out_of_range: outside the source's range and not told to extrapolate, or the
///                    formula gives none there; bad_value: a wavelength that is not positive and
///                    finite; not_set: an empty handle
[[nodiscard]] double index(const Material& material, Wavelength wavelength,
                           Extrapolate extrapolate = Extrapolate::no);

/// Index at the temperature of the surroundings and relative to them.
///
///   n_abs(T0) = n_rel n_air(T0, 101325 Pa, dry);  n = (n_abs(T0) + dn_abs(T))/n_surroundings
///
/// dn_abs by formula A where the material has it; else by its constant dn/dT (relative to air
/// means: n_rel(T) = n_rel(T0) + (dn/dT) (T - T0) in dry air of T and 101325 Pa); else 0 up to 5 K
/// from T0.
/// @throws Error  as above and as `air_index`; out_of_range: more than 5 K from T0 without dn/dT
[[nodiscard]] double index(const Material& material, Wavelength wavelength,
                           const Surroundings& surroundings,
                           Extrapolate extrapolate = Extrapolate::no);

/// What the second form of `index` had to assume: a constant dn/dT of unknown kind, an index used
/// unchanged within 5 K of T0, an unknown reference medium, formula A beyond -100 to 140 C (its
/// published range). Empty where nothing was assumed.
[[nodiscard]] std::vector<std::string> thermal_notes(const Material& material,
                                                     const Surroundings& surroundings);

/// V = (n_ref - 1)/(n_short - n_long); with F, d, C it is the Abbe number.
/// @return  no unit; infinite where the material has no dispersion over the band
/// @throws Error  out_of_range
[[nodiscard]] double v_number(const Material& material, const Band& band);
/// V over any three lines: (n_ref - 1)/(n_first - n_second).
[[nodiscard]] double v_number(const Material& material, const Line& reference,
                              const LinePair& pair);
/// (n_d - 1)/(n_F - n_C).
[[nodiscard]] double abbe_number(const Material& material);

/// P(first, second) = (n_first - n_second)/(n_short - n_long) of the band; NaN without dispersion.
[[nodiscard]] double partial_dispersion(const Material& material, const LinePair& pair,
                                        const Band& band);

/// P(g,F) minus the normal line 0.6438 - 0.001682 V_d (through K7 and F2 as published; other makers
/// draw other lines, so compare within one maker).
/// Source of the line: P. Hartmann, Optical Glass, SPIE Press (2014), eq. 3.10.
[[nodiscard]] double deviation_from_normal_line(const Material& material);

/// Whether the source's range holds every wavelength of the band, its reference included.
[[nodiscard]] bool covers(const Material& material, const Band& band);

}  // namespace chromacore
