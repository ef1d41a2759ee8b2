# The exact-arithmetic libraries as targets. Debian ships no CMake package of them, so this file is used by the build and
# installed for the projects that use the installed library.
foreach(name flint mpfr gmpxx gmp)
  if(NOT TARGET gramproof::${name})
    find_library(GRAMPROOF_${name}_LIBRARY ${name} REQUIRED)
    mark_as_advanced(GRAMPROOF_${name}_LIBRARY)
    add_library(gramproof::${name} UNKNOWN IMPORTED)
    set_target_properties(gramproof::${name} PROPERTIES IMPORTED_LOCATION ${GRAMPROOF_${name}_LIBRARY})
  endif()
endforeach()
