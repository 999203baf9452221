#include "table.hpp"

#include <fmt/format.h>
#include <unistd.h>

#include <algorithm>
#include <cmath>
#include <cstdlib>

namespace chromacore::cli {
namespace {

constexpr int most_decimals = 9;

// Characters, not bytes, of UTF-8.
std::size_t width_of(std::string_view text) {
  return static_cast<std::size_t>(
      std::count_if(text.begin(), text.end(), [](char c) { return (c & 0xC0) != 0x80; }));
}

std::string padded(const std::string& text, std::size_t width, bool right) {
  const std::string space(width - std::min(width, width_of(text)), ' ');
  return right ? space + text : text + space;
}

std::string painted(std::string_view code, std::string_view text, bool on) {
  return on ? fmt::format("\x1b[{}m{}\x1b[0m", code, text) : std::string(text);
}

std::string trimmed_right(std::string text) {
  text.erase(text.find_last_not_of(' ') + 1);
  return text;
}

// Decimals that give a number of this size so many significant digits.
int decimals_of(double size, int digits) {
  if (!(size > 0)) return 0;
  return digits - 1 - static_cast<int>(std::floor(std::log10(size)));
}

// Without the sign that a rounded negative zero would have.
std::string fixed_text(double value, int decimals) {
  std::string text = fmt::format("{:.{}f}", value, std::max(decimals, 0));
  const bool zero = text.find_first_of("123456789") == std::string::npos;
  return zero && text.front() == '-' ? text.substr(1) : text;
}

}  // namespace

Paint Paint::for_standard_output() {
  const char* no_color = std::getenv("NO_COLOR");
  const char* terminal = std::getenv("TERM");
  const bool refused = no_color != nullptr && *no_color != '\0';
  const bool dumb = terminal == nullptr || std::string_view(terminal) == "dumb";
  return {.on = !refused && !dumb && isatty(STDOUT_FILENO) != 0};
}

std::string Paint::title(std::string_view text) const { return painted("1", text, on); }
std::string Paint::good(std::string_view text) const { return painted("32", text, on); }
std::string Paint::warning(std::string_view text) const { return painted("1;31", text, on); }

std::string number(double value, int digits) {
  if (!std::isfinite(value)) return fmt::format("{}", value);
  const int decimals = decimals_of(std::abs(value), digits);
  if (decimals > most_decimals || decimals < -3) return fmt::format("{:.{}e}", value, digits - 1);
  return fixed_text(value, decimals);
}

int decimals_by(double step) {
  return std::isfinite(step) ? std::min(decimals_of(step, 4), most_decimals) : 0;
}

std::string number_by(double value, double step) {
  return std::isfinite(value) ? fixed_text(value, decimals_by(step)) : fmt::format("{}", value);
}

void Table::add(std::string_view heading, bool right, std::vector<std::string> cells) {
  const std::size_t end = heading.find('\n');
  Column column;
  column.name = heading.substr(0, end);
  if (end != std::string_view::npos) column.unit = heading.substr(end + 1);
  column.right = right;
  column.cells = std::move(cells);
  column.width = std::max(width_of(column.name), width_of(column.unit));
  for (const std::string& cell : column.cells) {
    column.width = std::max(column.width, width_of(cell));
  }
  marks_.resize(std::max(marks_.size(), column.cells.size()));
  columns_.push_back(std::move(column));
}

void Table::text(std::string heading, std::vector<std::string> cells) {
  add(heading, false, std::move(cells));
}

void Table::numbers(std::string heading, const Numbers& values, int digits) {
  double largest = 0;
  for (const auto& value : values) {
    if (value && std::isfinite(*value)) largest = std::max(largest, std::abs(*value));
  }
  fixed(std::move(heading), values, std::min(decimals_of(largest, digits), most_decimals));
}

void Table::fixed(std::string heading, const Numbers& values, int decimals) {
  std::vector<std::string> cells;
  for (const auto& value : values) {
    cells.push_back(value && std::isfinite(*value) ? fixed_text(*value, decimals) : "-");
  }
  add(heading, true, std::move(cells));
}

void Table::mark(std::size_t row, std::string_view note) {
  std::string& mark = marks_.at(row);
  mark += (mark.empty() ? "  <- " : ", ");
  mark += note;
}

std::string Table::heading(std::string Column::*part) const {
  std::string line;
  for (const Column& column : columns_) {
    line += "  " + padded(column.*part, column.width, column.right);
  }
  line = trimmed_right(line);
  return line.empty() ? line : line + '\n';
}

std::string Table::row(std::size_t index) const {
  std::string line;
  for (const Column& column : columns_) {
    line += "  " + padded(column.cells.at(index), column.width, column.right);
  }
  return trimmed_right(line);
}

std::string Table::str(const Paint& paint) const {
  std::string lines = heading(&Column::name) + heading(&Column::unit);
  for (std::size_t i = 0; i < marks_.size(); ++i) {
    lines += marks_[i].empty() ? row(i) : paint.warning(row(i) + marks_[i]);
    lines += '\n';
  }
  return lines;
}

}  // namespace chromacore::cli
