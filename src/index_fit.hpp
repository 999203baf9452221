#pragma once
// A dispersion formula through measured indices, by least squares.
#include <cstddef>
#include <span>
#include <vector>

namespace chromacore::detail {

struct IndexFit {
  std::vector<double> coefficients = {};  // of DispersionForm::polynomial
  std::size_t terms = 0;
  double largest_residual = 0;  // of an index
};

inline constexpr std::size_t fewest_indices_to_fit = 5;

//   n^2 = a0 + (a1 x^2 + a2 x^4) + b1 x^-2 + b2 x^-4 + b3 x^-6 + b4 x^-8
//
// with so many of the rising terms (0 to 2) and of the falling ones (1 to 4) as make the variance
// of the residual, which counts the terms, least. The form is that of several glass makers' lists
// (HOYA, HIKARI, SUMITA). Wavelengths in um, all different.
// @throws Error  bad_value: fewer than five indices, or all of them too close together
[[nodiscard]] IndexFit fit_index(std::span<const double> wavelengths_um,
                                 std::span<const double> indices);

}  // namespace chromacore::detail
