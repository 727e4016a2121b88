#pragma once

#include <optional>
#include <string>
#include <vector>

#include "io/run_reader.hpp"
#include "io/run_statistics.hpp"
#include "io/toml_sections.hpp"

/// What stands first on a page: the verdict and the numbers that people ask for, with errors.
namespace lidwright::page {

/// How sure a reader may be.
enum class Tone { Good, Doubtful, Plain };
const char* word(Tone);

struct Verdict {
  std::string heading;                ///< "stagnant lid"
  std::string sentence;               ///< what that rests on
  std::vector<std::string> evidence;  ///< a sentence each
  Tone tone = Tone::Plain;
};
std::string json_of(const Verdict&);

/// One headline number.
struct Figure {
  std::string label;
  double value = 0, error = 0;  ///< nan: not known
  std::string unit;             ///< as in the tables
  bool absolute = false;        ///< a temperature above the surface's
  std::string note;             ///< why there is no error, or what the number is; may be empty
  bool known = true;            ///< may it be quoted?
};
/// In the program's units and, with a body, in its.
std::string json_of(const std::vector<Figure>&, const std::optional<Body>&);

Verdict march_verdict(const RunStatistics&, bool running);
/// A sentence on which of the headline's means are good for use.
std::string soundness(const RunStatistics&);
std::vector<Figure> march_figures(const SavedRun&, const RunStatistics&);

/// Of steady states and of onset, from summary.toml and the tables beside it.
/// `key`: of a branch; empty: none.
Verdict settle_verdict(const TomlSection& summary, const std::string& key);
Verdict onset_verdict(const TomlSection& summary);
/// `bars`: text of error_bars.csv; empty: there is none.
std::vector<Figure> settle_figures(const SavedRun&, const TomlSection& summary,
                                   const std::string& bars);
/// At the ends of a branch along `key`.
std::vector<Figure> branch_figures(const NumberTable& branch, const std::string& key);
std::vector<Figure> onset_figures(const TomlSection& summary);

}  // namespace lidwright::page
