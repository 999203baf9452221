# What must hold for the repository as a whole, and for what is installed.
set(here ${CMAKE_CURRENT_SOURCE_DIR})

add_test(NAME try_checks COMMAND ${CHROMACORE_PYTHON} ${here}/try_checks.py)
add_test(NAME floors COMMAND ${CHROMACORE_PYTHON} -B ${here}/check_floors.py ${PROJECT_SOURCE_DIR})
add_test(NAME functions
         COMMAND ${CHROMACORE_PYTHON} -B ${here}/check_functions.py ${PROJECT_SOURCE_DIR})

# The rest is about the library that users get: without assertions and sanitizers.
if(NOT CMAKE_BUILD_TYPE STREQUAL "Release")
  return()
endif()

add_test(NAME reference_table  # is what its program makes today
         COMMAND ${CHROMACORE_PYTHON} -B ${here}/reference/trains.py --check)

add_test(NAME headers  # each public header compiles alone
         COMMAND ${CMAKE_COMMAND} --build ${PROJECT_BINARY_DIR}
                 --target all_verify_interface_header_sets)

# The same objects as a shared library, so that it shows what it takes from outside.
add_library(chromacore_as_shared SHARED $<TARGET_OBJECTS:chromacore>)
target_link_libraries(chromacore_as_shared PRIVATE fmt::fmt tomlplusplus::tomlplusplus hwy::hwy)
target_link_options(chromacore_as_shared PRIVATE -Wl,-z,defs)
set_target_properties(chromacore_as_shared PROPERTIES LINKER_LANGUAGE CXX)
add_test(NAME symbols COMMAND ${here}/check_symbols $<TARGET_FILE:chromacore_as_shared>)

set(prefix ${PROJECT_BINARY_DIR}/outside/installed)
add_test(NAME install COMMAND ${CMAKE_COMMAND} --install ${PROJECT_BINARY_DIR} --prefix ${prefix})
set_tests_properties(install PROPERTIES FIXTURES_SETUP installed)

function(chromacore_outside name way compiler)
  add_test(NAME ${name} COMMAND ${here}/outside/run ${way} ${prefix} ${compiler}
                                ${PROJECT_BINARY_DIR}/outside/${name})
  set_tests_properties(${name} PROPERTIES FIXTURES_REQUIRED installed)
endfunction()

foreach(compiler g++ clang++)
  find_program(CHROMACORE_${compiler} ${compiler})
  if(CHROMACORE_${compiler})
    chromacore_outside(outside_${compiler} cmake ${CHROMACORE_${compiler}})
  endif()
endforeach()
chromacore_outside(outside_pkg_config pkg-config ${CMAKE_CXX_COMPILER})
