#pragma once

#include <cstddef>
#include <string>

/// Text for a terminal.
namespace lidwright {

/// Columns that everything the program says at length keeps to.
inline constexpr std::size_t terminal_columns = 80;

/// The words of `text` on lines of at most 80 columns that begin with `indent` blanks, each line
/// ended; a longer word stands alone. Line breaks of `text` are blanks.
std::string wrapped(const std::string& text, std::size_t indent);

}  // namespace lidwright
