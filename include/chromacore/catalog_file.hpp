#pragma once
/// The user's own materials from a file, TOML or CSV.
///
/// TOML: `format = 1`, then `[[material]]` tables as in a train. Each has a `name` and one of
///   - `form`, `coefficients`, `range_um`: a formula (names as in `DispersionForm`);
///   - `lines_um`, `indices`: n^2 = a polynomial in 1/x^2 through all of them; with
///     `form = "table"` a cubic spline; with `fit = true` a least-squares formula;
///   - `n_ref`, `v` and optionally `p_ref_long`, at three `lines_um` (left out: F, d, C):
///     approximate, and a note says so;
/// and, where they are known, `maker`, `code`, `status`, `source`, `axis`, `cautions`, `notes`,
/// `temperature_C`, `index_relative_to`, `wavelength_in` ("air", "vacuum"), `thermal` (D0, D1, D2,
/// E0, E1, lambda_TK), or `dn_dt_per_K` and `dn_dt_relative_to`, `expansion_per_K`,
/// `density_kg_m3`.
///
/// CSV: a header line, commas, decimal points. A line for each material (`name`, `form`, `c0`,
/// `c1`, ..., `shortest_um`, `longest_um`, or `name`, `n_ref`, `v`, `p_ref_long`, and the keys
/// above), or a line for each index (`name`, `line_um`, `index`): up to five indices of one name
/// are gone through, more are fitted.
#include <chromacore/material.hpp>
#include <string>
#include <string_view>
#include <vector>

namespace chromacore {

/// @throws Error  file_access, too_large (4 MiB), and as `parse_catalog`
[[nodiscard]] std::vector<Material> read_catalog_file(const std::string& path);

/// The same from text. `file_name` is for messages; one that ends in ".csv" or ".toml" says which
/// of the two it is, else the text does.
/// @throws Error  bad_syntax, unknown_key, not_set, bad_value, with file, line and column
[[nodiscard]] std::vector<Material> parse_catalog(std::string_view text,
                                                  const std::string& file_name);

}  // namespace chromacore
