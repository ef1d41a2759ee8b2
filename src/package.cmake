# What `cmake --install` puts where, and the package file by which another project finds the library:
#   find_package(gramproof REQUIRED)
#   target_link_libraries(program PRIVATE gramproof::gramproof)
# Compiler options of this build (warnings, -march=native, sanitizers) stay here: gramproof_options is never exported.
include(CMakePackageConfigHelpers)

add_library(gramproof_library INTERFACE)
add_library(gramproof::gramproof ALIAS gramproof_library)
set_target_properties(gramproof_library PROPERTIES EXPORT_NAME gramproof)
target_link_libraries(gramproof_library INTERFACE ${library_stations})

set(package_directory ${CMAKE_INSTALL_LIBDIR}/cmake/gramproof)
install(TARGETS gramproof_library ${library_stations} EXPORT gramproof_targets ARCHIVE)
install(EXPORT gramproof_targets NAMESPACE gramproof:: DESTINATION ${package_directory})
install(
  DIRECTORY src/
  DESTINATION ${CMAKE_INSTALL_INCLUDEDIR}/gramproof
  FILES_MATCHING
  PATTERN "*.hpp"
  PATTERN "*.inl"
  PATTERN "command" EXCLUDE)

file(GLOB schemas CONFIGURE_DEPENDS ${PROJECT_SOURCE_DIR}/src/report/*.json)
install(FILES ${schemas} DESTINATION ${CMAKE_INSTALL_DATADIR}/gramproof)
install(FILES README.md LICENSE DESTINATION ${CMAKE_INSTALL_DOCDIR})

set(package_file ${PROJECT_BINARY_DIR}/gramproofConfig.cmake)
file(
  CONFIGURE
  OUTPUT ${package_file}
  CONTENT
    [[include(CMakeFindDependencyMacro)
find_dependency(Eigen3 3.4 NO_MODULE)
find_dependency(fmt)
find_dependency(nlohmann_json)
find_dependency(ZLIB)
find_dependency(zstd)
find_dependency(Threads)
include(${CMAKE_CURRENT_LIST_DIR}/packages.cmake)
include(${CMAKE_CURRENT_LIST_DIR}/gramproof_targets.cmake)
]]
  @ONLY)
write_basic_package_version_file(${package_file}.version COMPATIBILITY SameMinorVersion)
install(FILES ${package_file} src/exact/packages.cmake DESTINATION ${package_directory})
install(FILES ${package_file}.version DESTINATION ${package_directory} RENAME gramproofConfigVersion.cmake)
