#pragma once
/// The one exception that the library throws.
#include <cstdint>
#include <exception>
#include <string>
#include <string_view>

namespace chromacore {

/// What kind of mistake it was. What a solver finds out (infeasible, stopped) is an answer, not an
/// error. The numbers are kept for ever: they are the C interface's status codes.
enum class ErrorCode : std::int32_t {
  bad_value = 1,     ///< a value that its quantity cannot have; give another
  not_set = 2,       ///< something that has no default is missing; set it
  not_found = 3,     ///< no such name; the message has the nearest ones
  ambiguous = 4,     ///< several makers use the name; say MAKER/NAME
  out_of_range = 5,  ///< outside what a source covers; the message has the range
  degenerate = 6,    ///< no focus, no pupil, equal materials: the message says what is lacking
  bad_syntax = 7,    ///< a text that is not TOML, CSV or a number
  unknown_key = 8,   ///< a key that the format does not have; the message has the nearest one
  file_access = 9,   ///< a file that cannot be read or written
  too_large = 10,    ///< past a stated limit of size or depth
  internal = 11,     ///< our fault; please report it
};

/// The code's name as it stands in the enumeration, e.g. "not_found".
[[nodiscard]] std::string_view to_string(ErrorCode code);

/// Where a mistake is. Everything counts from 1; 0 and "" mean: does not apply.
struct ErrorPlace {
  std::string file = {};
  int line = 0;
  int column = 0;
  int element = 0;
};

/// One line that says what, where, what was expected, and the nearest valid choice.
class Error : public std::exception {
 public:
  Error(ErrorCode code, std::string message, ErrorPlace place = {});

  /// `train.toml:14: element 2: MESSAGE` (`train.toml:14:3: ` with a column), as much of it as
  /// applies; one line of UTF-8, at most 400 bytes, cut at a character and ended by "..." where it
  /// would be longer. Control characters and stray bytes become blanks or question marks.
  [[nodiscard]] const char* what() const noexcept override { return text_.c_str(); }
  [[nodiscard]] ErrorCode code() const noexcept { return code_; }
  [[nodiscard]] const std::string& message() const noexcept { return message_; }
  [[nodiscard]] const ErrorPlace& place() const noexcept { return place_; }

  /// The same error with those parts of `outer` that were still unknown, for whoever knows more
  /// about the place than the function that threw.
  [[nodiscard]] Error within(const ErrorPlace& outer) const;

 private:
  ErrorCode code_;
  std::string message_;
  ErrorPlace place_;
  std::string text_;
};

}  // namespace chromacore
