#include "table_view.hpp"

#include <algorithm>
#include <cmath>
#include <utility>

#include "text.hpp"

namespace chromacore::detail {
namespace {

std::string_view kind_name(const TomlNode& node) {
  switch (node.kind) {
    case TomlNode::Kind::boolean:
      return "a truth value";
    case TomlNode::Kind::number:
      return "a number";
    case TomlNode::Kind::string:
      return "a text";
    case TomlNode::Kind::array:
      return "a list";
    case TomlNode::Kind::table:
      return "a table";
    case TomlNode::Kind::date:
      return "a date";
  }
  return "";
}

std::string shown(const TomlNode& node) {
  if (node.kind == TomlNode::Kind::string) return '"' + node.text + '"';
  if (node.kind == TomlNode::Kind::number) return number_text(node.number);
  if (node.kind == TomlNode::Kind::boolean) return node.truth ? "true" : "false";
  return std::string(kind_name(node));
}

std::string item_name(std::string_view key, std::size_t index) {
  return std::string(key) + '[' + std::to_string(index + 1) + ']';  // counted from 1
}

}  // namespace

TableView::TableView(const TomlNode& node, std::string file, std::string title)
    : node_(&node), file_(std::move(file)), title_(std::move(title)) {}

const TomlNode* TableView::find(std::string_view key) const {
  for (const TomlNode& item : node_->items) {
    if (item.key == key) return &item;
  }
  return nullptr;
}

const TomlNode& TableView::at(std::string_view key) const {
  if (const TomlNode* const item = find(key)) return *item;
  fail(ErrorCode::not_set, (title_.empty() ? "the file" : title_) + " has no " + std::string(key));
}

ErrorPlace TableView::place_of(const TomlNode& node) const {
  return {.file = file_, .line = node.line, .column = node.column, .element = element_};
}

ErrorPlace TableView::place(std::string_view key, std::size_t index) const {
  const TomlNode* node = key.empty() ? nullptr : find(key);
  if (node == nullptr) return place_of(*node_);
  if (index < node->items.size()) return place_of(node->items[index]);
  return place_of(*node);
}

void TableView::fail(ErrorCode code, const std::string& message, std::string_view key,
                     std::size_t index) const {
  throw Error(code, message, place(key, index));
}

void TableView::allow(std::initializer_list<std::string_view> keys) const {
  for (const TomlNode& item : node_->items) {
    if (std::find(keys.begin(), keys.end(), std::string_view(item.key)) != keys.end()) continue;
    const std::vector<std::string> close = nearest(item.key, {keys.begin(), keys.size()}, 1);
    const std::string hint =
        close.empty() ? "one of: " + joined(std::vector<std::string>(keys.begin(), keys.end()))
                      : "nearest: " + close.front();
    const std::string where = title_.empty() ? "" : " in " + title_;
    throw Error(ErrorCode::unknown_key, "unknown key \"" + item.key + '"' + where + "; " + hint,
                place_of(item));
  }
}

void TableView::wrong_type(const TomlNode& node, std::string_view name,
                           std::string_view expected) const {
  throw Error(ErrorCode::bad_value,
              std::string(name) + " is " + shown(node) + "; expected " + std::string(expected),
              place_of(node));
}

double TableView::number_of(const TomlNode& node, std::string_view name, Infinite infinite) const {
  if (node.kind != TomlNode::Kind::number) {
    const bool comma = node.text.find(',') != std::string::npos;
    wrong_type(node, name, comma ? "a number with a decimal point" : "a number");
  }
  const bool fits =
      infinite == Infinite::allowed ? !std::isnan(node.number) : std::isfinite(node.number);
  if (!fits) wrong_type(node, name, "a finite number");
  return node.number;
}

std::string TableView::text_of(const TomlNode& node, std::string_view name) const {
  if (node.kind != TomlNode::Kind::string) wrong_type(node, name, "a text in quotes");
  return node.text;
}

Line TableView::line_of(const TomlNode& node, std::string_view name) const {
  try {
    if (node.kind == TomlNode::Kind::string) return Line(std::string_view(node.text));
    if (node.kind == TomlNode::Kind::number) return Line(node.number * units::um);
  } catch (const Error& error) {
    throw error.within(place_of(node));
  }
  wrong_type(node, name, "a wavelength in um or a line's letter in quotes");
}

double TableView::number(std::string_view key, Infinite infinite) const {
  return number_of(at(key), key, infinite);
}

std::optional<double> TableView::maybe_number(std::string_view key, Infinite infinite) const {
  if (!has(key)) return {};
  return number(key, infinite);
}

int TableView::integer(std::string_view key) const {
  const double value = number(key);
  if (value != std::floor(value) || std::abs(value) > 1e9)
    wrong_type(at(key), key, "a whole number");
  return static_cast<int>(value);
}

std::optional<int> TableView::maybe_integer(std::string_view key) const {
  if (!has(key)) return {};
  return integer(key);
}

std::optional<bool> TableView::maybe_boolean(std::string_view key) const {
  if (!has(key)) return {};
  const TomlNode& node = at(key);
  if (node.kind != TomlNode::Kind::boolean) wrong_type(node, key, "true or false");
  return node.truth;
}

std::string TableView::text(std::string_view key) const { return text_of(at(key), key); }

std::optional<std::string> TableView::maybe_text(std::string_view key) const {
  if (!has(key)) return {};
  return text(key);
}

Line TableView::line(std::string_view key) const { return line_of(at(key), key); }

std::optional<Line> TableView::maybe_line(std::string_view key) const {
  if (!has(key)) return {};
  return line(key);
}

const TomlNode& TableView::array_at(std::string_view key) const {
  const TomlNode& node = at(key);
  if (node.kind != TomlNode::Kind::array) wrong_type(node, key, "a list in [ ]");
  return node;
}

std::vector<double> TableView::numbers(std::string_view key, Infinite infinite) const {
  std::vector<double> values;
  for (const TomlNode& item : array_at(key).items) {
    values.push_back(number_of(item, item_name(key, values.size()), infinite));
  }
  return values;
}

std::vector<std::string> TableView::texts(std::string_view key) const {
  std::vector<std::string> values;
  for (const TomlNode& item : array_at(key).items) {
    values.push_back(text_of(item, item_name(key, values.size())));
  }
  return values;
}

std::vector<Line> TableView::lines(std::string_view key) const {
  std::vector<Line> values;
  for (const TomlNode& item : array_at(key).items) {
    values.push_back(line_of(item, item_name(key, values.size())));
  }
  return values;
}

TableView TableView::table(std::string_view key) const {
  const std::string title = '[' + std::string(key) + ']';
  const TomlNode* const node = find(key);
  if (node == nullptr) fail(ErrorCode::not_set, "the file has no " + title);
  if (node->kind != TomlNode::Kind::table) wrong_type(*node, key, "the table " + title);
  return {*node, file_, title};
}

std::optional<TableView> TableView::maybe_table(std::string_view key) const {
  if (!has(key)) return {};
  return table(key);
}

std::vector<TableView> TableView::tables(std::string_view key) const {
  std::vector<TableView> found;
  const TomlNode* const node = find(key);
  if (node == nullptr) return found;
  const std::string title = "[[" + std::string(key) + "]]";
  if (node->kind != TomlNode::Kind::array) wrong_type(*node, key, "tables " + title);
  for (const TomlNode& item : node->items) {
    if (item.kind != TomlNode::Kind::table) wrong_type(item, key, "tables " + title);
    found.emplace_back(item, file_, title);
  }
  return found;
}

}  // namespace chromacore::detail
