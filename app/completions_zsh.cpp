#include <fmt/format.h>

#include "app/completions.hpp"

namespace lidwright {
namespace {

constexpr const char* helpers = R"(#compdef lidwright
# Completion of lidwright for zsh; made by `lidwright completions zsh`.

_lidwright_open() { compadd -S '' "$@" }   # words behind which more is to come
)";

constexpr const char* begin = R"(
_lidwright() {
  local curcontext=$curcontext state line
  typeset -A opt_args
)";

constexpr const char* end = R"(  esac
}

if [[ $funcstack[1] == _lidwright ]]; then
  _lidwright "$@"
else
  compdef _lidwright lidwright
fi
)";

/// With a backslash before each of `special`; a single quote is closed, quoted and opened again.
std::string escaped(const std::string& text, const std::string& special) {
  std::string out;
  for (const char c : text) {
    if (special.find(c) != std::string::npos) out += '\\';
    if (c == '\'')
      out += "'\\''";
    else
      out += c;
  }
  return out;
}

std::string action(const OptionEntry& option) {
  const std::string words = fmt::format("{}", fmt::join(option.words, " "));
  switch (option.takes()) {
    case Takes::Words:
      if (option.list) return fmt::format("_values -s , word {}", words);
      return option.words.front().back() == '=' ? "_lidwright_open " + words
                                                : fmt::format("({})", words);
    case Takes::CaseFile:
      return "_files -g \"*.toml\"";
    case Takes::File:
      return "_files";
    case Takes::Folder:
      return "_files -/";
    case Takes::CaseKey:
      return "_lidwright_open $_lidwright_keys";
    default:
      return " ";
  }
}

/// One specification a name, in the form of _arguments.
std::string option_spec(const OptionEntry& option) {
  std::string text;
  for (const std::string& name : option.names) {
    const std::string others =
        option.many ? "*" : fmt::format("({})", fmt::join(option.names, " "));
    text += fmt::format("        '{}{}[{}]", others, name, escaped(option.help, "[]\\:"));
    if (!option.value.empty())
      text += fmt::format(":{}:{}", escaped(option.value, ":"), action(option));
    text += "' \\\n";
  }
  return text;
}

std::string argument_spec(const OptionEntry& option) {
  return fmt::format("        '{}:{}:{}' \\\n", option.many ? "*" : "", escaped(option.value, ":"),
                     action(option));
}

std::string verb_case(const VerbEntry& verb) {
  std::string text;
  for (const OptionEntry& option : verb.options)
    text += option.argument() ? argument_spec(option) : option_spec(option);
  return fmt::format("    {})\n      _arguments \\\n{}        && return 0\n      ;;\n", verb.name,
                     text);
}

}  // namespace

std::string zsh_completions(const ProgramEntry& program) {
  std::string keys, verbs, cases, options;
  for (const std::string& key : program.case_keys) keys += fmt::format("  {}=\n", key);
  for (const VerbEntry& verb : program.verbs) {
    verbs += fmt::format("    '{}:{}'\n", verb.name, escaped(verb.summary, ":"));
    cases += verb_case(verb);
  }
  for (const OptionEntry& option : program.options) options += option_spec(option);
  return fmt::format(
      "{}\ntypeset -ga _lidwright_keys=(\n{}){}  local -a verbs=(\n{}  )\n  _arguments -C \\\n{}"
      "        '1: :->verb' \\\n        '*:: :->rest' && return 0\n"
      "  if [[ $state == verb ]]; then\n    _describe -t verbs verb verbs\n    return\n  fi\n"
      "  case $words[1] in\n{}{}",
      helpers, keys, std::string("\n") + begin, verbs, options, cases, end);
}

}  // namespace lidwright
