#pragma once

#include <string>

#include "io/case_file.hpp"

/// The case of any state of a branch from that of the first, which is the one that its folder
/// keeps.
namespace lidwright {

/// `text`: case_as_read.toml, read from `path`; `value` of `key` as branch.csv has it, in the units
/// of the file that the user gave. Throws InputError where the first state's case does not tell:
/// along a key of [body] that changes the units of the others, and along one that the written case
/// says in other words.
Case case_along(const std::string& text, const std::string& path, const std::string& key,
                double value);

}  // namespace lidwright
