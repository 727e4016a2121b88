#include "study/statistics.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <bit>
#include <cmath>
#include <optional>

#include "study/mean_error.hpp"
#include "study/series.hpp"
#include "study/spectrum.hpp"

namespace lidwright {
namespace {

constexpr std::size_t least_rows = 40;
/// Lowest ordinates that the spectrum at zero is taken from. More would make the interval little
/// narrower (Student's t with 8 degrees of freedom is 2.31, with infinitely many 1.96) and reach
/// where the spectrum has fallen.
constexpr std::size_t most_ordinates = 4;
/// Correlation times in the record for each ordinate: at the last one the spectrum is still
/// 1/(1 + (2 pi/16)^2) = 0.87 of its value at zero.
constexpr double times_an_ordinate = 16;
/// Batches of the search for the settled part, each a fiftieth of the record.
constexpr std::size_t most_batches = 50, fewest_batches = 5;
/// Least part of the record that may be the settled one: a shorter quiet stretch at the end says
/// nothing. Two periods too.
constexpr double least_share = 0.2, least_periods = 2;
/// Latest point, of the record; of what twice that leaves out, no more than half of it.
constexpr double most_start_up = 0.3;
/// Standard errors by which the mean over the start-up must differ from the rest to be one.
constexpr double start_up_stands_out = 2;
/// Share of the variance in periods of half the record or longer above which it is a slow swing.
constexpr double slow_share = 0.8;

struct Extrema {
  double low, high;
  double range() const { return high - low; }
};
Extrema extrema(std::span<const double> x) {
  const auto [low, high] = std::minmax_element(x.begin(), x.end());
  return {*low, *high};
}

/// Means over equal intervals, no more than rows: a power of two, for the transform's sake.
std::vector<double> resampled(const Series& s, std::size_t most) {
  return interval_means(s, s.time.front(), s.time.back(), std::bit_floor(std::min(s.size(), most)));
}

/// The settled part, averaged over equal intervals: over whole periods where it has a period.
struct Settled {
  std::vector<double> x;
  bool start_up = false;        ///< something before it was left out
  std::size_t ordinates = 0;    ///< for its error; 0: too few correlation times
  double correlation_time = 0;  ///< in steps of x; 0: periods, each counted as independent
  double period = RecordSummary::none;
  double times() const { return static_cast<double>(x.size()) / std::max(correlation_time, 0.5); }
  bool slow = false;
};

std::size_t ordinates_for(double times) {
  return std::min(most_ordinates, static_cast<std::size_t>(times / times_an_ordinate));
}

bool mostly_slow(std::span<const double> x) {
  const std::vector<double> power = periodogram(x);
  double all = 0;
  for (std::size_t k = 1; k < power.size(); ++k) all += power[k];
  return power[1] + power[2] > slow_share * all;
}

/// Of whole periods that end with the record: the mean of each. They are independent enough that
/// all ordinates count.
Settled by_periods(const Series& s, double period) {
  Settled settled;
  const double length = s.length();
  const auto count = static_cast<std::size_t>(length / period * (1 + 1e-6));
  if (count < 3) return settled;
  const double from = s.time.back() - static_cast<double>(count) * period;
  settled.x = interval_means(s, std::max(from, s.time.front()), s.time.back(), count);
  settled.ordinates = std::min(most_ordinates, (count - 1) / 2);
  settled.period = period;
  return settled;
}

Settled settled_part(const Series& s, std::size_t most_intervals) {
  Settled settled;
  settled.x = resampled(s, most_intervals);
  const double step = s.length() / static_cast<double>(settled.x.size());
  const double period = dominant_period(settled.x) * step;
  if (std::isfinite(period)) {
    Settled periods = by_periods(s, period);
    if (periods.ordinates > 0) return periods;
  }
  settled.correlation_time = correlation_time(settled.x);
  settled.ordinates = ordinates_for(settled.times());
  settled.slow = settled.ordinates == 0 && mostly_slow(settled.x);
  return settled;
}

/// Share of the record that the settled part must have at least.
double least_settled(const Series& s, std::size_t most_intervals) {
  const Series half = after(s, s.middle());
  const std::vector<double> x = resampled(half, most_intervals);
  const double period = dominant_period(x) / static_cast<double>(x.size()) / 2;  // of the record
  return std::isfinite(period) ? std::max(least_share, least_periods * period) : least_share;
}

MeanError error_of(const Settled& s) { return mean_error(s.x, s.ordinates, s.correlation_time); }

/// Does the mean before `until` lie further from that of the settled part than noise explains?
bool differs(const Series& s, double until, const Settled& settled, double settled_length) {
  if (settled.ordinates == 0) return true;
  const MeanError m = error_of(settled);
  const double before = interval_means(s, s.time.front(), until, 1).front();
  const double ratio = settled_length / (until - s.time.front());
  return std::abs(before - m.mean) > start_up_stands_out * m.standard_error * std::sqrt(1 + ratio);
}

/// Does the part before `until` go beyond the range of the rest by more than that range?
bool overshoots(const Series& s, double until) {
  const Series rest = after(s, until);
  if (rest.size() < 2) return false;
  const Extrema inside = extrema(rest.value), all = extrema(s.value);
  return all.high > inside.high + inside.range() || all.low < inside.low - inside.range();
}

/// Without a first overshoot, which may be too short to move a mean; nothing: it lasts beyond half
/// of the record.
std::optional<Series> without_overshoot(const Series& s) {
  const double step = s.length() / static_cast<double>(most_batches);
  Series rest = s;
  while (overshoots(rest, rest.time.front() + step)) {
    rest = after(rest, rest.time.front() + step);
    if (rest.length() < s.length() / 2 || rest.size() < least_rows) return std::nullopt;
  }
  return rest;
}

/// The settled part of a record; nothing: its start-up may not be over. A start-up that noise
/// explains is none: leaving it out would favour quiet records. One that is none is left out twice
/// over: the point found weighs the start-up's share in the mean against the noise, and is too
/// early for an interval that should be due to the noise alone.
struct Part {
  Series series;
  Settled settled;
};
std::optional<Part> without_start_up(const Series& s, std::size_t most_intervals) {
  const std::size_t batches = std::min(most_batches, s.size() / values_a_batch);
  const double least = least_settled(s, most_intervals) * static_cast<double>(batches);
  const std::size_t found =
      settled_from(interval_means(s, s.time.front(), s.time.back(), batches * values_a_batch),
                   std::max(fewest_batches, static_cast<std::size_t>(std::ceil(least))));
  if (found == 0) return Part{s, settled_part(s, most_intervals)};
  const double share = static_cast<double>(found) / static_cast<double>(batches);
  const auto at = [&](double part) { return s.time.front() + std::min(part, 0.5) * s.length(); };
  Part p;
  p.series = after(s, at(2 * share));
  if (p.series.size() < least_rows / 2) return std::nullopt;
  p.settled = settled_part(p.series, most_intervals);
  p.settled.start_up = true;
  if (!differs(s, at(share), p.settled, p.series.length()))
    return Part{s, settled_part(s, most_intervals)};
  if (share > most_start_up) return std::nullopt;
  return p;
}

/// The larger of the mean and the scale, by which changes are measured.
double size_of(double mean, const StatisticsSettings& s) {
  return std::max(std::abs(mean), s.scale);
}

/// The last half of the record, or what stays as near to its mean as that half must.
std::optional<RecordSummary> steady(const Series& s, const StatisticsSettings& settings) {
  const Series half = after(s, s.middle());
  if (half.size() < 2) return std::nullopt;
  const Extrema e = extrema(half.value);
  const double mean = interval_means(half, half.time.front(), half.time.back(), 1).front();
  if (e.range() > settings.steady * size_of(mean, settings)) return std::nullopt;
  RecordSummary r;
  r.finding = Finding::Steady;
  r.mean = mean;
  r.error = e.range();
  r.min = e.low;
  r.max = e.high;
  r.discarded_until = half.time.front();
  r.length = half.length();
  r.words = fmt::format("steady: within {:.2g} of its mean over the last half",
                        mean != 0 ? e.range() / std::abs(mean) : 0.0);
  return r;
}

/// Fewest whole periods of which means that agree make a cycle.
constexpr std::size_t least_cycles = 4;

RecordSummary of_part(const Series& part) {
  RecordSummary r;
  const Extrema e = extrema(part.value);
  r.min = e.low;
  r.max = e.high;
  r.discarded_until = part.time.front();
  r.length = part.length();
  r.mean = interval_means(part, part.time.front(), part.time.back(), 1).front();
  return r;
}

/// The same of a cycle that repeats itself: of the means over the whole periods in the last half. A
/// start-up that fades is otherwise a drift of these means for long, as nothing else scatters them.
std::optional<RecordSummary> steady_cycle(const Series& s, const StatisticsSettings& settings) {
  const Series half = after(s, s.middle());
  if (half.size() < least_rows / 2) return std::nullopt;
  const Settled periods = settled_part(half, settings.intervals);
  if (!std::isfinite(periods.period) || periods.x.size() < least_cycles) return std::nullopt;
  const Extrema e = extrema(periods.x);
  const double mean = mean_of(periods.x);
  if (e.range() > settings.steady * size_of(mean, settings)) return std::nullopt;
  RecordSummary r = of_part(half);
  r.finding = Finding::Steady;
  r.mean = mean;
  r.error = e.range();
  r.period = periods.period;
  r.words = fmt::format("a steady cycle: the means over its last {} periods of {:.3g} span {:.2g}",
                        periods.x.size(), r.period, e.range());
  return r;
}

RecordSummary transient(const Series& s) {
  RecordSummary r = of_part(after(s, s.middle()));
  r.finding = Finding::Transient;
  r.words = "still a transient";
  return r;
}

std::string sound_words(const RecordSummary& r) {
  if (std::isfinite(r.period))
    return fmt::format("settled: {:.0f} periods of {:.3g}", r.length / r.period, r.period);
  return fmt::format("settled: worth {:.0f} independent values", r.effective);
}

/// The number of independent values with the variance of the settled part.
double effective_number(const Series& part, double standard_error, double mean) {
  Series squares = part;
  for (double& v : squares.value) v = (v - mean) * (v - mean);
  const double variance = interval_means(squares, part.time.front(), part.time.back(), 1).front();
  return variance / (standard_error * standard_error);
}

/// Too short for what it would be otherwise.
RecordSummary hasty(RecordSummary r, const StatisticsSettings& settings) {
  r.finding = Finding::TooShort;
  r.words = fmt::format("too short: the settled part lasts {:.2g} of {:.2g}", r.length,
                        settings.least_time);
  return r;
}

/// Against noise as it is beside the line, which would itself pass for correlation.
double drift_chance(const Settled& s) {
  if (std::isfinite(s.period)) return slope_chance(s.x, s.ordinates);
  const double correlation = correlation_time(without_line(s.x));
  const double times = static_cast<double>(s.x.size()) / std::max(correlation, 0.5);
  return slope_chance(s.x, std::max<std::size_t>(ordinates_for(times), 1), correlation);
}

void judge(RecordSummary& r, const Settled& settled, const StatisticsSettings& settings) {
  if (settled.slow) {
    r.finding = Finding::SlowPeriod;
    r.words = "swings as slowly as a third of the record or slower; three whole periods are needed";
    return;
  }
  if (settled.ordinates == 0) {
    r.finding = Finding::TooShort;
    r.words = fmt::format("too short: the settled part holds {:.0f} correlation times of {:.0f}",
                          settled.times(), times_an_ordinate);
    return;
  }
  const double change = line_slope(settled.x) * static_cast<double>(settled.x.size());
  const double false_drift =
      settled.start_up ? settings.false_drift_after_start_up : settings.false_drift;
  const bool drifts = drift_chance(settled) < false_drift;
  if (drifts && std::abs(change) > settings.negligible * size_of(r.mean, settings)) {
    r.finding = Finding::Drifting;
    r.words = fmt::format("drifting: by {:.2g} over the settled part", change);
    return;
  }
  if (r.length < settings.least_time) {
    r = hasty(r, settings);
    return;
  }
  if (drifts) r.error += std::abs(change) / 2;
  r.finding = Finding::Sound;
  r.words = sound_words(r);
}

/// What a march that varies says, whether or not it may be used.
RecordSummary varying(const Series& s, const StatisticsSettings& settings) {
  const std::optional<Series> rest = without_overshoot(s);
  if (!rest) return transient(s);
  const std::optional<Part> found = without_start_up(*rest, settings.intervals);
  if (!found) return transient(s);
  const auto& [part, settled] = *found;
  RecordSummary r = of_part(part);
  r.period = settled.period;
  if (settled.ordinates > 0) {
    const MeanError m = error_of(settled);
    r.mean = m.mean;
    r.error = m.half_width();
    if (m.standard_error > 0) r.effective = effective_number(part, m.standard_error, m.mean);
  }
  judge(r, settled, settings);
  return r;
}

}  // namespace

RecordSummary summarise(std::span<const double> time, std::span<const double> value,
                        const StatisticsSettings& settings) {
  const Series s = defined_rows(time, value);
  RecordSummary r;
  if (s.size() < 2) {
    r.words = "not defined: no two finite values";
    return r;
  }
  if (s.size() < least_rows) {
    r = of_part(s);
    r.finding = Finding::TooShort;
    r.words = fmt::format("too short: {} rows of {}", s.size(), least_rows);
    return r;
  }
  const std::optional<RecordSummary> flat = steady(s, settings);
  const bool long_enough = flat && flat->length >= settings.least_time;
  if (long_enough && flat->max - flat->min <= 1e-12 * std::abs(flat->mean)) return *flat;
  r = varying(s, settings);
  if (r.enough()) return r;
  if (flat) return long_enough ? *flat : hasty(*flat, settings);
  const std::optional<RecordSummary> cycle = steady_cycle(s, settings);
  return cycle && cycle->length >= settings.least_time ? *cycle : r;
}

const char* word(Finding f) {
  switch (f) {
    case Finding::Sound:
      return "sound";
    case Finding::Steady:
      return "steady";
    case Finding::Undefined:
      return "undefined";
    case Finding::TooShort:
      return "too-short";
    case Finding::SlowPeriod:
      return "slow-period";
    case Finding::Transient:
      return "transient";
    case Finding::Drifting:
      return "drifting";
  }
  return "";
}

std::string joined(const std::vector<Reason>& reasons) {
  std::vector<Reason> merged;
  for (const Reason& r : reasons) {
    const auto same = std::find_if(merged.begin(), merged.end(),
                                   [&](const Reason& m) { return m.words == r.words; });
    if (same == merged.end())
      merged.push_back(r);
    else
      same->name += ", " + r.name;
  }
  std::string text;
  for (const auto& [name, words] : merged)
    text += fmt::format("{}{}: {}", text.empty() ? "" : "; ", name, words);
  return text;
}

std::string why_not_known(const RecordSummary& r, double relative_error) {
  if (!r.enough()) return r.words;
  if (r.error <= relative_error * std::abs(r.mean)) return "";
  return fmt::format("its error is {:.2g} of the mean, not yet {:.2g}", r.error / std::abs(r.mean),
                     relative_error);
}

}  // namespace lidwright
