#pragma once

#include <string>

#include "app/verb_list.hpp"

/// Manual pages in the format of man(7). Pure.
namespace lidwright {

/// lidwright(1).
std::string program_manual(const ProgramEntry&);
/// lidwright-VERB(1).
std::string verb_manual(const ProgramEntry&, const VerbEntry&);

}  // namespace lidwright
