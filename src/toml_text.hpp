#pragma once
// TOML out: values as text, and a table whose equals signs stand under one another.
#include <chromacore/band.hpp>
#include <cmath>
#include <string>
#include <string_view>
#include <utility>
#include <vector>

#include "text.hpp"

namespace chromacore::detail {

// Shortest text that reads back to the same number, a float where TOML's integers would overflow.
[[nodiscard]] std::string toml_number(double value);
// In quotes.
[[nodiscard]] std::string toml_string(std::string_view text);
// The line's letter in quotes, or its wavelength in um.
[[nodiscard]] std::string toml_line(const Line& line);
// [a, b, c] of values that are text already.
[[nodiscard]] std::string toml_list(const std::vector<std::string>& values);
[[nodiscard]] std::string toml_numbers(const std::vector<double>& values);
[[nodiscard]] std::string toml_strings(const std::vector<std::string>& values);

// The shortest decimal x with forward(x) == value; `guess` is near it. Where no double gives
// `value` to the last bit: nothing.
template <class Forward>
std::string number_that_becomes(double value, double guess, Forward forward);

class TomlTable {
 public:
  // `header`: "[band]", "[[element]]", or "" for what stands before the first table.
  explicit TomlTable(std::string header) : header_(std::move(header)) {}

  void add(std::string key, std::string value, std::string comment = "") {
    rows_.push_back({std::move(key), std::move(value), std::move(comment)});
  }
  void add(std::string key, double value) { add(std::move(key), toml_number(value)); }

  // Ends with an empty line.
  [[nodiscard]] std::string text() const;

 private:
  struct Row {
    std::string key = {};
    std::string value = {};
    std::string comment = {};
  };
  std::string header_;
  std::vector<Row> rows_ = {};
};

// ---- implementation of the template ----

template <class Forward>
std::string number_that_becomes(double value, double guess, Forward forward) {
  const auto becomes = [&](const std::string& text) {
    return forward(*parse_number(text)) == value;
  };
  for (int digits = 1; digits <= 17; ++digits) {
    std::string text = number_text(guess, digits);
    if (becomes(text)) return toml_number(*parse_number(text));
  }
  for (const double towards : {-HUGE_VAL, HUGE_VAL}) {
    std::string text = number_text(std::nextafter(guess, towards));
    if (becomes(text)) return toml_number(*parse_number(text));
  }
  return "";
}

}  // namespace chromacore::detail
