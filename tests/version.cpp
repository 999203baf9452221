#include "chromacore/version.hpp"

#include <doctest/doctest.h>

#include <string>

TEST_CASE("version: the text holds the three numbers") {
  const std::string want = std::to_string(CHROMACORE_VERSION_MAJOR) + "." +
                           std::to_string(CHROMACORE_VERSION_MINOR) + "." +
                           std::to_string(CHROMACORE_VERSION_PATCH);
  CHECK(chromacore::version == want);
}
