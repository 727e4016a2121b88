#include <fmt/format.h>

#include "app/completions.hpp"

namespace lidwright {
namespace {

constexpr const char* helpers =
    R"(# Completion of lidwright for fish; made by `lidwright completions fish`.

function __lidwright_verb -a verb   # is this the verb on the command line?
    set -l words (commandline -opc | string match -v -- '-*')
    test (count $words) -ge 2; and test $words[2] = $verb
end
function __lidwright_no_verb
    test (count (commandline -opc | string match -v -- '-*')) -eq 1
end
function __lidwright_cases   # case files, and folders on the way to them
    set -l typed (commandline -ct)
    set -l files $typed*.toml
    printf '%s\n' $files
    __fish_complete_directories $typed
end

complete -c lidwright -f
)";

std::string quoted(const std::string& text) {
  std::string out = "'";
  for (const char c : text) {
    if (c == '\'' || c == '\\') out += '\\';
    out += c;
  }
  return out + "'";
}

/// What completes a value, as options of `complete`; empty: nothing does.
std::string action(const OptionEntry& option) {
  const std::string words = fmt::format("{}", fmt::join(option.words, " "));
  switch (option.takes()) {
    case Takes::Words:
      return option.list ? fmt::format("-a '(__fish_append , {})'", words)
                         : fmt::format("-a '{}'", words);
    case Takes::CaseFile:
      return "-a '(__lidwright_cases)'";
    case Takes::File:
      return "-a '(__fish_complete_path)'";
    case Takes::Folder:
      return "-a '(__fish_complete_directories)'";
    case Takes::CaseKey:
      return "-a \"$__lidwright_keys\"";
    default:
      return "";
  }
}

std::string line(const std::string& condition, const std::string& rest, const std::string& help) {
  return fmt::format("complete -c lidwright -n {} {}{}\n", quoted(condition), rest,
                     help.empty() ? "" : " -d " + quoted(help));
}

std::string option_line(const std::string& condition, const OptionEntry& option) {
  std::string rest;
  for (const std::string& name : option.names)
    rest += name.rfind("--", 0) == 0 ? "-l " + name.substr(2) + " " : "-s " + name.substr(1) + " ";
  if (!option.value.empty()) rest += "-x " + action(option);
  while (rest.back() == ' ') rest.pop_back();
  return line(condition, rest, option.help);
}

std::string verb_lines(const VerbEntry& verb) {
  const std::string condition = "__lidwright_verb " + verb.name;
  std::string text;
  for (const OptionEntry& option : verb.options) {
    if (!option.argument())
      text += option_line(condition, option);
    else if (const std::string does = action(option); !does.empty())
      text += line(condition, does, "");
  }
  return text;
}

}  // namespace

std::string fish_completions(const ProgramEntry& program) {
  std::string text = helpers, keys, verbs;
  for (const std::string& key : program.case_keys) keys += (keys.empty() ? "" : " ") + key + "=";
  text += fmt::format("set -g __lidwright_keys {}\n", quoted(keys));
  for (const OptionEntry& option : program.options)
    text += option_line("__lidwright_no_verb", option);
  for (const VerbEntry& verb : program.verbs) {
    text += line("__lidwright_no_verb", "-a " + verb.name, verb.summary);
    verbs += verb_lines(verb);
  }
  return text + verbs;
}

}  // namespace lidwright
