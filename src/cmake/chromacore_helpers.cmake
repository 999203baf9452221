# The words of the lists in CMakeLists.txt.

# chromacore_unit(material): include/chromacore/material.hpp and src/material.cpp.
function(chromacore_unit name)
  cmake_parse_arguments(unit "HEADER_ONLY" "" "" ${ARGN})
  target_sources(chromacore PUBLIC FILE_SET HEADERS FILES include/chromacore/${name}.hpp)
  if(NOT unit_HEADER_ONLY)
    chromacore_internal(${name})
  endif()
endfunction()

# chromacore_internal(model): src/model.cpp.
function(chromacore_internal name)
  target_sources(chromacore PRIVATE src/${name}.cpp)
endfunction()

# chromacore_data(glasses): src/data/glasses.csv becomes
#   namespace chromacore::detail { extern const std::string_view data_glasses; }
# made again whenever the file changes.
function(chromacore_data name)
  set(file ${PROJECT_SOURCE_DIR}/src/data/${name}.csv)
  set(source ${PROJECT_BINARY_DIR}/data/${name}.cpp)
  set(script ${PROJECT_SOURCE_DIR}/src/cmake/embed.cmake)
  add_custom_command(
    OUTPUT ${source}
    COMMAND ${CMAKE_COMMAND} -D NAME=${name} -D FILE=${file} -D OUT=${source} -P ${script}
    DEPENDS ${file} ${script}
    COMMENT "Embedding ${name}.csv"
    VERBATIM)
  target_sources(chromacore PRIVATE ${source})
endfunction()
