#pragma once
/// Spectral lines and spectral bands.
#include <chromacore/units.hpp>
#include <span>
#include <string>
#include <string_view>
#include <vector>

namespace chromacore {

/// A line of the spectrum that has a letter (or a usual name).
struct NamedLine {
  std::string_view letter;   ///< "d", "F'"; case matters: "c" is none, "C" is
  Wavelength wavelength{};   ///< in standard air
  std::string_view emitter;  ///< "He", "H", "Hg", ...
};

/// All lines that the library knows by letter, from short to long.
/// Source: ISO 7944, reference wavelengths, and the makers' line lists.
[[nodiscard]] std::span<const NamedLine> named_lines();

/// One place in the spectrum: a line by its letter, or a plain wavelength in standard air.
class Line {
 public:
  Line() = default;  ///< not set
  /// @throws Error  bad_value: not positive and finite
  Line(Wavelength wavelength);  // NOLINT: a wavelength is a place in the spectrum
  /// @throws Error  not_found, with the letters that exist
  Line(const char* letter);       // NOLINT
  Line(std::string_view letter);  // NOLINT

  [[nodiscard]] bool is_set() const { return wavelength_.value() > 0; }
  [[nodiscard]] Wavelength wavelength() const { return wavelength_; }
  [[nodiscard]] const std::string& letter() const { return letter_; }  ///< "" for a plain one
  /// The letter, or else the number with its unit: "d", "0.55 um".
  [[nodiscard]] std::string name() const;

 private:
  Wavelength wavelength_{};
  std::string letter_;
};

/// Two lines, in the order in which their difference is taken: first minus second.
struct LinePair {
  Line first = {};
  Line second = {};
};

/// The part of the spectrum in which a train works: samples, their weights, and the reference.
struct Band {
  Line reference = {};  ///< powers, pupils, heights and the image plane are those here
  std::vector<Line> wavelengths = {};  ///< in the user's order; the ends are shortest and longest
  std::vector<double> weights = {};    ///< one each, of any sum; empty: all equal

  /// @throws Error  as `check` does
  [[nodiscard]] static Band of_lines(std::vector<Line> wavelengths, Line reference);
  /// `samples` wavelengths, 2 to 10000, in equal steps from one end to the other.
  [[nodiscard]] static Band of_range(Line from, Line to, int samples, Line reference);

  [[nodiscard]] const Line& shortest() const;
  [[nodiscard]] const Line& longest() const;
  /// The pair that "colour" without further words is about: shortest and longest.
  [[nodiscard]] LinePair primary_pair() const { return {shortest(), longest()}; }
  [[nodiscard]] std::vector<double> normalized_weights() const;  ///< sum 1
};

/// @throws Error  not_set: no reference, fewer than two wavelengths; bad_value: two wavelengths
///                equal, a weight negative or not finite, all weights 0, their number another;
///                the reference outside the ends is allowed
void check(const Band& band);

}  // namespace chromacore
