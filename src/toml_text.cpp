#include "toml_text.hpp"

#include <algorithm>
#include <array>
#include <charconv>

namespace chromacore::detail {
namespace {

constexpr std::size_t widest_line = 100;
// Numbers between these are written without an exponent. Past the second they always have one, so
// that none looks like an integer that TOML cannot hold.
constexpr double least_fixed = 1e-4;
constexpr double most_fixed = 1e15;

std::string hexadecimal(unsigned char c) {
  constexpr std::string_view digits = "0123456789ABCDEF";
  return {digits[c / 16U], digits[c % 16U]};
}

// A list that is too long for one line goes on below its first value.
std::string wrapped(std::string_view value, std::size_t indent) {
  std::string text;
  std::size_t column = indent;
  while (!value.empty()) {
    const std::size_t comma = value.find(", ");
    const std::size_t size = comma == std::string_view::npos ? value.size() : comma + 2;
    const std::string_view part = value.substr(0, size);
    if (column + part.size() > widest_line && column > indent) {
      text.pop_back();  // the blank behind the comma
      text += '\n' + std::string(indent + 1, ' ');
      column = indent + 1;
    }
    text += part;
    column += part.size();
    value.remove_prefix(size);
  }
  return text;
}

}  // namespace

std::string toml_number(double value) {
  const double size = std::abs(value);
  if (size < least_fixed || size >= most_fixed) return number_text(value);
  std::array<char, 32> text{};
  const auto end =
      std::to_chars(text.data(), text.data() + text.size(), value, std::chars_format::fixed);
  return {text.data(), end.ptr};
}

std::string toml_string(std::string_view text) {
  std::string quoted = "\"";
  for (const char c : text) {
    const auto byte = static_cast<unsigned char>(c);
    if (c == '"' || c == '\\') {
      quoted += {'\\', c};
    } else if (c == '\n') {
      quoted += "\\n";
    } else if (byte < 0x20 || byte == 0x7F) {
      quoted += "\\u00" + hexadecimal(byte);
    } else {
      quoted += c;
    }
  }
  return quoted + '"';
}

std::string toml_line(const Line& line) {
  return line.letter().empty() ? toml_number(in_um(line.wavelength())) : toml_string(line.letter());
}

std::string toml_list(const std::vector<std::string>& values) { return '[' + joined(values) + ']'; }

std::string toml_numbers(const std::vector<double>& values) {
  std::vector<std::string> texts;
  for (const double value : values) texts.push_back(toml_number(value));
  return toml_list(texts);
}

std::string toml_strings(const std::vector<std::string>& values) {
  std::vector<std::string> texts;
  for (const std::string& value : values) texts.push_back(toml_string(value));
  return toml_list(texts);
}

std::string TomlTable::text() const {
  std::size_t width = 0;
  for (const Row& row : rows_) width = std::max(width, row.key.size());
  std::string text = header_.empty() ? "" : header_ + '\n';
  for (const Row& row : rows_) {
    const std::string start = row.key + std::string(width - row.key.size(), ' ') + " = ";
    const bool list = !row.value.empty() && row.value.front() == '[';
    text += start + (list ? wrapped(row.value, start.size()) : row.value);
    if (!row.comment.empty()) text += "  # " + row.comment;
    text += '\n';
  }
  return text + '\n';
}

}  // namespace chromacore::detail
