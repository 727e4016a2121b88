#pragma once

#include <optional>
#include <stdexcept>
#include <string>
#include <vector>

#include "physics/scales.hpp"
#include "solver/settings.hpp"

/// A case as one TOML file. io/case_keys.cpp is the one place that knows the keys.
namespace lidwright {

struct OutputSettings {
  long history_every = 1;       ///< steps, >= 1
  double snapshot_every = 0;    ///< time; 0: only the first and the last
  long checkpoint_every = 200;  ///< steps; 0: only at the end
  int checkpoints_kept = 2;     ///< >= 1
  bool normal_stress = true;    ///< pressure and wall normal stress in snapshots
  bool pictures = true;         ///< a picture with every snapshot
  bool report = true;           ///< a page about the run, at its end
};

struct Case {
  std::string title;
  Model model;
  InitialSettings initial;
  FlowSettings flow;
  HeatSettings heat;
  MarchSettings march;
  SettleSettings settle;
  OutputSettings output;
  /// Present: the file was in SI and everything above was made dimensionless with it.
  std::optional<Body> body;
};

/// Bad input: `what()` is the whole message, with file, line, key, value, what is allowed and the
/// remedy.
struct InputError : std::runtime_error {
  using std::runtime_error::runtime_error;
};

/// Reads a case, then applies `settings` ("table.key=value", as on the command line) before any
/// value is checked. A relative initial.from is made absolute, starting at the folder of the case
/// file; a table of reference profiles that the case names is read, from there as well. Throws
/// InputError. Not collective: every rank may call it, or one.
Case read_case(const std::string& path, const std::vector<std::string>& settings = {});
/// `along`: one more setting, which messages place at "--along"; empty: none.
Case parse_case(const std::string& text, const std::string& name,
                const std::vector<std::string>& settings = {}, const std::string& along = {});
/// A key that a case leaves to its default, and what it then is, as the file would say it.
struct DefaultTaken {
  std::string table, name, value, unit;  ///< unit: empty for none
};
/// All of them that apply, in the order of the reference page; keys in lists are left out. Reads
/// the case as read_case does and throws what it throws.
std::vector<DefaultTaken> defaults_taken(const std::string& path,
                                         const std::vector<std::string>& settings = {});
/// The file as it is; throws InputError.
std::string read_case_text(const std::string& path);

/// A key that takes a number, as `--along` needs one. Throws InputError at --along for any other,
/// and for keys of the grid.
struct NumberKey {
  std::string path, unit, unit_with_body;
};
NumberKey number_key(const std::string& path);

/// The case with every default filled in, as TOML that `parse_case` reads back to the same case,
/// bit for bit if it was once read. Always dimensionless; a body goes into [body_used], so that
/// rereading converts nothing; a table of reference profiles is written out, so that its file is
/// not needed. Values that do not apply (initial.interior of a conductive start) are left out.
std::string write_case(const Case&);

/// Reference of all keys, for `lidwright keys` (plain, 80 columns) and docs/case.md (Markdown).
std::string keys_as_text();
std::string keys_as_markdown();

}  // namespace lidwright
