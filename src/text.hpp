#pragma once
// Text helpers that messages, files and tables share. Locale independent throughout.
#include <cstddef>
#include <optional>
#include <span>
#include <string>
#include <string_view>
#include <vector>

namespace chromacore::detail {

// The shortest text that reads back to the same double: "0.1", "1e-07", "inf".
[[nodiscard]] std::string number_text(double value);
// The same, rounded to so many significant digits, without trailing zeros: "1.517", "525.64".
[[nodiscard]] std::string number_text(double value, int significant_digits);

// The whole text as a number ("1.5", "-2e3", "inf", "nan"); nothing where it is none, as "1,5".
[[nodiscard]] std::optional<double> parse_number(std::string_view text);

// Up to `most` of `choices`, those fewest edits away from `word` (case counts little), best first;
// none that shares nothing with it.
[[nodiscard]] std::vector<std::string> nearest(std::string_view word,
                                               std::span<const std::string_view> choices,
                                               std::size_t most = 3);

[[nodiscard]] std::string joined(std::span<const std::string> parts,
                                 std::string_view between = ", ");
[[nodiscard]] std::string lower_case(std::string_view text);  // ASCII
[[nodiscard]] std::string_view trimmed(std::string_view text);

}  // namespace chromacore::detail
