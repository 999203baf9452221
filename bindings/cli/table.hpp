#pragma once
// Aligned tables of text and numbers, and colour where the terminal has it.
#include <cstddef>
#include <optional>
#include <string>
#include <string_view>
#include <vector>

namespace chromacore::cli {

// Colour, or none: on a terminal only, and not where NO_COLOR is set.
struct Paint {
  bool on = false;
  [[nodiscard]] static Paint for_standard_output();
  [[nodiscard]] std::string title(std::string_view text) const;    // bold
  [[nodiscard]] std::string good(std::string_view text) const;     // green
  [[nodiscard]] std::string warning(std::string_view text) const;  // bold red
};

// Fixed notation with so many significant digits: "500.00", "0.0012"; very large and very small
// ones in powers of ten.
[[nodiscard]] std::string number(double value, int digits);
// The decimals that show a thousandth of `step`, such as a budget, and a number with them.
[[nodiscard]] int decimals_by(double step);
[[nodiscard]] std::string number_by(double value, double step);

using Numbers = std::vector<std::optional<double>>;

// A column's cells: one number, or one text, of each item.
template <class Item, class Get>
[[nodiscard]] Numbers column(const std::vector<Item>& items, Get get) {
  Numbers values;
  for (const Item& item : items) values.emplace_back(get(item));
  return values;
}
template <class Item, class Get>
[[nodiscard]] std::vector<std::string> words(const std::vector<Item>& items, Get get) {
  std::vector<std::string> cells;
  for (const Item& item : items) cells.emplace_back(get(item));
  return cells;
}

// Columns, each with a heading of one or two lines ("focal length\nmm") and as many cells.
class Table {
 public:
  void text(std::string heading, std::vector<std::string> cells);
  // Aligned at the decimal point: all with the decimals that give the largest `digits` significant
  // ones. An absent value, or one that is not finite, is "-".
  void numbers(std::string heading, const Numbers& values, int digits);
  // The same with a given number of decimals.
  void fixed(std::string heading, const Numbers& values, int decimals);
  // A note behind a row, which is painted as a warning.
  void mark(std::size_t row, std::string_view note);
  // Lines, each indented by two spaces.
  [[nodiscard]] std::string str(const Paint& paint) const;

 private:
  struct Column {
    std::string name = {};
    std::string unit = {};
    bool right = false;
    std::vector<std::string> cells = {};
    std::size_t width = 0;
  };
  void add(std::string_view heading, bool right, std::vector<std::string> cells);
  [[nodiscard]] std::string heading(std::string Column::*part) const;
  [[nodiscard]] std::string row(std::size_t index) const;

  std::vector<Column> columns_ = {};
  std::vector<std::string> marks_ = {};
};

}  // namespace chromacore::cli
