#pragma once

// The one place that holds the version: CMake reads the three numbers from here.
#define CHROMACORE_VERSION_MAJOR 0
#define CHROMACORE_VERSION_MINOR 1
#define CHROMACORE_VERSION_PATCH 0

#define CHROMACORE_DETAIL_TEXT(number) #number
#define CHROMACORE_DETAIL_VERSION(major, minor, patch) \
  CHROMACORE_DETAIL_TEXT(major) "." CHROMACORE_DETAIL_TEXT(minor) "." CHROMACORE_DETAIL_TEXT(patch)

namespace chromacore {

/// Version of these headers, "major.minor.patch". The same major version keeps the interface
/// (while it is 0, a minor version may change it: see CHANGELOG.md).
inline constexpr const char* version = CHROMACORE_DETAIL_VERSION(
    CHROMACORE_VERSION_MAJOR, CHROMACORE_VERSION_MINOR, CHROMACORE_VERSION_PATCH);

}  // namespace chromacore
