#pragma once

#include <charconv>
#include <cmath>
#include <cstdint>
#include <cstdlib>
#include <string_view>

namespace chromacore::test {

/// What a check allows. There is no default: 0 in both means equal to the last bit.
struct Tol {
  double rel = 0;  // times |want|
  double abs = 0;  // in the unit of the two numbers
};

/// |got - want| <= abs + rel |want|. NaN is close to nothing; an infinity only to itself.
inline bool close(double got, double want, Tol tol) {
  if (got == want) return true;
  if (!std::isfinite(got) || !std::isfinite(want)) return false;
  return std::abs(got - want) <= tol.abs + tol.rel * std::abs(want);
}

/// Seed of a random test: the number in CHROMACORE_SEED, else a fixed one. Show it with CAPTURE.
inline std::uint64_t test_seed() {
  constexpr std::uint64_t fixed = 20260101;
  const char* const text = std::getenv("CHROMACORE_SEED");
  if (text == nullptr) return fixed;
  const std::string_view digits = text;
  std::uint64_t seed = fixed;
  std::from_chars(digits.data(), digits.data() + digits.size(), seed);
  return seed;
}

}  // namespace chromacore::test
