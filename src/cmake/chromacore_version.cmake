# Sets chromacore_version from the one place that holds it.
file(READ ${CMAKE_CURRENT_LIST_DIR}/../../include/chromacore/version.hpp text)
set(chromacore_version "")
foreach(part MAJOR MINOR PATCH)
  if(NOT text MATCHES "#define CHROMACORE_VERSION_${part} ([0-9]+)")
    message(FATAL_ERROR "include/chromacore/version.hpp: no CHROMACORE_VERSION_${part}")
  endif()
  list(APPEND chromacore_version ${CMAKE_MATCH_1})
endforeach()
list(JOIN chromacore_version "." chromacore_version)
set_property(DIRECTORY APPEND PROPERTY CMAKE_CONFIGURE_DEPENDS
             ${CMAKE_CURRENT_LIST_DIR}/../../include/chromacore/version.hpp)
