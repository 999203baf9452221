#include "text.hpp"

#include <doctest/doctest.h>

#include <array>
#include <cmath>
#include <limits>
#include <random>

#include "close.hpp"

using namespace chromacore::detail;
using chromacore::test::test_seed;

namespace {

constexpr double inf = std::numeric_limits<double>::infinity();
using Texts = std::vector<std::string>;

}  // namespace

TEST_CASE("number_text: the shortest text that reads back, whatever the locale") {
  CHECK(number_text(0.1) == "0.1");
  CHECK(number_text(1e-7) == "1e-07");
  CHECK(number_text(101325) == "101325");
  CHECK(number_text(-40) == "-40");
  CHECK(number_text(inf) == "inf");
  CHECK(number_text(-inf) == "-inf");
  CHECK(number_text(-std::nan("")) == "nan");
}

TEST_CASE("number_text: rounded to significant digits, without trailing zeros") {
  CHECK(number_text(1.51680003, 4) == "1.517");
  CHECK(number_text(525.6400001, 5) == "525.64");
  CHECK(number_text(2.5000000001, 7) == "2.5");
  CHECK(number_text(0, 6) == "0");
  CHECK(number_text(1.0 / 3, 100) == number_text(1.0 / 3, 17));
  CHECK(number_text(-std::nan(""), 3) == "nan");
}

TEST_CASE("parse_number: takes back every number that number_text wrote") {
  const auto seed = test_seed();
  CAPTURE(seed);
  std::mt19937_64 random(seed);
  std::uniform_real_distribution<double> exponent(-300, 300);
  for (int i = 0; i < 1000; ++i) {
    const double value = std::pow(10, exponent(random)) * (i % 2 == 0 ? 1 : -1);
    CHECK(parse_number(number_text(value)) == value);
  }
  for (const double value : {0.0, inf, -inf, std::numeric_limits<double>::denorm_min()})
    CHECK(parse_number(number_text(value)) == value);
  CHECK(std::isnan(parse_number("nan").value()));
}

TEST_CASE("parse_number: the whole text or nothing") {
  CHECK(parse_number("1.5") == 1.5);
  CHECK(parse_number("+1.5") == 1.5);
  CHECK(parse_number("-2e3") == -2000.0);
  CHECK(parse_number(".5") == 0.5);
  for (const char* text : {"", " ", "1,5", "1.5 ", " 1.5", "1.5mm", "+-1", "++1", "+", "0x10",
                           "1.5.2", "one", "1e999"}) {
    CAPTURE(text);
    CHECK_FALSE(parse_number(text).has_value());
  }
}

TEST_CASE("nearest: what a person most likely meant comes first") {
  constexpr std::array<std::string_view, 8> glasses = {"K7",     "BK7G18", "N-BK7", "N-BK10",
                                                       "N-SF11", "SF11",   "F2",    "S-LAH79"};
  CHECK(nearest("NBK7", glasses).front() == "N-BK7");
  CHECK(nearest("n-bk7", glasses).front() == "N-BK7");
  CHECK(nearest("BK7", glasses).front() == "N-BK7");
  CHECK(nearest("N-BK8", glasses).front() == "N-BK7");
  CHECK(nearest("SF11", glasses).front() == "SF11");
  CHECK(nearest("LAH79", glasses) == Texts{"S-LAH79"});
  constexpr std::array<std::string_view, 3> keys = {"wavelengths_um", "weights", "reference_um"};
  CHECK(nearest("wavelenghts_um", keys) == Texts{"wavelengths_um"});
  CHECK(nearest("weight", keys) == Texts{"weights"});
}

TEST_CASE("nearest: nothing for what shares nothing, and no more than was asked for") {
  constexpr std::array<std::string_view, 4> names = {"aa", "ab", "ac", "ad"};
  CHECK(nearest("zz", names).empty());
  CHECK(nearest("", names).empty());
  CHECK(nearest(std::string(100000, 'a'), names).empty());
  CHECK(nearest("a", names, 2) == Texts{"aa", "ab"});
  CHECK(nearest("a", {}, 2).empty());
}

TEST_CASE("joined, lower_case, trimmed") {
  CHECK(joined(Texts{"a", "b", "c"}) == "a, b, c");
  CHECK(joined(Texts{"a", "a"}, " and ") == "a and a");
  CHECK(joined(Texts{}) == "");
  CHECK(lower_case("N-BK7 \xC3\x84") == "n-bk7 \xC3\x84");
  CHECK(trimmed(" \t a b\r\n") == "a b");
  CHECK(trimmed(" \n") == "");
}
