#include "app/verb_list.hpp"

#include <fmt/format.h>

#include <algorithm>

namespace lidwright {

Takes OptionEntry::takes() const {
  if (value.empty()) return Takes::Nothing;
  if (!words.empty()) return Takes::Words;
  if (value == "CASE") return Takes::CaseFile;
  if (value == "FILE") return Takes::File;
  if (value == "FOLDER" || value == "RUN") return Takes::Folder;
  if (value.find("KEY=") != std::string::npos) return Takes::CaseKey;
  return Takes::Text;
}

const VerbEntry* ProgramEntry::find(const std::string& verb) const {
  const auto found = std::find_if(verbs.begin(), verbs.end(),
                                  [&](const VerbEntry& entry) { return entry.name == verb; });
  return found == verbs.end() ? nullptr : &*found;
}

std::string option_head(const OptionEntry& option) {
  if (option.argument()) return option.value;
  const std::string names = fmt::format("{}", fmt::join(option.names, ", "));
  return option.value.empty() ? names : names + " " + option.value;
}

}  // namespace lidwright
