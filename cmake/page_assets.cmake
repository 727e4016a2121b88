# What io/page_assets.cpp takes into the program: the page's own files and the chart library dygraphs (Debian's
# libjs-dygraphs, MIT licence). No file of them is needed when the program runs.
find_path(DYGRAPHS dygraph.min.js PATHS /usr/share/javascript/dygraphs NO_DEFAULT_PATH REQUIRED)
find_file(DYGRAPHS_NOTICE copyright PATHS /usr/share/doc/libjs-dygraphs NO_DEFAULT_PATH REQUIRED)

function(lidwright_page_assets source)
  set(page ${CMAKE_SOURCE_DIR}/io/page)
  file(GLOB own CONFIGURE_DEPENDS ${page}/*)
  set_source_files_properties(${source} PROPERTIES
    COMPILE_DEFINITIONS
      "LIDWRIGHT_PAGE=\"${page}\";LIDWRIGHT_CHARTS=\"${DYGRAPHS}\";LIDWRIGHT_CHARTS_NOTICE=\"${DYGRAPHS_NOTICE}\""
    OBJECT_DEPENDS
      "${own};${DYGRAPHS}/dygraph.min.js;${DYGRAPHS}/dygraph.min.css;${DYGRAPHS_NOTICE}")
endfunction()
