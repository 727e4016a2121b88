#pragma once

#include <CLI/CLI.hpp>
#include <string>

/// What is wrong with a command line that the library could not read, in the words of all other
/// messages: the option first, then what is wrong, then the remedy.
namespace lidwright {

/// `first`: the word behind the program's name; "" when there is none.
std::string parse_message(CLI::App&, const CLI::ParseError&, const std::string& first);

}  // namespace lidwright
