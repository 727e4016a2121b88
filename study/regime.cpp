#include "study/regime.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <numbers>
#include <optional>
#include <random>
#include <span>

#include "study/bootstrap.hpp"
#include "study/series.hpp"
#include "study/spectrum.hpp"

namespace lidwright {
namespace {

constexpr std::size_t most_rows = 512;
constexpr int resamples = 400;
constexpr std::uint64_t seed = 20000;
/// What is no drift: a hundredth of the mean, or of the stagnant threshold.
constexpr double negligible = 0.01;

/// The records in a settled part, averaged over equal intervals.
struct Rows {
  std::vector<double> mobility, velocity, surface_velocity, nusselt;
  double correlation_time = 0, period = RecordSummary::none;  ///< of mobility, in rows
};

/// What decides, of one resample or of the rows themselves.
struct Signs {
  double mobility = 0, low = 0, high = 0;                  ///< mean and two quantiles
  double velocity = 0, surface_velocity = 0, nusselt = 0;  ///< means

  /// (delta_0/d)^2 U_0 with delta_0/d = 1/Nu: how far, in d, the surface moves while heat diffuses
  /// through the lid.
  double lid_travel() const { return surface_velocity / (nusselt * nusselt); }
};

bool at_rest(const Signs& s, bool sources, const RegimeThresholds& t) {
  return s.velocity < t.still_velocity || (!sources && std::abs(s.nusselt - 1) < t.still_nusselt);
}

Regime regime_of(const Signs& s, bool sources, const RegimeThresholds& t) {
  if (at_rest(s, sources, t)) return Regime::NotConvecting;
  if (s.low < t.stagnant && s.high > t.mobile) return Regime::Episodic;
  if (s.mobility > t.mobile) return Regime::Mobile;
  if (s.mobility < t.stagnant && s.lid_travel() < t.lid_travel) return Regime::Stagnant;
  return Regime::Sluggish;
}

double quantile(std::vector<double>& values, double share) {
  const auto k = static_cast<std::ptrdiff_t>(share * static_cast<double>(values.size() - 1) + 0.5);
  std::nth_element(values.begin(), values.begin() + k, values.end());
  return values[static_cast<std::size_t>(k)];
}

double mean_at(const std::vector<double>& x, const std::vector<std::size_t>& rows) {
  double sum = 0;
  for (const std::size_t k : rows) sum += x[k];
  return sum / static_cast<double>(rows.size());
}

Signs signs(const Rows& r, const std::vector<std::size_t>& rows, double factor,
            const RegimeThresholds& t) {
  std::vector<double> mobility;
  mobility.reserve(rows.size());
  for (const std::size_t k : rows) mobility.push_back(factor * r.mobility[k]);
  Signs s;
  s.mobility = mean_of(mobility);
  s.low = quantile(mobility, t.burst_share);
  s.high = quantile(mobility, 1 - t.burst_share);
  s.velocity = mean_at(r.velocity, rows);
  s.surface_velocity = factor * mean_at(r.surface_velocity, rows);
  s.nusselt = mean_at(r.nusselt, rows);
  return s;
}

/// Normal with standard deviation 1, by Box and Muller; the engine is the same everywhere.
double normal(std::mt19937_64& random) {
  const auto uniform = [&] { return (static_cast<double>(random() >> 11) + 0.5) * 0x1p-53; };
  const double r = std::sqrt(-2 * std::log(uniform()));
  return r * std::cos(2 * std::numbers::pi * uniform());
}

void count_shares(RegimeVerdict& v, const Rows& r, bool sources, const RegimeThresholds& t) {
  const std::size_t n = r.mobility.size();
  BlockBootstrap bootstrap(n, block_length(n, r.correlation_time, r.period), seed);
  std::mt19937_64 random(seed + 1);
  std::array<int, 6> counts{};
  for (int k = 0; k < resamples; ++k) {
    const double factor = std::exp(t.spread * normal(random));
    const Signs s = signs(r, bootstrap.draw(), factor, t);
    ++counts[static_cast<std::size_t>(regime_of(s, sources, t))];
  }
  for (std::size_t k = 0; k < counts.size(); ++k)
    if (counts[k] > 0)
      v.shares.emplace_back(static_cast<Regime>(k), counts[k] / static_cast<double>(resamples));
  std::stable_sort(v.shares.begin(), v.shares.end(),
                   [](const auto& a, const auto& b) { return a.second > b.second; });
  v.likeliest = v.shares.front().first;
  v.probability = v.shares.front().second;
}

std::string with_error(const RecordSummary& r) {
  return std::isfinite(r.error) ? fmt::format("{:.3g} +- {:.1g}", r.mean, r.error)
                                : fmt::format("{:.3g}, error not known", r.mean);
}

std::string mobility_words(const RecordSummary& m, const RegimeThresholds& t) {
  const auto where = [&] {
    if (m.max < t.strictly_stagnant)
      return fmt::format("below {:g} (strictly stagnant) for the whole record",
                         t.strictly_stagnant);
    if (m.max < t.stagnant)
      return fmt::format("below {:g} (stagnant) for the whole record", t.stagnant);
    if (m.min > t.mobile) return fmt::format("above {:g} (mobile) for the whole record", t.mobile);
    return fmt::format("between {:.3g} and {:.3g}; stagnant is below {:g}, mobile above {:g}",
                       m.min, m.max, t.stagnant, t.mobile);
  };
  std::string words = fmt::format("mobility {}, {}", with_error(m), where());
  if (std::isfinite(m.period)) words += fmt::format(", with a period of {:.3g}", m.period);
  return words;
}

/// All records with their summaries.
struct Judged {
  std::vector<double> mobility;
  RecordSummary of_mobility, of_velocity, of_nusselt;
  StatisticsSettings settings;
};

std::vector<double> mobility_of(const RegimeRecords& r) {
  if (!r.mobility.empty()) return r.mobility;
  std::vector<double> m(r.time.size());
  for (std::size_t k = 0; k < m.size(); ++k) m[k] = r.surface_velocity[k] / r.velocity[k];
  return m;
}

Judged judge_records(const RegimeRecords& r, const RegimeThresholds& t) {
  Judged j;
  j.mobility = mobility_of(r);
  j.settings.negligible = j.settings.steady = negligible;
  j.of_velocity = summarise(r.time, r.velocity, j.settings);
  j.settings.least_time = least_settled_time(j.of_velocity.mean);
  j.of_velocity = summarise(r.time, r.velocity, j.settings);
  j.of_nusselt = summarise(r.time, r.nusselt, j.settings);
  j.settings.scale = t.stagnant;
  j.of_mobility = summarise(r.time, j.mobility, j.settings);
  return j;
}

/// A record that ends slower than `still_velocity` for half its time, and does not grow there.
bool came_to_rest(const RegimeRecords& r, const RegimeThresholds& t) {
  const Series s = defined_rows(r.time, r.velocity);
  if (s.size() < 4) return false;
  const Series half = after(s, s.middle());
  if (half.size() < 4 || half.length() < least_settled_time(0) / 2) return false;
  const std::vector<double> quarters = interval_means(half, half.time.front(), half.time.back(), 2);
  const double largest = *std::max_element(half.value.begin(), half.value.end());
  return largest < t.still_velocity && quarters[1] <= quarters[0] * (1 + 1e-3);
}

RegimeVerdict rest(const RegimeRecords& r, const RegimeThresholds& t) {
  RegimeVerdict v;
  v.regime = v.likeliest = Regime::NotConvecting;
  v.probability = 1;
  v.shares = {{Regime::NotConvecting, 1.0}};
  const Series s = defined_rows(r.time, r.velocity);
  v.settled_from = s.middle();
  v.evidence = {fmt::format(
      "rms velocity {:.2g} at the end, below {:g} and not growing over the last half of the record",
      s.value.back(), t.still_velocity)};
  return v;
}

void give_evidence(RegimeVerdict& v, const RegimeRecords& r, const Judged& j,
                   const RegimeThresholds& t) {
  v.evidence.push_back(mobility_words(j.of_mobility, t));
  v.evidence.push_back(fmt::format("rms velocity {}", with_error(j.of_velocity)));
  const RecordSummary surface = summarise(r.time, r.surface_velocity, j.settings);
  const double travel = surface.mean / (j.of_nusselt.mean * j.of_nusselt.mean);
  v.evidence.push_back(fmt::format("Nusselt number {}", with_error(j.of_nusselt)));
  v.evidence.push_back(fmt::format(
      "while heat diffuses through a lid of 1/Nu the surface moves {:.2g} d, a stagnant "
      "one less than {:g} d",
      travel, t.lid_travel));
  if (r.lid_thickness.empty()) return;
  const RecordSummary lid = summarise(r.time, r.lid_thickness, j.settings);
  if (lid.max == 0)
    v.evidence.push_back("no lid by the profile of velocity: the surface moves along");
  else if (std::isfinite(lid.mean))
    v.evidence.push_back(fmt::format("lid {} of the shell's thickness", with_error(lid)));
}

/// Why the records do not decide; empty: they do.
std::string not_settled(const Judged& j) {
  const std::array<std::pair<const char*, const RecordSummary*>, 3> all{
      {{"mobility", &j.of_mobility},
       {"rms velocity", &j.of_velocity},
       {"Nusselt number", &j.of_nusselt}}};
  std::vector<Reason> reasons;
  for (const auto& [name, record] : all)
    if (!record->enough()) reasons.push_back({name, record->words});
  return joined(reasons);
}

/// Of the time from which all three records are settled, or of the last half.
std::optional<Rows> rows_of(const RegimeRecords& r, const Judged& j, double from) {
  const auto part = [&](const std::vector<double>& x) {
    return after(defined_rows(r.time, x), from);
  };
  const std::array<Series, 4> parts{part(j.mobility), part(r.velocity), part(r.surface_velocity),
                                    part(r.nusselt)};
  double begin = from, end = r.time.back();
  std::size_t count = most_rows;
  for (const Series& s : parts) {
    if (s.size() < 2) return std::nullopt;
    begin = std::max(begin, s.time.front());
    end = std::min(end, s.time.back());
    count = std::min(count, s.size());
  }
  if (!(end > begin)) return std::nullopt;
  const auto means = [&](const Series& s) { return interval_means(s, begin, end, count); };
  Rows rows{means(parts[0]), means(parts[1]), means(parts[2]), means(parts[3])};
  rows.correlation_time = correlation_time(rows.mobility);
  rows.period = j.of_mobility.period * static_cast<double>(count) / (end - begin);
  return rows;
}

double settled_together(const Judged& j) {
  return std::max(
      {j.of_mobility.discarded_until, j.of_velocity.discarded_until, j.of_nusselt.discarded_until});
}

}  // namespace

double least_settled_time(double velocity_rms) {
  return std::min(0.5, 10 / std::max(velocity_rms, 1e-300));
}

RegimeVerdict judge_regime(const RegimeRecords& r, const RegimeThresholds& t) {
  if (came_to_rest(r, t)) return rest(r, t);
  const Judged j = judge_records(r, t);
  RegimeVerdict v;
  v.why_undecided = not_settled(j);
  v.settled_from = settled_together(j);
  const std::optional<Rows> rows =
      std::isfinite(v.settled_from) ? rows_of(r, j, v.settled_from) : std::nullopt;
  if (!rows) {
    if (v.why_undecided.empty())
      v.why_undecided = "the settled parts of the records do not overlap";
    return v;
  }
  count_shares(v, *rows, r.sources, t);
  give_evidence(v, r, j, t);
  if (v.why_undecided.empty() && v.probability < t.least_probability)
    v.why_undecided = fmt::format("{} with a probability of {:.2f} only, {:g} is asked for",
                                  word(v.likeliest), v.probability, t.least_probability);
  if (v.why_undecided.empty()) v.regime = v.likeliest;
  return v;
}

const char* word(Regime r) {
  switch (r) {
    case Regime::NotConvecting:
      return "not convecting";
    case Regime::Stagnant:
      return "stagnant lid";
    case Regime::Sluggish:
      return "sluggish lid";
    case Regime::Mobile:
      return "mobile lid";
    case Regime::Episodic:
      return "episodic lid";
    case Regime::Undecided:
      return "undecided";
  }
  return "";
}

const std::array<RegimeThreshold, 9>& regime_thresholds() {
  using T = RegimeThresholds;
  static constexpr const char* practice = "common practice, no source";
  static constexpr const char* tackley =
      "mobility: Tackley 2000, Geochem. Geophys. Geosyst. 1, 2000GC000036; the number: common "
      "practice, no source";
  static const std::array<RegimeThreshold, 9> table{{
      {"mobile", &T::mobile, 0, 10, "mean mobility above which a lid is mobile", tackley},
      {"stagnant", &T::stagnant, 0, 10, "mean mobility below which a lid is stagnant", tackley},
      {"strictly_stagnant", &T::strictly_stagnant, 0, 10,
       "mobility below which the evidence says strictly stagnant", tackley},
      {"lid_travel", &T::lid_travel, 0, 1e6,
       "(delta_0/d)^2 U_0 below which a lid is stagnant; delta_0/d = 1/Nu, U_0 the rms velocity "
       "along the surface in kappa/d",
       "Solomatov & Moresi 1997, Geophys. Res. Lett. 24, 1907-1910; from memory"},
      {"burst_share", &T::burst_share, 0, 0.5,
       "episodic: mobility is below `stagnant` for at least this share of the time and above "
       "`mobile` for at least this share",
       practice},
      {"still_velocity", &T::still_velocity, 0, 1e6,
       "rms velocity in kappa/d, the Peclet number, below which the shell does not convect",
       practice},
      {"still_nusselt", &T::still_nusselt, 0, 1,
       "without internal heating, |Nu - 1| below which the shell does not convect", practice},
      {"spread", &T::spread, 0, 1,
       "relative standard deviation by which mobility is varied between resamples", practice},
      {"least_probability", &T::least_probability, 0, 1,
       "share of the resamples that must agree for a verdict", practice},
  }};
  return table;
}

}  // namespace lidwright
