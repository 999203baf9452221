#pragma once
// CSV text in: a header line of column names, then rows; strict typed access with places.
//
// UTF-8 with or without byte-order mark, LF or CRLF, comma between cells, decimal point, cells in
// double quotes where they hold a comma. Empty lines and lines that begin with '#' are skipped.
// A ';' between cells and a decimal comma are refused by name.
#include <chromacore/error.hpp>
#include <cstddef>
#include <initializer_list>
#include <optional>
#include <string>
#include <string_view>
#include <vector>

namespace chromacore::detail {

struct CsvCell {
  std::string text = {};  // without quotes and outer blanks
  int line = 0;           // of the file, from 1
  int column = 0;         // character in that line, from 1
};

class CsvTable {
 public:
  // @throws Error  bad_syntax with line and column: no header, two columns of one name, a row with
  //                another number of cells, an open quote, ';' between cells
  CsvTable(std::string_view text, std::string file);

  [[nodiscard]] std::size_t rows() const { return cells_.size(); }
  [[nodiscard]] const std::vector<std::string>& columns() const { return columns_; }
  [[nodiscard]] bool has(std::string_view column) const;
  // @throws Error  unknown_key at the first column that is not one of these, with the nearest
  void allow(std::initializer_list<std::string_view> columns) const;

  // Rows count from 0. An absent column and an empty cell are the same: not_set where it is
  // required, nothing where not. Numbers are finite unless `infinite_allowed`.
  [[nodiscard]] std::string text(std::size_t row, std::string_view column) const;
  [[nodiscard]] std::string text_or_empty(std::size_t row, std::string_view column) const;
  [[nodiscard]] double number(std::size_t row, std::string_view column,
                              bool infinite_allowed = false) const;
  [[nodiscard]] std::optional<double> maybe_number(std::size_t row, std::string_view column,
                                                   bool infinite_allowed = false) const;

  [[nodiscard]] ErrorPlace place(std::size_t row, std::string_view column = "") const;
  [[noreturn]] void fail(ErrorCode code, const std::string& message, std::size_t row,
                         std::string_view column = "") const;

 private:
  [[nodiscard]] const CsvCell* find(std::size_t row, std::string_view column) const;

  std::string file_;
  std::vector<std::string> columns_;
  std::vector<CsvCell> header_;
  std::vector<std::vector<CsvCell>> cells_;
};

}  // namespace chromacore::detail
