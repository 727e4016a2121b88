#include "app/command_line.hpp"
#include "app/option_words.hpp"
#include "io/case_keys.hpp"

namespace lidwright {
namespace {

std::vector<std::string> names_of(const CLI::Option& option) {
  std::vector<std::string> names;
  for (const std::string& name : option.get_snames()) names.push_back("-" + name);
  for (const std::string& name : option.get_lnames()) names.push_back("--" + name);
  return names;
}

std::string one_line(std::string text) {
  std::replace(text.begin(), text.end(), '\n', ' ');
  return text;
}

OptionEntry entry_of(CLI::Option& option) {
  OptionEntry entry;
  if (!option.get_positional()) entry.names = names_of(option);
  const bool flag = option.get_type_size_max() == 0;
  if (!flag) entry.value = option.get_positional() ? option.get_name(true) : option.get_type_name();
  entry.help = one_line(option.get_description());
  entry.words = words_of(&option);
  entry.list = option.get_delimiter() == ',';
  entry.many = !flag && option.get_items_expected_max() > 1;
  return entry;
}

std::vector<OptionEntry> options_of(CLI::App& app) {
  std::vector<OptionEntry> arguments, options;
  for (CLI::Option* option : app.get_options())
    (option->get_positional() ? arguments : options).push_back(entry_of(*option));
  if (!options.empty()) std::rotate(options.begin(), options.begin() + 1, options.end());  // --help
  arguments.insert(arguments.end(), options.begin(), options.end());
  return arguments;
}

/// Items of lists have no key of their own on the command line, and [body_used] is the program's.
std::vector<std::string> case_keys() {
  std::vector<std::string> keys;
  for (const case_text::Key& key : case_text::all_keys())
    if (!key.in_list() && key.table() != "body_used") keys.push_back(key.path);
  return keys;
}

}  // namespace

ProgramEntry program_entry(CLI::App& app) {
  ProgramEntry program{app.get_name(), app.get_description(), app.version(), {}, options_of(app),
                       case_keys()};
  for (CLI::App* verb : app.get_subcommands({}))
    program.verbs.push_back({verb->get_name(), verb->get_group(), one_line(verb->get_description()),
                             options_of(*verb), verb_notes(verb->get_name())});
  return program;
}

}  // namespace lidwright
