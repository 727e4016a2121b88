#pragma once

#include <span>
#include <string>
#include <vector>

#include "solver/settings.hpp"
#include "solver/stored_temperature.hpp"
#include "study/error_bars.hpp"
#include "study/prescribed_flow.hpp"

/// A published benchmark: problems, the values that are published for them, and how ours compare.
namespace lidwright {

/// By which of the solver's ways a benchmark's quantities are found.
enum class How {
  Settle,  ///< a steady state, by Newton's method
  Relax,   ///< a steady state, by marching until it is one
  March,   ///< a cycle in time
  Onset,
  Flow
};

/// Where a published value comes from, which says how far it may be trusted.
enum class Mark {
  Analytic,    ///< a closed form
  Computed,    ///< by an independent (spectral) code, made for this project
  Published,   ///< read in the source
  Confirmed,   ///< the source's, digits from memory, and an independent computation agrees
  Remembered,  ///< the source's, digits from memory
  Doubtful,    ///< the source's, from a memory that may be wrong: shown, not judged
};

/// A value that is published.
struct Expectation {
  std::string quantity;
  std::string text;  ///< the value as it was written, which shows its digits
  double value = 0;
  double spread = 0;           ///< of the source, else half a unit of the last digit; absolute
  bool spread_stated = false;  ///< by the source
  Mark mark = Mark::Remembered;
  std::string source, definition;
};

/// What the solver is told.
struct Problem {
  Model model;
  InitialSettings initial;
  FlowSettings flow;
  HeatSettings heat;
  MarchSettings march;
  SettleSettings settle;
  StoredTemperature start;  ///< Settle, Relax: a state near by; empty: the initial settings
  Forcing forcing;          ///< How::Flow
  int cycles = 9;           ///< How::March: the last ones, over which means are taken
};

/// One problem of a benchmark and the values published for it.
struct Variant {
  std::string name;       ///< for people; may be empty
  std::string case_file;  ///< in the benchmark's folder; empty: case.toml
  std::string settings;   ///< what sets it off from the case; may be empty
  std::string start;      ///< name of the variant above whose steady state it starts from, or empty
  Problem problem;
  std::vector<Expectation> expected;
};

struct Benchmark {
  std::string name, title, reference;
  How how = How::Settle;
  int grids = 3;  ///< each twice as fine as the one before, the last the case's own
  std::vector<Variant> variants;
};

/// By the distance in combined uncertainties. Our bar already is a bound (its safety factor makes
/// it hold in about 95 of 100 cases), not a standard deviation: one of them is what a value may be
/// off, two are too much.
enum class Verdict {
  Agrees,      ///< distance up to 1
  Marginal,    ///< up to 2: one in twenty is to be expected
  Differs,     ///< more
  Unresolved,  ///< our bar is wider than a twentieth of the published value: no statement
  NotSolved,   ///< no value of ours
};

/// Ours beside a published value.
struct Comparison {
  std::string benchmark, variant, settings;
  Expectation expected;
  ErrorBar ours;
  double distance = 0;  ///< (ours - published) / sqrt(half width^2 + spread^2)
  Verdict verdict = Verdict::NotSolved;
  bool contained = false;  ///< |ours - published| <= half width + spread
  /// A doubtful value's verdict is for information only.
  bool judged() const { return expected.mark != Mark::Doubtful; }
};

Comparison compare(const Expectation&, const ErrorBar& ours);
Comparison not_solved(const Expectation&);

/// Of the judged comparisons.
struct Tally {
  int agree = 0, marginal = 0, differ = 0, unresolved = 0, not_solved = 0, doubtful = 0;
  int bars = 0, contained = 0;   ///< ours that stand beside a value; those that hold it
  double median_width = 0;       ///< of 2 half width / |published|
  double median_difference = 0;  ///< of |ours - published| / |published|
};
Tally tally(std::span<const Comparison>);

/// Half a unit of the last digit of a number as it is written ("4.884" gives 0.0005).
double rounding_of(const std::string& number);

const char* word(Verdict);
const char* word(Mark);

}  // namespace lidwright
