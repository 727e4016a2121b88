#pragma once

#include <string>
#include <vector>

#include "app/exit_code.hpp"

/// The verbs and their options as plain text: what help, completions and manual pages are made of.
/// Filled from the command line itself (`program_entry` in app/command_line.hpp), so that none of
/// them can fall behind it.
namespace lidwright {

/// What an option or argument takes, as far as a shell can complete it.
enum class Takes { Nothing, Text, Words, CaseFile, File, Folder, CaseKey };

struct OptionEntry {
  std::vector<std::string> names;  ///< "-h", "--help"; empty: an argument, told by its place
  std::string value;               ///< what stands for the value in help; empty: a flag
  std::string help;                ///< one paragraph
  std::vector<std::string> words;  ///< to choose from; one that ends in '=' wants more behind it
  bool list = false;               ///< takes several words, joined by commas
  bool many = false;               ///< may be given more than once
  bool argument() const { return names.empty(); }
  Takes takes() const;
};

struct ExitMeaning {
  ExitCode code;
  std::string meaning;
};

/// What is said of a verb beyond its options.
struct VerbNotes {
  std::vector<std::string> usage;     ///< behind "lidwright VERB"
  std::string description;            ///< paragraphs, for the manual; parted by empty lines
  std::vector<std::string> examples;  ///< whole commands
  std::vector<ExitMeaning> exits;     ///< all that the verb may return, 0 first
  std::vector<std::string> pages;     ///< of docs/, to read on
};
/// Throws std::out_of_range for a verb that has none, which the tests would see.
VerbNotes verb_notes(const std::string& verb);

struct VerbEntry {
  std::string name, group, summary;
  std::vector<OptionEntry> options;  ///< arguments first, in their order
  VerbNotes notes;
};

struct ProgramEntry {
  std::string name, summary, version;
  std::vector<VerbEntry> verbs;
  std::vector<OptionEntry> options;                      ///< of the program without a verb
  std::vector<std::string> case_keys;                    ///< "table.key", all that take one value
  const VerbEntry* find(const std::string& verb) const;  ///< nullptr: none of this name
};

/// "-h, --help", "--into FOLDER"; of an argument its name.
std::string option_head(const OptionEntry&);

}  // namespace lidwright
