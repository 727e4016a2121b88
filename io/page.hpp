#pragma once

#include <string>
#include <string_view>

#include "io/run_reader.hpp"

/// A run as one page for a browser: a single HTML file that needs no network. What is on it:
/// docs/report.md.
namespace lidwright {

/// First line and second of every page of this program, by which it is known.
inline constexpr std::string_view page_mark = "<!doctype html>\n<!-- lidwright report -->\n";

struct PageState {
  bool running = false;  ///< the run goes on: the page says so
  double reload = 0;     ///< s after which a browser reads it anew while the run goes on; 0: never
};

/// The whole file. Throws InputError when the run cannot be read.
std::string page_of(const SavedRun&, const PageState&);

enum class ForeignFile { Refuse, Replace };
/// Throws InputError when there is a file at `path` that is no page of this program.
void refuse_foreign_page(const std::string& path);
/// Writes atomically. Throws InputError as above, and OutputError.
void write_page(const std::string& path, const std::string& page, ForeignFile);

}  // namespace lidwright
