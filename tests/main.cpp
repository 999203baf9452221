// The main function of every test program. It takes the locale of its surroundings, so that the
// same tests can run a second time where a decimal sign is a comma.
#define DOCTEST_CONFIG_IMPLEMENT
#include <doctest/doctest.h>

#include <clocale>
#include <cstdlib>
#include <iostream>
#include <locale>
#include <string_view>

namespace {

/// False where the locale asked for does not exist; the "C" locale then stays.
bool take_locale_of_surroundings() {
  if (std::setlocale(LC_ALL, "") == nullptr) return false;
  std::locale::global(std::locale(""));
  return true;
}

bool has_decimal_comma() { return std::string_view(std::localeconv()->decimal_point) == ","; }

}  // namespace

int main(int argc, char** argv) {
  const bool taken = take_locale_of_surroundings();
  if (std::getenv("CHROMACORE_DECIMAL_COMMA") != nullptr && !(taken && has_decimal_comma())) {
    std::cerr << "this run needs a locale with a decimal comma: localedef -i de_DE -f UTF-8 "
                 "de_DE.UTF-8\n";
    return 1;
  }
  return doctest::Context(argc, argv).run();
}
