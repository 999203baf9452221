# The words of the list in CMakeLists.txt.
set(decimal_comma LC_ALL=de_DE.UTF-8 CHROMACORE_DECIMAL_COMMA=1)

add_library(chromacore_test_main OBJECT main.cpp)
target_link_libraries(chromacore_test_main PUBLIC doctest::doctest)

# A command as two tests: NAME and NAME_decimal_comma.
function(chromacore_twice name)
  add_test(NAME ${name} COMMAND ${ARGN})
  add_test(NAME ${name}_decimal_comma COMMAND ${ARGN})
  set_tests_properties(${name}_decimal_comma PROPERTIES ENVIRONMENT "${decimal_comma}")
endfunction()

function(chromacore_test name)
  set(target test_${name})
  add_executable(${target} ${name}.cpp)
  target_include_directories(${target} PRIVATE ${PROJECT_SOURCE_DIR}/src
                                               ${CMAKE_CURRENT_SOURCE_DIR})
  target_compile_definitions(${target} PRIVATE CHROMACORE_FOLDER="${PROJECT_SOURCE_DIR}")
  target_link_libraries(${target} PRIVATE chromacore_test_main chromacore::chromacore
                                          chromacore_build_headers fmt::fmt ${ARGN})
  # Test programs are compiled far more often than they are run.
  target_compile_options(${target} PRIVATE $<$<CONFIG:Release>:-O0>)
  chromacore_twice(${name} ${target})
endfunction()

function(chromacore_script name)
  chromacore_twice(${name} ${CHROMACORE_PYTHON} ${CMAKE_CURRENT_SOURCE_DIR}/${name}.py ${ARGN}
                   $<TARGET_FILE:chromacore_cli>)
endfunction()
