#include <algorithm>
#include <array>
#include <chromacore/error.hpp>
#include <cstddef>
#include <utility>

namespace chromacore {
namespace {

struct NamedCode {
  ErrorCode code = ErrorCode::internal;
  std::string_view name = {};
};
constexpr std::array names = {
    NamedCode{ErrorCode::bad_value, "bad_value"},
    NamedCode{ErrorCode::not_set, "not_set"},
    NamedCode{ErrorCode::not_found, "not_found"},
    NamedCode{ErrorCode::ambiguous, "ambiguous"},
    NamedCode{ErrorCode::out_of_range, "out_of_range"},
    NamedCode{ErrorCode::degenerate, "degenerate"},
    NamedCode{ErrorCode::bad_syntax, "bad_syntax"},
    NamedCode{ErrorCode::unknown_key, "unknown_key"},
    NamedCode{ErrorCode::file_access, "file_access"},
    NamedCode{ErrorCode::too_large, "too_large"},
    NamedCode{ErrorCode::internal, "internal"},
};

constexpr std::size_t longest_text = 400;  // bytes, hence at most as many characters
constexpr std::size_t longest_file = 120;  // so that a deep path leaves room for the message
constexpr std::string_view cut_mark = "...";

unsigned byte_at(std::string_view text, std::size_t i) {
  return i < text.size() ? static_cast<unsigned char>(text[i]) : 0U;
}

bool continues(unsigned byte) { return (byte & 0xC0U) == 0x80U; }

// Length of the UTF-8 character that `text` begins with; 0 where there is none (a stray byte, an
// overlong form, a surrogate, past U+10FFFF: Unicode standard, table 3-7).
std::size_t utf8_length(std::string_view text) {
  const unsigned a = byte_at(text, 0);
  const unsigned b = byte_at(text, 1);
  if (a < 0x80) return 1;
  if (!continues(b)) return 0;
  if (a >= 0xC2 && a <= 0xDF) return 2;
  if (!continues(byte_at(text, 2))) return 0;
  const bool overlong = (a == 0xE0 && b < 0xA0) || (a == 0xF0 && b < 0x90);
  if (overlong || (a == 0xED && b > 0x9F) || (a == 0xF4 && b > 0x8F)) return 0;
  if (a >= 0xE0 && a <= 0xEF) return 3;
  return a >= 0xF0 && a <= 0xF4 && continues(byte_at(text, 3)) ? 4 : 0;
}

// What moves the cursor, rings, or starts a new line on some terminal or in some editor.
bool is_control(std::string_view character) {
  const unsigned a = byte_at(character, 0);
  if (character.size() == 1) return a < 0x20 || a == 0x7F;
  if (character.size() == 2) return a == 0xC2 && byte_at(character, 1) < 0xA0;
  return character == "\u2028" || character == "\u2029";
}

// One line of UTF-8: white space becomes a blank, any other control or stray byte a "?".
std::string one_line(std::string_view text) {
  std::string line;
  line.reserve(text.size());
  while (!text.empty()) {
    const std::size_t length = utf8_length(text);
    const std::string_view character = text.substr(0, std::max<std::size_t>(length, 1));
    const bool blank = character == "\n" || character == "\t" || character == "\r";
    if (blank) {
      line += ' ';
    } else if (length == 0 || is_control(character)) {
      line += '?';
    } else {
      line += character;
    }
    text.remove_prefix(character.size());
  }
  return line;
}

std::string cut_end(std::string text, std::size_t longest) {
  if (text.size() <= longest) return text;
  std::size_t end = longest - cut_mark.size();
  while (continues(byte_at(text, end))) --end;
  text.resize(end);
  return text += cut_mark;
}

std::string cut_front(std::string text, std::size_t longest) {
  if (text.size() <= longest) return text;
  std::size_t begin = text.size() - (longest - cut_mark.size());
  while (continues(byte_at(text, begin))) ++begin;
  return std::string(cut_mark) + text.substr(begin);
}

std::string place_text(const ErrorPlace& place) {
  std::string text;
  if (!place.file.empty()) text += cut_front(one_line(place.file), longest_file) + ":";
  if (place.line > 0) {
    text += (text.empty() ? "line " : "") + std::to_string(place.line) + ":";
    if (place.column > 0) text += std::to_string(place.column) + ":";
  }
  if (!text.empty()) text += " ";
  if (place.element > 0) text += "element " + std::to_string(place.element) + ": ";
  return text;
}

}  // namespace

std::string_view to_string(ErrorCode code) {
  const auto found = std::find_if(names.begin(), names.end(),
                                  [code](const NamedCode& n) { return n.code == code; });
  return found == names.end() ? "unknown" : found->name;
}

Error::Error(ErrorCode code, std::string message, ErrorPlace place)
    : code_(code),
      message_(one_line(message)),
      place_(std::move(place)),
      text_(cut_end(place_text(place_) + message_, longest_text)) {}

Error Error::within(const ErrorPlace& outer) const {
  ErrorPlace place = place_;
  if (place.file.empty()) place.file = outer.file;
  if (place.line == 0) {
    place.line = outer.line;
    if (place.column == 0) place.column = outer.column;
  }
  if (place.element == 0) place.element = outer.element;
  return {code_, message_, place};
}

}  // namespace chromacore
