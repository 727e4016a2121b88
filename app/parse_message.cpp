#include "app/parse_message.hpp"

#include <fmt/format.h>

#include <algorithm>

#include "app/command_line.hpp"
#include "io/case_entries.hpp"

namespace lidwright {
namespace {

std::vector<std::string> verbs_of(const ProgramEntry& program) {
  std::vector<std::string> names;
  for (const VerbEntry& verb : program.verbs) names.push_back(verb.name);
  return names;
}

std::vector<std::string> options_of(const VerbEntry& verb) {
  std::vector<std::string> names;
  for (const OptionEntry& option : verb.options)
    names.insert(names.end(), option.names.begin(), option.names.end());
  return names;
}

/// The library reports a misspelt verb as a missing one.
std::string no_verb(const ProgramEntry& program, const std::string& word) {
  const std::vector<std::string> verbs = verbs_of(program);
  if (word.empty()) return fmt::format("name a verb: {}", fmt::join(verbs, ", "));
  return fmt::format("'{}' is not a verb of this program{}; it has {}", word,
                     case_text::nearest(word, verbs), fmt::join(verbs, ", "));
}

/// Words that fit nowhere; the library hands them out last first.
std::string too_many(const VerbEntry& verb, const std::vector<std::string>& words) {
  const auto option = std::find_if(words.begin(), words.end(),
                                   [](const std::string& w) { return w.rfind('-', 0) == 0; });
  if (option != words.end())
    return fmt::format("{}: is no option of {}{}", *option, verb.name,
                       case_text::nearest(*option, options_of(verb)));
  return fmt::format("{}: is one argument too many; the usage is: lidwright {} {}", words.back(),
                     verb.name, fmt::join(verb.notes.usage, ", or "));
}

/// Of an option whose values are too many or too few.
std::string wrong_count(const VerbEntry& verb, const std::string& what) {
  const std::string name = what.substr(0, what.find(':'));
  if (what.find("At Most") != std::string::npos)
    return name + ": is given more than once; give it once";
  for (const OptionEntry& option : verb.options)
    if (!option.argument() && option.names.back() == name)
      return fmt::format("{}: a value is missing; give {} {}", name, name, option.value);
  return what;
}

/// "Could not convert: --every = abc".
std::string not_a_number(const std::string& what) {
  const std::size_t name = what.find("--"), equals = what.find(" = ");
  if (name == std::string::npos || equals == std::string::npos) return what;
  return fmt::format("{} {}: must be a number", what.substr(name, equals - name),
                     what.substr(equals + 3));
}

/// "A excludes B", "A requires B".
std::string not_together(const std::string& what, const std::string& verb, const char* complaint) {
  const std::size_t first = what.find(' '), second = what.rfind(' ');
  return fmt::format("{}: {} {} {}", verb, what.substr(0, first), complaint,
                     what.substr(second + 1));
}

std::string of_verb(CLI::App& app, const VerbEntry& verb, const CLI::ParseError& e) {
  const std::string kind = e.get_name(), what = e.what();
  if (dynamic_cast<const CLI::ExtrasError*>(&e)) return too_many(verb, app.remaining(true));
  if (kind == "ArgumentMismatch") return wrong_count(verb, what);
  if (kind == "ConversionError") return not_a_number(what);
  if (kind == "ExcludesError") return not_together(what, verb.name, "does not go with");
  if (kind == "RequiresError") return not_together(what, verb.name, "needs");
  return what;
}

}  // namespace

std::string parse_message(CLI::App& app, const CLI::ParseError& e, const std::string& first) {
  const ProgramEntry program = program_entry(app);
  const std::vector<CLI::App*> named = app.get_subcommands();
  if (named.empty()) return no_verb(program, first) + "; see `lidwright --help`";
  const std::string verb = named[0]->get_name();
  return fmt::format("{}; see `lidwright {} --help`", of_verb(app, *program.find(verb), e), verb);
}

}  // namespace lidwright
