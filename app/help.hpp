#pragma once

#include <string>

#include "app/verb_list.hpp"

/// The text of --help, at most 80 columns wide. Pure.
namespace lidwright {

/// Of the program: what it is, its verbs and options.
std::string program_help(const ProgramEntry&);
/// Of one verb: usage, arguments, options, examples and exit codes.
std::string verb_help(const VerbEntry&);

}  // namespace lidwright
