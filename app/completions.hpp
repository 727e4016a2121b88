#pragma once

#include <string>
#include <vector>

#include "app/verb_list.hpp"

/// Completion scripts for shells, made from the list of verbs and options: verbs, options, words to
/// choose from, case files, folders, and case keys behind --set. Pure.
namespace lidwright {

/// bash, zsh, fish.
std::vector<std::string> shells();

/// `shell`: one of shells().
std::string completions(const ProgramEntry&, const std::string& shell);

std::string bash_completions(const ProgramEntry&);
std::string zsh_completions(const ProgramEntry&);
std::string fish_completions(const ProgramEntry&);

}  // namespace lidwright
