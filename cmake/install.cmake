# `cmake --install`: all that the installed program and its reader need. docs/install.md lists it.
include(cmake/papers.cmake)
set(CPACK_DEBIAN_PACKAGE_RELEASE 1)
set(CPACK_DEBIAN_PACKAGE_MAINTAINER "lidwright developers <none@invalid>")
set(papers ${CMAKE_BINARY_DIR}/papers)
lidwright_papers(lidwright ${papers})

install(TARGETS lidwright)
install(DIRECTORY benchmarks/physics/ DESTINATION share/lidwright/benchmarks)  # app/verify_verb.cpp looks there
install(DIRECTORY cases/ DESTINATION share/doc/lidwright/examples)
install(DIRECTORY docs DESTINATION share/doc/lidwright)
install(FILES README.md CITATION.cff DESTINATION share/doc/lidwright)
install(FILES ${papers}/copyright ${papers}/changelog.gz ${papers}/changelog.Debian.gz DESTINATION share/doc/lidwright)
install(DIRECTORY ${papers}/man1 DESTINATION share/man)
install(FILES ${papers}/lidwright.bash DESTINATION share/bash-completion/completions RENAME lidwright)
install(FILES ${papers}/_lidwright DESTINATION share/zsh/site-functions)
install(FILES ${papers}/lidwright.fish DESTINATION share/fish/vendor_completions.d)

# `cpack`, called by `./dev package`: a package for Debian 12.
set(CPACK_GENERATOR DEB)
set(CPACK_PACKAGE_NAME lidwright)
set(CPACK_PACKAGE_VENDOR "lidwright developers")
set(CPACK_PACKAGE_DESCRIPTION_SUMMARY "convection in the mantles of rocky bodies")
set(CPACK_DEBIAN_PACKAGE_DESCRIPTION
"Computes in two dimensions how the mantle of a rocky body convects: heat flow,
temperature, velocity, regime and thickness of the lid, with error bars; in
time, as the steady state, or at the onset of convection. One readable case
file describes a run; results are tables, pictures and files for VTK viewers.
.
This package runs on any 64-bit PC. Built from source for newer processors the
program is somewhat faster.")
set(CPACK_DEBIAN_PACKAGE_SECTION science)
set(CPACK_DEBIAN_FILE_NAME DEB-DEFAULT)
set(CPACK_DEBIAN_PACKAGE_SHLIBDEPS ON)
# Letters of the pictures; the fast BLAS by name, since any BLAS satisfies the libraries.
set(CPACK_DEBIAN_PACKAGE_DEPENDS "fonts-dejavu-core, libopenblas0-pthread")
set(CPACK_DEBIAN_PACKAGE_RECOMMENDS "openmpi-bin")
set(CPACK_DEBIAN_PACKAGE_SUGGESTS "paraview")
set(CPACK_STRIP_FILES ON)
set(CPACK_INSTALL_DEFAULT_DIRECTORY_PERMISSIONS
  OWNER_READ OWNER_WRITE OWNER_EXECUTE GROUP_READ GROUP_EXECUTE WORLD_READ WORLD_EXECUTE)
include(CPack)
