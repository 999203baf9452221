#include "toml_input.hpp"

#include <toml++/toml.h>

#include <algorithm>
#include <utility>

#include "text.hpp"
#include "text_file.hpp"

namespace chromacore::detail {
namespace {

// ---- before parsing: how deep ----

// Walks over TOML text outside of strings and comments, and counts the brackets that are open and
// the dots of the key, header or number that is being written. What is wrong otherwise is left to
// the parser.
class DepthScan {
 public:
  DepthScan(std::string_view text, const std::string& file) : text_(text), file_(file) {}

  void run() {
    while (at_ < text_.size()) step();
  }

 private:
  void step() {
    const char c = text_[at_];
    if (c == '"' || c == '\'') return skip_string(c);
    if (c == '#') return skip_to_line_end();
    if (c == '\n') ++line_, line_start_ = at_ + 1;
    if (c == '[' || c == '{') count(++open_);
    if ((c == ']' || c == '}') && open_ > 0) --open_;
    if (c == '.') count(++dots_);
    if (ends_key(c)) dots_ = 0;
    ++at_;
  }

  static bool ends_key(char c) {
    return c == '\n' || c == '=' || c == ',' || c == '[' || c == ']' || c == '{' || c == '}';
  }

  void count(int depth) const {
    if (depth <= deepest_toml_nesting) return;
    throw Error(ErrorCode::too_large,
                "nested too deeply; at most " + std::to_string(deepest_toml_nesting) + " levels",
                {.file = file_, .line = line_, .column = static_cast<int>(at_ - line_start_) + 1});
  }

  void skip_to_line_end() { at_ = std::min(text_.find('\n', at_), text_.size()); }

  void skip_string(char quote) {
    const std::string three(3, quote);
    const bool multi_line = text_.substr(at_, 3) == three;
    const std::string_view end = std::string_view(three).substr(0, multi_line ? 3 : 1);
    at_ += end.size();
    while (at_ < text_.size() && text_.substr(at_, end.size()) != end) {
      if (text_[at_] == '\n') {
        if (!multi_line) return;  // an open string: the parser says so
        ++line_, line_start_ = at_ + 1;
      }
      at_ += quote == '"' && text_[at_] == '\\' ? 2 : 1;
    }
    at_ = std::min(at_ + end.size(), text_.size());
  }

  std::string_view text_;
  const std::string& file_;
  std::size_t at_ = 0;
  std::size_t line_start_ = 0;
  int line_ = 1;
  int open_ = 0;
  int dots_ = 0;
};

// ---- the tree ----

int to_int(toml::source_index i) { return static_cast<int>(i); }

TomlNode converted(const toml::node& node, std::string key);

bool comes_before(const TomlNode& a, const TomlNode& b) {
  return std::pair(a.line, a.column) < std::pair(b.line, b.column);
}

// toml++ sorts a table by name; readers want the file's order.
void convert_table(const toml::table& from, TomlNode& to) {
  to.items.reserve(from.size());
  for (const auto& [key, value] : from)
    to.items.push_back(converted(value, std::string(key.str())));
  std::stable_sort(to.items.begin(), to.items.end(), comes_before);
}

void convert_array(const toml::array& from, TomlNode& to) {
  to.items.reserve(from.size());
  for (const auto& value : from) to.items.push_back(converted(value, ""));
}

void convert_scalar(const toml::node& from, TomlNode& to) {
  using Kind = TomlNode::Kind;
  if (const auto* text = from.as_string()) {
    to.kind = Kind::string;
    to.text = text->get();
  } else if (const auto* truth = from.as_boolean()) {
    to.kind = Kind::boolean;
    to.truth = truth->get();
  } else if (const auto number = from.value<double>()) {
    to.kind = Kind::number;
    to.number = *number;
  } else if (const auto* integer = from.as_integer()) {  // past 2^53: the nearest double
    to.kind = Kind::number;
    to.number = static_cast<double>(integer->get());
  } else {
    to.kind = Kind::date;
  }
}

TomlNode converted(const toml::node& node, std::string key) {
  TomlNode to;
  to.key = std::move(key);
  to.line = to_int(node.source().begin.line);
  to.column = to_int(node.source().begin.column);
  if (const auto* table = node.as_table()) {
    convert_table(*table, to);
  } else if (const auto* array = node.as_array()) {
    to.kind = TomlNode::Kind::array;
    convert_array(*array, to);
  } else {
    convert_scalar(node, to);
  }
  return to;
}

bool is_digit(char c) { return c >= '0' && c <= '9'; }

// Line `number` of `text`, from 1.
std::string_view line_of(std::string_view text, int number) {
  for (int i = 1; i < number && !text.empty(); ++i) {
    text.remove_prefix(std::min(text.find('\n'), text.size() - 1) + 1);
  }
  return text.substr(0, text.find('\n'));
}

// Whether `line` holds a decimal comma as `x = 1,5`: outside brackets no comma belongs between two
// digits.
bool has_decimal_comma(std::string_view line) {
  line = line.substr(0, line.find_first_of("[{#\"'"));
  for (std::size_t i = 1; i + 1 < line.size(); ++i) {
    if (line[i] == ',' && is_digit(line[i - 1]) && is_digit(line[i + 1])) return true;
  }
  return false;
}

// A text without quotes, as in `material = N-BK7`; "" where the line has none.
std::string bare_text(std::string_view line) {
  const std::size_t equals = line.find('=');
  if (equals == line.npos || line.find_first_of("\"'#") != line.npos) return "";
  const std::string_view value = trimmed(line.substr(equals + 1));
  const auto is_letter = [](char c) { return (c >= 'a' && c <= 'z') || (c >= 'A' && c <= 'Z'); };
  return !value.empty() && is_letter(value.front()) ? std::string(value) : "";
}

[[noreturn]] void rethrow(const toml::parse_error& error, std::string_view text,
                          const std::string& file) {
  const auto at = error.source().begin;
  const ErrorPlace place{.file = file, .line = to_int(at.line), .column = to_int(at.column)};
  const std::string_view line = line_of(text, place.line);
  if (has_decimal_comma(line)) {
    throw Error(ErrorCode::bad_syntax, "a decimal comma; numbers have a decimal point", place);
  }
  if (const std::string bare = bare_text(line); !bare.empty()) {
    throw Error(ErrorCode::bad_syntax, "a text without quotes; expected \"" + bare + '"', place);
  }
  throw Error(ErrorCode::bad_syntax, "not TOML: " + std::string(error.description()), place);
}

}  // namespace

TomlNode parse_toml(std::string_view text, const std::string& file) {
  if (text.size() > largest_toml_text) {
    throw Error(ErrorCode::too_large,
                "the file has " + std::to_string(text.size()) + " bytes; at most " +
                    std::to_string(largest_toml_text) + " are read",
                {.file = file});
  }
  text = without_byte_order_mark(text);
  DepthScan(text, file).run();
  try {
    TomlNode root = converted(toml::parse(text, std::string_view(file)), "");
    root.line = root.column = 0;  // the file itself is at no line
    return root;
  } catch (const toml::parse_error& error) {
    rethrow(error, text, file);
  }
}

}  // namespace chromacore::detail
