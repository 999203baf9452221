# The library's target, empty: the lists in CMakeLists.txt fill it.
add_library(chromacore)
add_library(chromacore::chromacore ALIAS chromacore)
target_compile_features(chromacore PUBLIC cxx_std_20)
target_include_directories(chromacore PRIVATE src)
target_sources(chromacore PUBLIC FILE_SET HEADERS BASE_DIRS include)
target_link_libraries(chromacore
                      PUBLIC Boost::headers
                      PRIVATE fmt::fmt tomlplusplus::tomlplusplus hwy::hwy
                              $<BUILD_INTERFACE:chromacore_build_headers>)
set_target_properties(chromacore PROPERTIES
  LINKER_LANGUAGE CXX
  VERSION ${PROJECT_VERSION}
  SOVERSION ${PROJECT_VERSION_MAJOR}
  VERIFY_INTERFACE_HEADER_SETS ON)  # --target all_verify_interface_header_sets
