#pragma once
// Strict typed access to a tree of tables, lists and values that came from a text with places.
#include <chromacore/band.hpp>
#include <chromacore/error.hpp>
#include <cstddef>
#include <initializer_list>
#include <optional>
#include <string>
#include <string_view>
#include <vector>

namespace chromacore::detail {

// One value of a TOML file with its place (of the value; counted from 1).
struct TomlNode {
  enum class Kind { boolean, number, string, array, table, date };
  Kind kind = Kind::table;
  std::string key = {};  // in its table; "" in an array
  int line = 0;
  int column = 0;
  bool truth = false;
  double number = 0;                 // integers too
  std::string text = {};             // of a string
  std::vector<TomlNode> items = {};  // of an array in order, of a table in the file's order
};

enum class Infinite { refused, allowed };

// A table of the tree as its reader sees it. Light; the tree must outlive it.
//
// `x(key)` throws not_set where the key is missing, `maybe_x(key)` gives nothing. Another type is
// bad_value, NaN always, infinity unless allowed.
class TableView {
 public:
  // `title` is what messages call it ("[band]"); "" for the file itself.
  TableView(const TomlNode& node, std::string file, std::string title = "");

  void set_element(int element) { element_ = element; }
  [[nodiscard]] const std::string& title() const { return title_; }
  [[nodiscard]] const std::string& file() const { return file_; }
  [[nodiscard]] const TomlNode& node() const { return *node_; }

  // @throws Error  unknown_key at the first key that is not one of these, with the nearest
  void allow(std::initializer_list<std::string_view> keys) const;
  [[nodiscard]] bool has(std::string_view key) const { return find(key) != nullptr; }

  [[nodiscard]] double number(std::string_view key, Infinite infinite = Infinite::refused) const;
  [[nodiscard]] std::optional<double> maybe_number(std::string_view key,
                                                   Infinite infinite = Infinite::refused) const;
  [[nodiscard]] int integer(std::string_view key) const;
  [[nodiscard]] std::optional<int> maybe_integer(std::string_view key) const;
  [[nodiscard]] std::optional<bool> maybe_boolean(std::string_view key) const;
  [[nodiscard]] std::string text(std::string_view key) const;
  [[nodiscard]] std::optional<std::string> maybe_text(std::string_view key) const;
  [[nodiscard]] Line line(std::string_view key) const;  // a letter in quotes, or a number in um
  [[nodiscard]] std::optional<Line> maybe_line(std::string_view key) const;

  [[nodiscard]] std::vector<double> numbers(std::string_view key,
                                            Infinite infinite = Infinite::refused) const;
  [[nodiscard]] std::vector<std::string> texts(std::string_view key) const;
  [[nodiscard]] std::vector<Line> lines(std::string_view key) const;

  [[nodiscard]] TableView table(std::string_view key) const;
  [[nodiscard]] std::optional<TableView> maybe_table(std::string_view key) const;
  // The tables of [[key]], or none.
  [[nodiscard]] std::vector<TableView> tables(std::string_view key) const;

  // The place of a key's value (of item `index` of its array, from 0), or of the table itself.
  [[nodiscard]] ErrorPlace place(std::string_view key = "", std::size_t index = no_index) const;
  [[noreturn]] void fail(ErrorCode code, const std::string& message, std::string_view key = "",
                         std::size_t index = no_index) const;
  static constexpr std::size_t no_index = static_cast<std::size_t>(-1);

 private:
  [[nodiscard]] const TomlNode* find(std::string_view key) const;
  [[nodiscard]] const TomlNode& at(std::string_view key) const;
  [[nodiscard]] const TomlNode& array_at(std::string_view key) const;
  [[nodiscard]] ErrorPlace place_of(const TomlNode& node) const;
  [[noreturn]] void wrong_type(const TomlNode& node, std::string_view name,
                               std::string_view expected) const;
  [[nodiscard]] double number_of(const TomlNode& node, std::string_view name,
                                 Infinite infinite) const;
  [[nodiscard]] std::string text_of(const TomlNode& node, std::string_view name) const;
  [[nodiscard]] Line line_of(const TomlNode& node, std::string_view name) const;

  const TomlNode* node_;
  std::string file_;
  std::string title_;
  int element_ = 0;
};

}  // namespace chromacore::detail
