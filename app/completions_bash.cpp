#include <fmt/format.h>

#include "app/completions.hpp"

namespace lidwright {
namespace {

constexpr const char* helpers =
    R"(# Completion of lidwright for bash; made by `lidwright completions bash`.

_lidwright_words() {   # words that begin with what is typed; behind one that ends in = goes more
  COMPREPLY=($(compgen -W "$1" -- "$cur"))
  if [[ ${COMPREPLY[0]-} == *= ]]; then compopt -o nospace 2>/dev/null; fi
}
_lidwright_list() {   # words joined by commas
  local before=${cur%"${cur##*,}"}
  COMPREPLY=($(compgen -P "$before" -W "$1" -- "${cur##*,}"))
  compopt -o nospace 2>/dev/null
}
_lidwright_paths() {   # the arguments are compgen's
  local path
  COMPREPLY=()
  while IFS= read -r path; do COMPREPLY+=("$path"); done < <(compgen "$@" -- "$cur")
  compopt -o filenames 2>/dev/null
}
_lidwright_cases() {   # case files, and folders on the way to them
  local folders
  _lidwright_paths -d
  folders=("${COMPREPLY[@]}")
  _lidwright_paths -f -X '!*.toml'
  COMPREPLY+=("${folders[@]}")
}
)";

constexpr const char* begin = R"(
_lidwright() {
  local cur=${COMP_WORDS[COMP_CWORD]} prev=${COMP_WORDS[COMP_CWORD - 1]} verb= options= taking= at=0 k=1
  COMPREPLY=()
  if [[ $cur == = ]]; then   # bash parts words at =
    cur=
  elif [[ $prev == = ]]; then
    prev=${COMP_WORDS[COMP_CWORD - 2]}
  fi
  while ((k < COMP_CWORD)) && [[ ${COMP_WORDS[k]} == -* ]]; do ((k++)); done
  if ((k < COMP_CWORD)); then verb=${COMP_WORDS[k]}; fi
  case $verb in
)";

constexpr const char* count = R"(  esac
  if [[ $cur == -* ]]; then
    _lidwright_words "$options"
    return
  fi
  if [[ ${COMP_WORDS[COMP_CWORD]} == = || ${COMP_WORDS[COMP_CWORD - 1]} == = ]]; then return; fi
  for ((k++; k < COMP_CWORD; k++)); do   # arguments before this one
    case ${COMP_WORDS[k]} in
      =) ((k++)) ;;
      -*) if [[ $taking == *" ${COMP_WORDS[k]} "* && ${COMP_WORDS[k + 1]} != = ]]; then ((k++)); fi ;;
      *) ((at++)) ;;
    esac
  done
  case $verb,$at in
)";

std::string words_of(const std::vector<std::string>& words) {
  return fmt::format("{}", fmt::join(words, " "));
}

/// What completes a value, as a shell command; empty: nothing does.
std::string action(const OptionEntry& option) {
  switch (option.takes()) {
    case Takes::Words:
      return fmt::format("_lidwright_{} '{}'", option.list ? "list" : "words",
                         words_of(option.words));
    case Takes::CaseFile:
      return "_lidwright_cases";
    case Takes::File:
      return "_lidwright_paths -f";
    case Takes::Folder:
      return "_lidwright_paths -d";
    case Takes::CaseKey:
      return "_lidwright_words \"$_lidwright_keys\"";
    default:
      return "";
  }
}

std::string names_of(const std::vector<OptionEntry>& options) {
  std::string names;
  for (const OptionEntry& option : options)
    for (const std::string& name : option.names)
      if (name.rfind("--", 0) == 0) names += (names.empty() ? "" : " ") + name;
  return names;
}

std::string verb_case(const VerbEntry& verb) {
  std::string taking, values;
  for (const OptionEntry& option : verb.options) {
    if (option.argument() || option.value.empty()) continue;
    const std::string &name = option.names.back(), does = action(option);
    taking += name + " ";
    values += fmt::format("        {}) {}{}return ;;\n", name, does, does.empty() ? "" : "; ");
  }
  return fmt::format(
      "    {})\n      options='{}' taking=' {}'\n      case $prev in\n{}"
      "        *) ;;\n      esac\n      ;;\n",
      verb.name, names_of(verb.options), taking, values);
}

std::string argument_cases(const VerbEntry& verb) {
  std::string text;
  int place = 0;
  for (const OptionEntry& option : verb.options) {
    if (!option.argument()) continue;
    const std::string where = option.many ? "*" : fmt::format("{}", place++);
    if (const std::string does = action(option); !does.empty())
      text += fmt::format("    {},{}) {} ;;\n", verb.name, where, does);
  }
  return text;
}

}  // namespace

std::string bash_completions(const ProgramEntry& program) {
  std::string names, verbs, arguments, keys;
  for (const VerbEntry& verb : program.verbs) {
    names += verb.name + " ";
    verbs += verb_case(verb);
    arguments += argument_cases(verb);
  }
  for (const std::string& key : program.case_keys) keys += fmt::format("  {}=\n", key);
  return fmt::format(
      "{}\n_lidwright_keys='\n{}'\n{}    '')\n      _lidwright_words '{}{}'\n      return\n      "
      ";;\n"
      "{}{}{}    *) ;;\n  esac\n}}\n\ncomplete -F _lidwright lidwright\n",
      helpers, keys, begin, names, names_of(program.options), verbs, count, arguments);
}

}  // namespace lidwright
