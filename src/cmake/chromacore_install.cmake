# What `cmake --install` copies, and how others find it: find_package(chromacore), pkg-config.
include(GNUInstallDirs)
include(CMakePackageConfigHelpers)
set(cmake_dir ${CMAKE_INSTALL_LIBDIR}/cmake/chromacore)
set(schema_dir ${CMAKE_INSTALL_DATADIR}/chromacore/schema)
set(examples_dir ${CMAKE_INSTALL_DATADIR}/chromacore/examples)

install(TARGETS chromacore EXPORT chromacore-targets FILE_SET HEADERS)
install(EXPORT chromacore-targets NAMESPACE chromacore:: DESTINATION ${cmake_dir})
configure_package_config_file(
  src/cmake/chromacore-config.cmake.in chromacore-config.cmake
  INSTALL_DESTINATION ${cmake_dir} PATH_VARS schema_dir examples_dir)
write_basic_package_version_file(chromacore-config-version.cmake COMPATIBILITY SameMajorVersion)
install(FILES ${PROJECT_BINARY_DIR}/chromacore-config.cmake
              ${PROJECT_BINARY_DIR}/chromacore-config-version.cmake
        DESTINATION ${cmake_dir})

set(pc_dir ${CMAKE_INSTALL_LIBDIR}/pkgconfig)
file(RELATIVE_PATH pc_to_prefix /${pc_dir} /)
# Who links a static library links its dependencies too.
set(pc_requires Requires)
if(BUILD_SHARED_LIBS)
  set(pc_requires Requires.private)
endif()
configure_file(src/cmake/chromacore.pc.in chromacore.pc @ONLY)
install(FILES ${PROJECT_BINARY_DIR}/chromacore.pc DESTINATION ${pc_dir})

install(DIRECTORY src/schema/ DESTINATION ${schema_dir} FILES_MATCHING PATTERN "*.json")
install(DIRECTORY examples/ DESTINATION ${examples_dir} FILES_MATCHING PATTERN "*.toml"
                                                        PATTERN "*.csv")
if(TARGET chromacore_cli)
  install(TARGETS chromacore_cli)
endif()
