#include "csv_input.hpp"

#include <algorithm>
#include <cmath>
#include <utility>

#include "text.hpp"
#include "text_file.hpp"

namespace chromacore::detail {
namespace {

// Splits one text into rows of cells.
class CsvScan {
 public:
  CsvScan(std::string_view text, const std::string& file)
      : text_(without_byte_order_mark(text)), file_(file) {}

  // The next row that is neither empty nor a comment; none at the end.
  std::vector<CsvCell> next_row() {
    while (at_ < text_.size()) {
      if (text_[at_] != '#') {
        std::vector<CsvCell> row = row_here();
        if (row.size() > 1 || !row.front().text.empty()) return row;
      } else {
        at_ = std::min(text_.find('\n', at_), text_.size());
        end_line();
      }
    }
    return {};
  }

 private:
  std::vector<CsvCell> row_here() {
    std::vector<CsvCell> row;
    do {
      row.push_back(cell_here());
    } while (skip(','));
    end_line();
    return row;
  }

  CsvCell cell_here() {
    while (at_ < text_.size() && (text_[at_] == ' ' || text_[at_] == '\t')) ++at_;
    CsvCell cell{.text = {}, .line = line_, .column = column()};
    if (at_ < text_.size() && text_[at_] == '"') {
      cell.text = quoted_text(cell);
    } else {
      const std::size_t end = std::min(text_.find_first_of(",\n", at_), text_.size());
      cell.text = trimmed(text_.substr(at_, end - at_));
      at_ = end;
    }
    return cell;
  }

  std::string quoted_text(const CsvCell& cell) {
    std::string text;
    for (++at_; at_ < text_.size(); ++at_) {
      if (text_[at_] == '"' && text_.substr(at_, 2) != "\"\"") break;
      if (text_[at_] == '"') ++at_;  // two quotes stand for one
      if (text_[at_] == '\n') fail("a quote is not closed in its line", cell);
      text += text_[at_];
    }
    if (!skip('"')) fail("a quote is not closed in its line", cell);
    while (at_ < text_.size() && (text_[at_] == ' ' || text_[at_] == '\r')) ++at_;
    if (at_ < text_.size() && text_[at_] != ',' && text_[at_] != '\n') {
      fail("something follows a closed quote", cell);
    }
    return text;
  }

  bool skip(char c) {
    if (at_ >= text_.size() || text_[at_] != c) return false;
    ++at_;
    return true;
  }

  void end_line() {
    if (!skip('\n')) return;
    ++line_;
    line_start_ = at_;
  }

  // Characters, not bytes: continuation bytes of UTF-8 do not count.
  int column() const {
    const std::string_view before = text_.substr(line_start_, at_ - line_start_);
    const auto is_start = [](char c) { return (static_cast<unsigned char>(c) & 0xC0u) != 0x80u; };
    return static_cast<int>(std::count_if(before.begin(), before.end(), is_start)) + 1;
  }

  [[noreturn]] void fail(const std::string& message, const CsvCell& cell) const {
    throw Error(ErrorCode::bad_syntax, message,
                {.file = file_, .line = cell.line, .column = cell.column});
  }

  std::string_view text_;
  const std::string& file_;
  std::size_t at_ = 0;
  std::size_t line_start_ = 0;
  int line_ = 1;
};

ErrorPlace place_of(const std::string& file, const CsvCell& cell) {
  return {.file = file, .line = cell.line, .column = cell.column};
}

void check_header(const std::vector<CsvCell>& header, const std::string& file) {
  if (header.empty()) {
    throw Error(ErrorCode::bad_syntax, "no header line; expected column names with commas between",
                {.file = file});
  }
  for (std::size_t i = 0; i < header.size(); ++i) {
    if (header[i].text.find(';') != std::string::npos) {
      throw Error(ErrorCode::bad_syntax,
                  "';' between cells; expected commas, and numbers with a decimal point",
                  place_of(file, header[i]));
    }
    for (std::size_t k = 0; k < i; ++k) {
      if (header[k].text != header[i].text) continue;
      throw Error(ErrorCode::bad_syntax, "two columns are called \"" + header[i].text + '"',
                  place_of(file, header[i]));
    }
  }
}

void check_row(const std::vector<CsvCell>& row, std::size_t columns, const std::string& file) {
  if (row.size() == columns) return;
  const bool more = row.size() > columns;
  throw Error(ErrorCode::bad_syntax,
              "the row has " + std::to_string(row.size()) + " cells, the header " +
                  std::to_string(columns) +
                  (more ? "; a decimal comma? numbers have a decimal point" : ""),
              place_of(file, more ? row[columns] : row.front()));
}

}  // namespace

CsvTable::CsvTable(std::string_view text, std::string file) : file_(std::move(file)) {
  CsvScan scan(text, file_);
  header_ = scan.next_row();
  check_header(header_, file_);
  for (const CsvCell& cell : header_) columns_.push_back(cell.text);
  for (auto row = scan.next_row(); !row.empty(); row = scan.next_row()) {
    check_row(row, header_.size(), file_);
    cells_.push_back(std::move(row));
  }
}

bool CsvTable::has(std::string_view column) const {
  return std::find(columns_.begin(), columns_.end(), column) != columns_.end();
}

void CsvTable::allow(std::initializer_list<std::string_view> columns) const {
  for (const CsvCell& cell : header_) {
    if (std::find(columns.begin(), columns.end(), std::string_view(cell.text)) != columns.end()) {
      continue;
    }
    const auto close = nearest(cell.text, {columns.begin(), columns.size()}, 1);
    const std::string hint =
        close.empty()
            ? "one of: " + joined(std::vector<std::string>(columns.begin(), columns.end()))
            : "nearest: " + close.front();
    throw Error(ErrorCode::unknown_key, "unknown column \"" + cell.text + "\"; " + hint,
                place_of(file_, cell));
  }
}

const CsvCell* CsvTable::find(std::size_t row, std::string_view column) const {
  const auto at = std::find(columns_.begin(), columns_.end(), column);
  if (at == columns_.end()) return nullptr;
  const CsvCell& cell = cells_[row][static_cast<std::size_t>(at - columns_.begin())];
  return cell.text.empty() ? nullptr : &cell;
}

ErrorPlace CsvTable::place(std::size_t row, std::string_view column) const {
  const CsvCell* const cell = find(row, column);
  if (cell != nullptr) return place_of(file_, *cell);
  return {.file = file_, .line = cells_[row].front().line};
}

void CsvTable::fail(ErrorCode code, const std::string& message, std::size_t row,
                    std::string_view column) const {
  throw Error(code, message, place(row, column));
}

std::string CsvTable::text_or_empty(std::size_t row, std::string_view column) const {
  const CsvCell* const cell = find(row, column);
  return cell == nullptr ? "" : cell->text;
}

std::string CsvTable::text(std::size_t row, std::string_view column) const {
  const CsvCell* const cell = find(row, column);
  if (cell == nullptr) fail(ErrorCode::not_set, "no " + std::string(column), row);
  return cell->text;
}

double CsvTable::number(std::size_t row, std::string_view column, bool infinite_allowed) const {
  const std::string cell = text(row, column);
  const std::optional<double> value = parse_number(cell);
  const std::string said = std::string(column) + " is \"" + cell + "\"; expected ";
  if (!value) {
    const bool comma = cell.find(',') != std::string::npos;
    fail(ErrorCode::bad_syntax, said + (comma ? "a number with a decimal point" : "a number"), row,
         column);
  }
  if (std::isnan(*value) || (std::isinf(*value) && !infinite_allowed)) {
    fail(ErrorCode::bad_value, said + "a finite number", row, column);
  }
  return *value;
}

std::optional<double> CsvTable::maybe_number(std::size_t row, std::string_view column,
                                             bool infinite_allowed) const {
  if (find(row, column) == nullptr) return {};
  return number(row, column, infinite_allowed);
}

}  // namespace chromacore::detail
