# Debian can hold PETSc with real and with complex numbers side by side, and an alternative chooses.
find_file(PETSC_CONFIGURATION petscconf.h PATHS ${PETSC_INCLUDE_DIRS} NO_DEFAULT_PATH REQUIRED)
file(STRINGS ${PETSC_CONFIGURATION} petsc_is_complex REGEX "define PETSC_USE_COMPLEX")
if(petsc_is_complex)
  message(FATAL_ERROR "PETSc at ${PETSC_CONFIGURATION} works with complex numbers; lidwright needs the real one.\n"
                      "Choose it with: update-alternatives --config petsc")
endif()
