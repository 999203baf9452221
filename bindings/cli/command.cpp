#include "command.hpp"

#include <fmt/format.h>
#include <fmt/ranges.h>

#include <algorithm>
#include <charconv>
#include <numeric>
#include <utility>

namespace chromacore::cli {
namespace {

// Edits (a letter more, less or other) that make one word the other.
std::size_t edits(std::string_view a, std::string_view b) {
  std::vector<std::size_t> row(b.size() + 1);
  std::iota(row.begin(), row.end(), std::size_t{0});
  for (std::size_t i = 0; i < a.size(); ++i) {
    std::size_t diagonal = row[0];
    row[0] = i + 1;
    for (std::size_t j = 0; j < b.size(); ++j) {
      const std::size_t replaced = diagonal + (a[i] == b[j] ? 0 : 1);
      diagonal = row[j + 1];
      row[j + 1] = std::min({replaced, row[j] + 1, row[j + 1] + 1});
    }
  }
  return row.back();
}

template <class Number>
std::optional<Number> number_of(std::string_view text) {
  Number value{};
  const auto [end, error] = std::from_chars(text.data(), text.data() + text.size(), value);
  if (error != std::errc{} || end != text.data() + text.size()) return std::nullopt;
  return value;
}

}  // namespace

Catalog catalog_of(const Common& common) {
  Catalog catalog = Catalog::built_in();
  for (const std::string& file : common.catalogs) {
    about_file(file, [&] {
      for (const Material& material : read_catalog_file(file)) catalog.add(material);
    });
  }
  return catalog;
}

Error usage_error(const std::string& verb, const std::string& message) {
  const std::string space = verb.empty() ? "" : " ";
  return {ErrorCode::bad_value, fmt::format("chromacore{}{}: {}", space, verb, message)};
}

std::string suggestion(const std::string& word, std::span<const std::string> choices) {
  std::vector<std::pair<std::size_t, std::string>> near;
  for (const std::string& choice : choices) {
    const std::size_t distance = edits(word, choice);
    if (distance <= choice.size() / 3) near.emplace_back(distance, choice);
  }
  if (near.empty()) return fmt::format("; one of: {}", fmt::join(choices, ", "));
  std::sort(near.begin(), near.end());
  std::string text = "; nearest";
  for (const auto& [distance, choice] : near) {
    text += (&choice == &near.front().second ? ": " : ", ") + choice;
  }
  return text;
}

std::vector<std::string> split(std::string_view text, char at) {
  std::vector<std::string> parts;
  while (true) {
    const std::size_t end = text.find(at);
    parts.emplace_back(text.substr(0, end));
    if (end == std::string_view::npos) return parts;
    text.remove_prefix(end + 1);
  }
}

Line line_of(const std::string& text) {
  if (const auto um = number_of<double>(text)) return *um * units::um;
  return std::string_view(text);
}

int count_of(const std::string& text, const std::string& verb, const std::string& option) {
  const auto count = number_of<int>(text);
  if (!count || *count < 1) {
    throw usage_error(verb,
                      fmt::format("{} {}: a whole number above 0 was expected", option, text));
  }
  return *count;
}

}  // namespace chromacore::cli
