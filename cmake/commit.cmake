# Tells one source file what the program was built from: LIDWRIGHT_VERSION, LIDWRIGHT_COMMIT, LIDWRIGHT_FLAGS and
# LIDWRIGHT_BUILD_TYPE are defined there and nowhere else, so that a commit recompiles one file. The commit is
# looked up at every build (a value from configure time would go stale); it ends in "+" when tracked files
# differ from it.
#
# This file is also the script that does the looking up: cmake -D HEADER=... -P commit.cmake
function(lidwright_stamp target source)
  set(header ${CMAKE_BINARY_DIR}/generated/commit.hpp)
  add_custom_target(commit BYPRODUCTS ${header}
    COMMAND ${CMAKE_COMMAND} -D HEADER=${header} -P ${CMAKE_CURRENT_FUNCTION_LIST_FILE}
    WORKING_DIRECTORY ${CMAKE_SOURCE_DIR} COMMENT "Looking up the commit")
  add_dependencies(${target} commit)
  string(TOUPPER "${CMAKE_BUILD_TYPE}" type)
  string(STRIP "${CMAKE_CXX_FLAGS} ${CMAKE_CXX_FLAGS_${type}}" flags)
  set_source_files_properties(${source} PROPERTIES
    COMPILE_DEFINITIONS
      "LIDWRIGHT_VERSION=\"${PROJECT_VERSION}\";LIDWRIGHT_BUILD_TYPE=\"${CMAKE_BUILD_TYPE}\";LIDWRIGHT_FLAGS=\"${flags}\""
    COMPILE_OPTIONS "-include;${header}"
    OBJECT_DEPENDS ${header})
endfunction()

if(CMAKE_SCRIPT_MODE_FILE)
  cmake_policy(VERSION 3.25)
  set(commit unknown)
  execute_process(COMMAND git rev-parse --short=12 HEAD OUTPUT_VARIABLE found RESULT_VARIABLE code
                  OUTPUT_STRIP_TRAILING_WHITESPACE ERROR_QUIET)
  if(code STREQUAL 0)
    execute_process(COMMAND git diff --quiet HEAD -- RESULT_VARIABLE differs ERROR_QUIET)
    set(commit ${found})
    if(NOT differs STREQUAL 0)
      string(APPEND commit "+")
    endif()
  endif()
  file(CONFIGURE OUTPUT ${HEADER} CONTENT "#define LIDWRIGHT_COMMIT \"@commit@\"\n" @ONLY)
endif()
