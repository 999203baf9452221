# How everything in this project is compiled, and with what.
set(CMAKE_CXX_STANDARD 20)
set(CMAKE_CXX_STANDARD_REQUIRED ON)
set(CMAKE_CXX_EXTENSIONS OFF)
set(CMAKE_POSITION_INDEPENDENT_CODE ON)
set(CMAKE_RUNTIME_OUTPUT_DIRECTORY ${CMAKE_CURRENT_BINARY_DIR}/bin)
if(NOT CMAKE_BUILD_TYPE AND NOT CMAKE_CONFIGURATION_TYPES)
  set(CMAKE_BUILD_TYPE Release)
endif()

# A sum of products keeps its digits on every machine: no fused operations behind our back.
add_compile_options(-ffp-contract=off)
if(PROJECT_IS_TOP_LEVEL)
  add_compile_options(-Wall -Wextra -Wconversion)
endif()
if(CHROMACORE_WERROR)
  add_compile_options(-Werror)
endif()

find_package(Boost 1.74 REQUIRED)  # headers: Boost.Units, the only one that users see
find_package(fmt REQUIRED)
find_package(tomlplusplus REQUIRED)
find_package(hwy CONFIG REQUIRED)
find_package(nlohmann_json REQUIRED)
find_package(Eigen3 REQUIRED NO_MODULE)
# Ceres by its headers alone; the library itself is never linked.
find_path(CHROMACORE_CERES_INCLUDE_DIR ceres/jet.h REQUIRED)
mark_as_advanced(CHROMACORE_CERES_INCLUDE_DIR)

# Headers that the library needs while it is built and its users do not.
add_library(chromacore_build_headers INTERFACE)
target_include_directories(chromacore_build_headers SYSTEM
                           INTERFACE ${CHROMACORE_CERES_INCLUDE_DIR})
target_link_libraries(chromacore_build_headers
                      INTERFACE Eigen3::Eigen nlohmann_json::nlohmann_json)
