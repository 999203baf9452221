#include "text.hpp"

#include <algorithm>
#include <array>
#include <charconv>
#include <cmath>
#include <system_error>
#include <utility>

namespace chromacore::detail {
namespace {

constexpr char lower(char c) { return c >= 'A' && c <= 'Z' ? static_cast<char>(c - 'A' + 'a') : c; }

constexpr bool is_separator(char c) { return c == '-' || c == '_' || c == ' ' || c == '/'; }

// What edits cost: a wrong letter and one too many count in full, one left out half ("BK7" for
// "N-BK7"), separators and case hardly.
constexpr int full_cost = 10;
constexpr int omission_cost = 5;
constexpr int separator_cost = 2;
constexpr int case_cost = 1;
constexpr std::size_t longest_word = 64;

int add_cost(char c) { return is_separator(c) ? separator_cost : omission_cost; }
int drop_cost(char c) { return is_separator(c) ? separator_cost : full_cost; }
int swap_cost(char a, char b) {
  if (a == b) return 0;
  return lower(a) == lower(b) ? case_cost : full_cost;
}

// The cheapest way of edits from `word` to `choice`, row by row.
int edit_cost(std::string_view word, std::string_view choice) {
  std::vector<int> row(choice.size() + 1, 0);
  for (std::size_t j = 0; j < choice.size(); ++j) row[j + 1] = row[j] + add_cost(choice[j]);
  for (const char c : word) {
    int diagonal = std::exchange(row[0], row[0] + drop_cost(c));
    for (std::size_t j = 0; j < choice.size(); ++j) {
      const int cheapest = std::min({row[j + 1] + drop_cost(c), row[j] + add_cost(choice[j]),
                                     diagonal + swap_cost(c, choice[j])});
      diagonal = std::exchange(row[j + 1], cheapest);
    }
  }
  return row.back();
}

// What the edits cost between two words of these lengths that have nothing in common.
int cost_of_strangers(std::size_t word, std::size_t choice) {
  const std::size_t common = std::min(word, choice);
  return static_cast<int>(full_cost * word + omission_cost * (choice - common));
}

}  // namespace

std::string number_text(double value) {
  if (std::isnan(value)) return "nan";
  std::array<char, 32> buffer{};
  const auto end = std::to_chars(buffer.data(), buffer.data() + buffer.size(), value).ptr;
  return {buffer.data(), end};
}

std::string number_text(double value, int significant_digits) {
  if (std::isnan(value)) return "nan";
  std::array<char, 64> buffer{};
  const int digits = std::clamp(significant_digits, 1, 17);
  const auto end = std::to_chars(buffer.data(), buffer.data() + buffer.size(), value,
                                 std::chars_format::general, digits)
                       .ptr;
  return {buffer.data(), end};
}

std::optional<double> parse_number(std::string_view text) {
  if (text.starts_with('+')) {
    text.remove_prefix(1);
    if (text.starts_with('-')) return std::nullopt;
  }
  double value = 0;
  const char* const end = text.data() + text.size();
  const auto [stop, problem] = std::from_chars(text.data(), end, value);
  if (problem != std::errc{} || stop != end) return std::nullopt;
  return value;
}

std::vector<std::string> nearest(std::string_view word, std::span<const std::string_view> choices,
                                 std::size_t most) {
  if (word.empty() || word.size() > longest_word) return {};
  std::vector<std::pair<int, std::string_view>> ranked;
  for (const std::string_view choice : choices) {
    if (choice.size() > longest_word) continue;
    const int cost = edit_cost(word, choice);
    if (2 * cost <= cost_of_strangers(word.size(), choice.size()))
      ranked.emplace_back(cost, choice);
  }
  std::stable_sort(ranked.begin(), ranked.end(),
                   [](const auto& a, const auto& b) { return a.first < b.first; });
  ranked.resize(std::min(most, ranked.size()));
  std::vector<std::string> names;
  for (const auto& [cost, choice] : ranked) names.emplace_back(choice);
  return names;
}

std::string joined(std::span<const std::string> parts, std::string_view between) {
  std::string text;
  for (const std::string& part : parts) {
    if (&part != &parts.front()) text += between;
    text += part;
  }
  return text;
}

std::string lower_case(std::string_view text) {
  std::string result(text);
  std::transform(result.begin(), result.end(), result.begin(), lower);
  return result;
}

std::string_view trimmed(std::string_view text) {
  constexpr std::string_view blanks = " \t\r\n\v\f";
  const std::size_t first = text.find_first_not_of(blanks);
  if (first == std::string_view::npos) return {};
  return text.substr(first, text.find_last_not_of(blanks) - first + 1);
}

}  // namespace chromacore::detail
