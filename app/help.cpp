#include "app/help.hpp"

#include <fmt/format.h>

#include <algorithm>

#include "io/wrapped.hpp"

namespace lidwright {
namespace {

constexpr std::size_t help_column = 28;

/// A name in the left column, its explanation in the right one; below a name that is too long.
std::string entry_text(const std::string& name, const std::string& help, std::size_t column) {
  const std::string right = wrapped(help, column), left = "  " + name;
  if (right.empty()) return left + "\n";
  if (left.size() + 2 > column) return left + "\n" + right;
  return left + right.substr(left.size());
}

std::string options_text(const std::string& title, const std::vector<OptionEntry>& options,
                         bool arguments) {
  std::string text;
  for (const OptionEntry& option : options)
    if (option.argument() == arguments)
      text += entry_text(option_head(option), option.help, help_column);
  return text.empty() ? "" : "\n" + title + ":\n" + text;
}

std::string usage_text(const VerbEntry& verb) {
  std::string text;
  for (const std::string& line : verb.notes.usage)
    text += fmt::format("{:<6} lidwright {} {}\n", text.empty() ? "Usage:" : "", verb.name, line);
  return text;
}

std::string examples_text(const std::vector<std::string>& examples) {
  std::string text = examples.size() > 1 ? "\nExamples:\n" : "\nExample:\n";
  for (const std::string& example : examples) text += "  " + example + "\n";
  return text;
}

std::string exits_text(const std::vector<ExitMeaning>& exits) {
  std::string text = "\nExit codes:\n";
  for (const ExitMeaning& exit : exits)
    text += entry_text(fmt::format("{}", static_cast<int>(exit.code)), exit.meaning, 5);
  return text;
}

std::vector<std::string> groups_of(const ProgramEntry& program) {
  std::vector<std::string> groups;
  for (const VerbEntry& verb : program.verbs)
    if (std::find(groups.begin(), groups.end(), verb.group) == groups.end())
      groups.push_back(verb.group);
  return groups;
}

std::string group_text(const ProgramEntry& program, const std::string& group) {
  std::string text = "\n" + group + ":\n";
  for (const VerbEntry& verb : program.verbs)
    if (verb.group == group) text += entry_text(verb.name, verb.summary, 15);
  return text;
}

}  // namespace

std::string program_help(const ProgramEntry& program) {
  std::string text = "Usage: lidwright VERB [OPTIONS]\n\n" + wrapped(program.summary, 0);
  for (const std::string& group : groups_of(program)) text += group_text(program, group);
  return text + options_text("Options", program.options, false) +
         "\n`lidwright VERB --help` says more of a verb, with examples and exit codes.\n";
}

std::string verb_help(const VerbEntry& verb) {
  return usage_text(verb) + "\n" + wrapped(verb.summary + ".", 0) +
         options_text("Arguments", verb.options, true) +
         options_text("Options", verb.options, false) + examples_text(verb.notes.examples) +
         exits_text(verb.notes.exits);
}

}  // namespace lidwright
