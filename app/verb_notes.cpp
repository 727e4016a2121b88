#include <map>

#include "app/verb_list.hpp"

/// What each verb's help and manual page say beyond its options. The exit codes are those that the
/// verb can return; docs/exit_codes.md says more of each.
namespace lidwright {
namespace {

using enum ExitCode;

ExitMeaning fault() { return {Fault, "a fault of the program: please report it"}; }
ExitMeaning bad_input(const char* what) {
  return {BadInput, std::string("bad input: ") + what + "; nothing was written"};
}
ExitMeaning not_written() {
  return {NotWritten, "a result could not be written: full disk, no permission"};
}
std::vector<ExitMeaning> printing(const char* input) {
  return {{Done, "done"}, fault(), bad_input(input)};
}
std::vector<ExitMeaning> drawing() {
  return {{Done, "done"}, fault(), bad_input("command line, or the run's files"), not_written()};
}

VerbNotes check_notes() {
  return {{"CASE [OPTIONS]"},
          "Reads a case and says what follows from it: the defaults taken, derived numbers, the "
          "cells across the boundary layers, memory, step size and time that it will need, what "
          "published laws foresee, and where it leaves the range of the approximation. It takes a "
          "few steps of the case to measure their cost, and writes nothing.",
          {"lidwright check case.toml", "lidwright check case.toml --set grid.radial=128"},
          {{Done, "done; warnings, if any, are in the text"},
           fault(),
           bad_input("command line or case"),
           {NotSolved, "the case's first steps failed, or the memory does not suffice"}},
          {"case.md"}};
}

VerbNotes march_notes() {
  return {
      {"CASE [OPTIONS]", "--resume FOLDER [OPTIONS]"},
      "Follows a case in time and writes a run folder: history, snapshots, pictures, profiles, "
      "checkpoints, means with errors and a verdict on the lid.\n\n"
      "The first SIGINT or SIGTERM lets the step at hand end and writes a checkpoint. "
      "--resume goes on from the last one; on the same number of ranks it gives the very numbers "
      "of a run that was never stopped. Several ranks: mpirun -n 4 lidwright march CASE.",
      {"lidwright march case.toml --set numbers.rayleigh=1e6 --into runs/first",
       "lidwright march --resume runs/first"},
      {{Done, "the run reached its end: time, steps, steady state or known means"},
       fault(),
       bad_input("command line, case, checkpoint or folder"),
       {NotSolved, "a step failed, or the memory does not suffice; the last checkpoint stands"},
       not_written(),
       {Interrupted, "stopped by a signal or march.wall_clock: go on with --resume"}},
      {"case.md", "run_folder.md", "diagnostics.md"}};
}

VerbNotes settle_notes() {
  return {
      {"CASE [OPTIONS]"},
      "Finds the state in which a case's convection stays as it is, by Newton's method, with "
      "an error bar and its stability if asked, or all steady states along a key.",
      {"lidwright settle case.toml --error-bars",
       "lidwright settle case.toml --along numbers.rayleigh=1e4:1e5:4"},
      {{Done, "the steady state was found"},
       fault(),
       bad_input("command line, case or folder"),
       {NotSolved, "no steady state was found, or a branch ended early; the last state is written"},
       not_written(),
       {Interrupted, "stopped by a signal; the last state is written"}},
      {"settle.md", "case.md"}};
}

VerbNotes onset_notes() {
  return {{"CASE [OPTIONS]"},
          "Finds the Rayleigh number at which a case begins to convect, mode by mode, with an "
          "error bar, and says how many times critical the case is.",
          {"lidwright onset case.toml --modes 1:12"},
          {{Done, "the least Rayleigh number was found"},
           fault(),
           bad_input("command line, case or folder"),
           {NotSolved, "a mode was not found, or the memory does not suffice"},
           not_written(),
           {Interrupted, "stopped by a signal; the modes found so far are written"}},
          {"onset.md", "case.md"}};
}

VerbNotes regime_notes() {
  return {{"RUN [OPTIONS]", "--thresholds"},
          "Judges the lid of a march anew from its history: stagnant, sluggish, mobile, episodic, "
          "or not convecting, with a probability and the evidence. Writes nothing.",
          {"lidwright regime runs/first --threshold mobile=0.7"},
          printing("command line, or the run's files"),
          {"decisions/regime.md", "run_folder.md"}};
}

VerbNotes figure_notes() {
  return {{"RUN [KIND...] [OPTIONS]"},
          "Draws what a run folder holds, for a paper or for slides, without a display.",
          {"lidwright figure runs/first temperature --format pdf --with lid"},
          drawing(),
          {"figures.md", "run_folder.md"}};
}

VerbNotes report_notes() {
  return {{"RUN [OPTIONS]"},
          "Writes one self-contained page about a run, which a browser opens from the disk, "
          "without a network.",
          {"lidwright report runs/first", "lidwright report runs/first --follow"},
          drawing(),
          {"report.md", "run_folder.md"}};
}

VerbNotes verify_notes() {
  return {{"[NAME...] [OPTIONS]"},
          "Solves published benchmarks on grids that halve each other and prints each value with "
          "its error bar beside the published one. Runs on one rank.",
          {"lidwright verify", "lidwright verify blankenbach_1989_1a --csv table.csv"},
          {{Done, "all values agree, or nearly so"},
           fault(),
           bad_input("command line or benchmark"),
           {NotSolved, "a benchmark was not solved; the others were run"},
           not_written(),
           {Interrupted, "stopped by a signal; what was found is in the table"},
           {Disagrees, "a value differs from the published one, or is not resolved"}},
          {"verify.md"}};
}

VerbNotes keys_notes() {
  return {{"[OPTIONS]"},
          "Prints every key that a case file may have: type, default, unit, what is allowed and "
          "what it means.",
          {"lidwright keys | less"},
          printing("command line"),
          {"case.md"}};
}

VerbNotes completions_notes() {
  return {{"SHELL"},
          "Prints the completions of this program for a shell, made from its own list of options "
          "and case keys. An installed program has them in place already; for one that is not, "
          "see the examples.",
          {"source <(lidwright completions bash)", "source <(lidwright completions zsh)",
           "lidwright completions fish | source"},
          printing("command line"),
          {"install.md"}};
}

VerbNotes manual_notes() {
  return {{"[VERB]"},
          "Prints a manual page in the format of man(7): of the program, or of a verb.",
          {"lidwright manual march > march.1 && man ./march.1"},
          printing("command line"),
          {"install.md"}};
}

}  // namespace

VerbNotes verb_notes(const std::string& verb) {
  static const std::map<std::string, VerbNotes (*)()> notes{
      {"check", check_notes},   {"march", march_notes},
      {"settle", settle_notes}, {"onset", onset_notes},
      {"regime", regime_notes}, {"figure", figure_notes},
      {"report", report_notes}, {"verify", verify_notes},
      {"keys", keys_notes},     {"completions", completions_notes},
      {"manual", manual_notes}};
  return notes.at(verb)();
}

}  // namespace lidwright
