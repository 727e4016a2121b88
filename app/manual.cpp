#include "app/manual.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cctype>
#include <map>

namespace lidwright {
namespace {

/// Text as the formatter shows it: backslashes, and the characters that it would replace.
std::string plain(const std::string& text) {
  static const std::map<char, const char*> escapes{{'\\', "\\e"},  {'-', "\\-"},   {'\'', "\\(aq"},
                                                   {'`', "\\(ga"}, {'^', "\\(ha"}, {'~', "\\(ti"}};
  std::string out = text.rfind('.', 0) == 0 ? "\\&" : "";
  for (const char c : text) {
    const auto escape = escapes.find(c);
    if (escape == escapes.end())
      out += c;
    else
      out += escape->second;
  }
  return out;
}

std::string upper(std::string text) {
  std::transform(text.begin(), text.end(), text.begin(),
                 [](unsigned char c) { return static_cast<char>(std::toupper(c)); });
  return text;
}

std::string title(const ProgramEntry& program, const std::string& page, const std::string& what) {
  return fmt::format(".TH {} 1 \"\" \"{}\" \"Manual of lidwright\"\n.SH NAME\n{} \\- {}\n",
                     upper(plain(page)), plain(program.version), plain(page), plain(what));
}

/// Paragraphs parted by empty lines.
std::string paragraphs(const std::string& text) {
  std::string out;
  std::size_t begin = 0;
  while (begin < text.size()) {
    const std::size_t end = std::min(text.find("\n\n", begin), text.size());
    out += (begin == 0 ? "" : ".PP\n") + plain(text.substr(begin, end - begin)) + "\n";
    begin = end + 2;
  }
  return out;
}

std::string item(const std::string& head, const std::string& text) {
  return ".TP\n" + head + "\n" + plain(text) + "\n";
}

/// Names in bold, what stands for a value in italics.
std::string option_item(const OptionEntry& option) {
  if (option.argument()) return item("\\fI" + plain(option.value) + "\\fR", option.help);
  std::string head;
  for (const std::string& name : option.names)
    head += (head.empty() ? "\\fB" : ", \\fB") + plain(name) + "\\fR";
  if (!option.value.empty()) head += " \\fI" + plain(option.value) + "\\fR";
  return item(head, option.help);
}

std::string options(const char* section, const std::vector<OptionEntry>& all, bool arguments) {
  std::string text;
  for (const OptionEntry& option : all)
    if (option.argument() == arguments) text += option_item(option);
  return text.empty() ? "" : fmt::format(".SH {}\n{}", section, text);
}

std::string synopsis(const VerbEntry& verb) {
  std::string text;
  for (const std::string& usage : verb.notes.usage)
    text += fmt::format("{}\\fBlidwright {}\\fR {}\n", text.empty() ? "" : ".br\n",
                        plain(verb.name), plain(usage));
  return ".SH SYNOPSIS\n" + text;
}

std::string examples(const VerbEntry& verb) {
  std::string text = ".SH EXAMPLES\n.nf\n";
  for (const std::string& example : verb.notes.examples) text += plain(example) + "\n";
  return text + ".fi\n";
}

std::string exit_status(const VerbEntry& verb) {
  std::string text = ".SH EXIT STATUS\n";
  for (const ExitMeaning& exit : verb.notes.exits)
    text += item(fmt::format("\\fB{}\\fR", static_cast<int>(exit.code)), exit.meaning);
  return text;
}

std::string see_also(const VerbEntry& verb) {
  std::string text = ".SH SEE ALSO\n.BR lidwright (1)";
  for (const std::string& page : verb.notes.pages) text += ",\ndocs/" + plain(page);
  return text + "\n";
}

std::string verbs(const ProgramEntry& program) {
  std::string text = ".SH VERBS\n";
  for (const VerbEntry& verb : program.verbs)
    text += item(fmt::format(".BR lidwright\\-{} (1)", plain(verb.name)), verb.summary + ".");
  return text;
}

constexpr const char* run_in_short =
    ".SH EXIT STATUS\n"
    "0 done, 1 a fault of the program, 2 bad input, 3 not solved, 4 not written, 5 interrupted, "
    "6 a published benchmark disagrees; each verb\\(aqs page says which it returns.\n"
    "Where the code is 1 to 4 or 6, one message stands on standard error.\n"
    ".SH FILES\n"
    "Results are in the folder that \\fB\\-\\-into\\fR names, else in \\fIruns/\\fR. "
    "Every file in it is complete or absent.\n";

}  // namespace

std::string program_manual(const ProgramEntry& program) {
  return title(program, "lidwright", "convection in the mantles of rocky bodies") +
         ".SH SYNOPSIS\n\\fBlidwright\\fR \\fIVERB\\fR [OPTIONS]\n.SH DESCRIPTION\n" +
         paragraphs(program.summary) + verbs(program) + options("OPTIONS", program.options, false) +
         run_in_short;
}

std::string verb_manual(const ProgramEntry& program, const VerbEntry& verb) {
  std::string what = verb.summary;
  what.front() = static_cast<char>(std::tolower(static_cast<unsigned char>(what.front())));
  return title(program, "lidwright-" + verb.name, what) + synopsis(verb) + ".SH DESCRIPTION\n" +
         paragraphs(verb.notes.description) + options("ARGUMENTS", verb.options, true) +
         options("OPTIONS", verb.options, false) + examples(verb) + exit_status(verb) +
         see_also(verb);
}

}  // namespace lidwright
