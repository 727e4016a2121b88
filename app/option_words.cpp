#include "app/option_words.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <sstream>

#include "io/case_entries.hpp"

namespace lidwright {
namespace {

/// The words are kept as the check's name, the one text of a check that the library shows nowhere.
CLI::Option* remember(CLI::Option* option, const std::vector<std::string>& words,
                      const std::function<std::string(std::string&)>& complaint) {
  return option->check(CLI::Validator(complaint, "", fmt::format("{}", fmt::join(words, " "))));
}

}  // namespace

CLI::Option* one_of(CLI::Option* option, const std::vector<std::string>& words) {
  return remember(option, words, [words](std::string& word) -> std::string {
    if (std::find(words.begin(), words.end(), word) != words.end()) return "";
    return fmt::format("must be one of {}, not '{}'{}", fmt::join(words, ", "), word,
                       case_text::nearest(word, words));
  });
}

CLI::Option* offer(CLI::Option* option, const std::vector<std::string>& words) {
  return remember(option, words, [](std::string&) { return std::string(); });
}

std::vector<std::string> words_of(CLI::Option* option) {
  std::vector<std::string> words;
  try {
    std::istringstream names(option->get_validator(0)->get_name());
    for (std::string word; names >> word;) words.push_back(word);
  } catch (const CLI::OptionNotFound&) {
    // no check, no words
  }
  return words;
}

std::string choice_text(const std::vector<std::string>& words) {
  if (words.size() < 2) return words.empty() ? "" : words.front();
  return fmt::format("{} or {}", fmt::join(words.begin(), words.end() - 1, ", "), words.back());
}

}  // namespace lidwright
