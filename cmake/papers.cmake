# What is read beside the program: manual pages and completions, which the built program prints, and copyright and
# changelog as Debian wants them. lidwright_papers(TARGET FOLDER) makes them in FOLDER whenever the program changed.
#
# This file is also the script that makes them: cmake -D PROGRAM=... -D FOLDER=... -P papers.cmake
function(lidwright_papers program folder)
  set(stamp ${folder}/made)
  set(texts ${CMAKE_SOURCE_DIR}/LICENSE ${CMAKE_SOURCE_DIR}/CHANGELOG.md)
  add_custom_command(OUTPUT ${stamp} DEPENDS ${program} ${texts} ${CMAKE_CURRENT_FUNCTION_LIST_FILE}
    COMMAND ${CMAKE_COMMAND} -D PROGRAM=$<TARGET_FILE:${program}> -D FOLDER=${folder}
            -D SOURCE=${CMAKE_SOURCE_DIR} -D VERSION=${PROJECT_VERSION}-${CPACK_DEBIAN_PACKAGE_RELEASE}
            -D "MAINTAINER=${CPACK_DEBIAN_PACKAGE_MAINTAINER}" -D "NOTICE=${DYGRAPHS_NOTICE}" -P ${CMAKE_CURRENT_FUNCTION_LIST_FILE}
    COMMENT "Printing manual pages and completions" VERBATIM)
  add_custom_target(papers ALL DEPENDS ${stamp})
endfunction()

if(NOT CMAKE_SCRIPT_MODE_FILE)
  return()
endif()
cmake_policy(VERSION 3.25)
set(ENV{ASAN_OPTIONS} detect_leaks=0)   # other people's leaks, in a build that looks for ours
set(ENV{OMPI_MCA_ess_singleton_isolated} 1)
# Programs that begin and end at the same time remove each other's folder of a session below /tmp.
set(ENV{OMPI_MCA_orte_tmpdir_base} ${FOLDER}/session)
find_program(GZIP gzip REQUIRED)

function(print_into file)   # what the program prints when called with the other arguments
  execute_process(COMMAND ${PROGRAM} ${ARGN} OUTPUT_FILE ${FOLDER}/${file} COMMAND_ERROR_IS_FATAL ANY)
endfunction()
function(compress file)   # without name and time, so that equal files stay equal
  execute_process(COMMAND ${GZIP} -9 -n -f ${FOLDER}/${file} COMMAND_ERROR_IS_FATAL ANY)
endfunction()

file(REMOVE_RECURSE ${FOLDER})
file(MAKE_DIRECTORY ${FOLDER}/man1 ${FOLDER}/session)
print_into(man1/lidwright.1 manual)
file(STRINGS ${FOLDER}/man1/lidwright.1 lines REGEX "^\\.BR lidwright")
foreach(line ${lines})
  string(REGEX REPLACE "^\\.BR lidwright\\\\-([a-z]+) .*" "\\1" verb "${line}")
  print_into(man1/lidwright-${verb}.1 manual ${verb})
  compress(man1/lidwright-${verb}.1)
endforeach()
compress(man1/lidwright.1)
print_into(lidwright.bash completions bash)
print_into(_lidwright completions zsh)
print_into(lidwright.fish completions fish)
file(REMOVE_RECURSE ${FOLDER}/session)

file(READ ${SOURCE}/LICENSE copyright)
if(NOTICE)
  file(READ ${NOTICE} notice)
  string(APPEND copyright "\n----\n\nThe program holds the chart library of the page that `lidwright report` writes:\n\n${notice}")
endif()
file(WRITE ${FOLDER}/copyright "${copyright}")
configure_file(${SOURCE}/CHANGELOG.md ${FOLDER}/changelog COPYONLY)
compress(changelog)
set(date "Thu, 01 Jan 1970 00:00:00 +0000")   # of a source without history
execute_process(COMMAND git log -1 --format=%cD WORKING_DIRECTORY ${SOURCE} OUTPUT_VARIABLE found RESULT_VARIABLE code
                OUTPUT_STRIP_TRAILING_WHITESPACE ERROR_QUIET)
if(code STREQUAL 0 AND found)
  set(date ${found})
endif()
file(WRITE ${FOLDER}/changelog.Debian
  "lidwright (${VERSION}) bookworm; urgency=medium\n\n  * What is new: changelog.gz.\n\n -- ${MAINTAINER}  ${date}\n")
compress(changelog.Debian)
file(TOUCH ${FOLDER}/made)
