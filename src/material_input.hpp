#pragma once
// What the readers of a user's own materials share, whether the text is TOML or CSV.
#include <chromacore/material.hpp>
#include <optional>
#include <string>
#include <string_view>
#include <vector>

namespace chromacore::detail {

// Indices at lines, as a person lists them.
struct ListedIndices {
  std::vector<Line> lines = {};
  std::vector<double> indices = {};
};

// Each sets form, coefficients and range of `data`, and adds a note where the result is
// approximate.
// @throws Error  bad_value, without a place

// Through all lines exactly (`form` through_lines), or a spline (`form` table).
void take_listed(MaterialData& data, const ListedIndices& listed, DispersionForm form);
// By least squares.
void take_fitted(MaterialData& data, const ListedIndices& listed);

// n, V and P(ref, long) at three lines: short, reference, long, in any order. Without P it is that
// of n = A + B/x^2.
struct NVP {
  std::vector<Line> lines = {};  // empty: F, d, C
  double n_ref = 0;
  double v = 0;
  std::optional<double> p_ref_long = {};
};
void take_n_v_p(MaterialData& data, const NVP& given);

// Words of the file; bad_value with those that exist.
[[nodiscard]] Status status_of(std::string_view word);
[[nodiscard]] Medium medium_of(std::string_view word);
void check_code(std::string_view code);  // six digits

}  // namespace chromacore::detail
