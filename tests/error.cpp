#include <doctest/doctest.h>

#include <chromacore/error.hpp>
#include <cstdint>
#include <set>
#include <string>
#include <type_traits>

using namespace chromacore;

namespace {

std::string text(std::string message, ErrorPlace place = {}) {
  return Error(ErrorCode::bad_value, std::move(message), std::move(place)).what();
}

// A new code without a case here is a warning, hence an error of the build.
bool exists(ErrorCode code) {
  switch (code) {
    case ErrorCode::bad_value:
    case ErrorCode::not_set:
    case ErrorCode::not_found:
    case ErrorCode::ambiguous:
    case ErrorCode::out_of_range:
    case ErrorCode::degenerate:
    case ErrorCode::bad_syntax:
    case ErrorCode::unknown_key:
    case ErrorCode::file_access:
    case ErrorCode::too_large:
    case ErrorCode::internal:
      return true;
  }
  return false;
}

static_assert(std::is_base_of_v<std::exception, Error>);

}  // namespace

TEST_CASE("error codes: the enumeration and the table of names agree") {
  std::set<std::string_view> seen;
  for (std::int32_t number = -1; number <= 50; ++number) {
    const auto code = static_cast<ErrorCode>(number);
    CAPTURE(number);
    CHECK((to_string(code) != "unknown") == exists(code));
    if (exists(code)) CHECK(seen.insert(to_string(code)).second);
  }
  CHECK(seen.size() == 11);
}

TEST_CASE("error codes: the numbers and names that C programs keep") {
  CHECK(static_cast<int>(ErrorCode::bad_value) == 1);
  CHECK(static_cast<int>(ErrorCode::internal) == 11);
  CHECK(to_string(ErrorCode::not_found) == "not_found");
  CHECK(to_string(ErrorCode::too_large) == "too_large");
}

TEST_CASE("error: the line says as much about the place as is known") {
  CHECK(text("no focus") == "no focus");
  CHECK(text("no focus", {.file = "a.toml"}) == "a.toml: no focus");
  CHECK(text("no focus", {.file = "a.toml", .line = 14}) == "a.toml:14: no focus");
  CHECK(text("no focus", {.file = "a.toml", .line = 14, .column = 3}) == "a.toml:14:3: no focus");
  CHECK(text("no focus", {.file = "a.toml", .line = 14, .element = 2}) ==
        "a.toml:14: element 2: no focus");
  CHECK(text("no focus", {.line = 14}) == "line 14: no focus");
  CHECK(text("no focus", {.element = 2}) == "element 2: no focus");
}

TEST_CASE("error: keeps what it was made of") {
  const Error error(ErrorCode::not_found, "no material \"X\"", {.file = "a.toml", .line = 3});
  CHECK(error.code() == ErrorCode::not_found);
  CHECK(error.message() == "no material \"X\"");
  CHECK(error.place().file == "a.toml");
  CHECK(error.place().line == 3);
}

TEST_CASE("error: within fills in what is still unknown, and nothing else") {
  const Error inner(ErrorCode::bad_value, "radius is 0", {.element = 3});
  const Error outer = inner.within({.file = "a.toml", .line = 21, .column = 4, .element = 9});
  CHECK(std::string(outer.what()) == "a.toml:21:4: element 3: radius is 0");
  CHECK(outer.code() == ErrorCode::bad_value);
  const Error again = outer.within({.file = "b.toml", .line = 1});
  CHECK(std::string(again.what()) == outer.what());
  // A column belongs to its line.
  CHECK(
      std::string(
          Error(ErrorCode::bad_value, "x", {.line = 2}).within({.line = 9, .column = 7}).what()) ==
      "line 2: x");
}

TEST_CASE("error: one line, whatever came in") {
  CHECK(text("a\nb\tc\r\nd") == "a b c  d");
  CHECK(text(std::string("a\0b\x1B[31m\x7F", 9)) == "a?b?[31m?");
  CHECK(text("caf\u00E9 \u03BB \U0001F52D") == "caf\u00E9 \u03BB \U0001F52D");
  CHECK(text("\u0085\u2028\u2029") == "???");
  CHECK(text("x", {.file = "a\nb"}) == "a b: x");
}

TEST_CASE("error: bytes that are not UTF-8 become question marks") {
  CHECK(text("\xFF\x80 \xC3") == "?? ?");
  CHECK(text("\xC0\xAF") == "??");            // overlong
  CHECK(text("\xED\xA0\x80") == "???");       // half of a surrogate pair
  CHECK(text("\xF4\x90\x80\x80") == "????");  // past U+10FFFF
  CHECK(text("\xE2\x82") == "??");            // cut off
}

TEST_CASE("error: at most 400 bytes, cut at a character") {
  CHECK(text(std::string(400, 'x')) == std::string(400, 'x'));
  CHECK(text(std::string(401, 'x')) == std::string(397, 'x') + "...");
  for (std::size_t shift = 0; shift < 4; ++shift) {
    std::string message(shift, 'x');
    for (int i = 0; i < 200; ++i) message += "\U0001F52D";
    const std::string got = text(message);
    CAPTURE(shift);
    CHECK(got.size() <= 400);
    CHECK(got.size() > 396);
    CHECK((got.size() - shift) % 4 == 3);  // whole characters of 4 bytes, then "..."
  }
}

TEST_CASE("error: a deep path leaves room for the message") {
  const std::string got =
      text("radius is 0", {.file = std::string(500, 'd') + "/a.toml", .line = 7});
  CHECK(got.starts_with("...ddd"));
  CHECK(got.ends_with("/a.toml:7: radius is 0"));
}
