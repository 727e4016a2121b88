#pragma once

#include <CLI/CLI.hpp>
#include <string>
#include <vector>

/// Options whose values are words of a list: the list stands once, and serves to check the command
/// line, to complete it and to explain it.
namespace lidwright {

/// Only these words are taken; the message of a wrong one names them and the nearest.
CLI::Option* one_of(CLI::Option*, const std::vector<std::string>& words);

/// These words are offered by completion; others may be right as well. One that ends in '=' wants
/// more behind it.
CLI::Option* offer(CLI::Option*, const std::vector<std::string>& words);

/// The words of either; empty: none were given.
std::vector<std::string> words_of(CLI::Option*);

/// "png, svg or pdf".
std::string choice_text(const std::vector<std::string>& words);

}  // namespace lidwright
