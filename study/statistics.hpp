#pragma once

#include <cstddef>
#include <limits>
#include <span>
#include <string>
#include <vector>

/// What a record over time says about its mean: which part is settled, the mean of that and how far
/// it may be off, extrema, period, drift. Pure; times and values in the units they come in. Choices
/// and measured coverage: docs/decisions/statistics.md.
namespace lidwright {

struct StatisticsSettings {
  std::size_t intervals = 2048;  ///< most equal intervals a record is averaged over, >= 64
  double negligible = 1e-3;  ///< change over the record, of the mean, that only widens the error
                             ///< and is no drift; in (0, 1)
  double steady = 5e-3;  ///< range over the last half, of the mean, that is a steady state; in (0,
                         ///< 1). Of the means over whole periods: a steady cycle
  double scale = 0;      ///< changes are taken of the mean or of this, whichever is larger; >= 0
  double false_drift = 0.01;  ///< share of settled records that may be called drifting, in (0, 1)
  /// The same where a start-up was left out, which may be the first half of a drift.
  double false_drift_after_start_up = 0.05;
  double least_time = 0;  ///< that the settled part must last, >= 0
};

/// What the mean is worth.
enum class Finding {
  Sound,       ///< settled, and long enough
  Steady,      ///< the range of the last half is small, or that of its means over whole periods:
               ///< the error is this range, a bound
  Undefined,   ///< too few finite values: the quantity is not defined in this run
  TooShort,    ///< too few correlation times, or shorter than `least_time`
  SlowPeriod,  ///< a swing as long as a third of the record or longer
  Transient,   ///< the start-up is not over in the first half
  Drifting,    ///< the settled part has a slope
};

struct RecordSummary {
  static constexpr double none = std::numeric_limits<double>::quiet_NaN();
  Finding finding = Finding::Undefined;
  double discarded_until = none;  ///< time at which the settled part begins
  double mean = none;             ///< over the time of the settled part
  double error = none;            ///< half width of the 95 % interval; nan: not known
  double min = none, max = none;  ///< of the settled part
  double period = none;           ///< of the dominant peak; nan: none
  double effective = none;        ///< number of independent values; nan: not known
  double length = 0;              ///< time that the settled part lasts
  std::string words;              ///< a sentence on the finding

  bool drifting() const { return finding == Finding::Drifting; }
  /// Is the mean good for use, within its error?
  bool enough() const { return finding == Finding::Sound || finding == Finding::Steady; }
};

/// Of a record with rising times; rows that are not finite are left out.
RecordSummary summarise(std::span<const double> time, std::span<const double> value,
                        const StatisticsSettings& = {});

/// One word for tables.
const char* word(Finding);

/// Is the mean known to a relative error? Empty: yes. Else why not, in words.
std::string why_not_known(const RecordSummary&, double relative_error);

/// Something that was found out about a quantity.
struct Reason {
  std::string name, words;
};
/// "a, b: too short; c: drifting"; quantities with the same reason together.
std::string joined(const std::vector<Reason>&);

}  // namespace lidwright
