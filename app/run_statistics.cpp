#include "app/run_statistics.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>

namespace lidwright {
namespace {

/// Means that the summary names; all are in statistics.csv.
constexpr const char* in_summary[] = {"nusselt_outer", "heat_flow_outer", "temperature_mean",
                                      "velocity_rms", "mobility"};

const NamedSummary* find(const RunStatistics& s, const std::string& name) {
  const auto found = std::find_if(s.records.begin(), s.records.end(),
                                  [&](const NamedSummary& r) { return r.name == name; });
  return found == s.records.end() ? nullptr : &*found;
}

std::string what_is_not_known(const RunStatistics& s, const MarchSettings& m) {
  std::vector<Reason> reasons;
  for (const std::string& name : names_in(m.known_quantities)) {
    const NamedSummary* r = find(s, name);
    const std::string why =
        r ? why_not_known(r->record, m.known_error) : "not a column of this history";
    if (!why.empty()) reasons.push_back({name, why});
  }
  return joined(reasons);
}

std::string mean_text(const RecordSummary& r) {
  return r.enough() ? fmt::format("{:.6g} +- {:.1g}", r.mean, r.error)
                    : fmt::format("not known: {}", r.words);
}

}  // namespace

RegimeRecords regime_records(const HistoryTable& t, const std::string& path) {
  const auto optional = [&](const char* name) {
    const auto* column = t.find(name);
    return column ? *column : std::vector<double>{};
  };
  RegimeRecords r;
  r.time = column_of(t, "time", path);
  r.velocity = column_of(t, "velocity_rms", path);
  r.surface_velocity = column_of(t, "velocity_rms_outer", path);
  r.nusselt = column_of(t, "nusselt_outer", path);
  r.mobility = optional("mobility");
  r.lid_thickness = optional("lid_thickness_velocity");
  const std::vector<double> sources = optional("heat_source");
  r.sources = std::any_of(sources.begin(), sources.end(), [](double h) { return h != 0; });
  return r;
}

StatisticsSettings settings_for(const std::vector<double>& time,
                                const std::vector<double>& velocity_rms, const MarchSettings& m) {
  StatisticsSettings settings;
  if (m.until == MarchUntil::Known) settings.steady = std::max(settings.steady, m.known_error / 2);
  settings.least_time = least_settled_time(summarise(time, velocity_rms).mean);
  return settings;
}

RunStatistics run_statistics(const HistoryTable& t, const std::string& path,
                             const MarchSettings& m) {
  RunStatistics s;
  const RegimeRecords records = regime_records(t, path);
  s.records = summarise_history(t, settings_for(records.time, records.velocity, m));
  s.lid = judge_regime(records);
  s.not_known = what_is_not_known(s, m);
  return s;
}

std::vector<SummaryEntry> statistics_entries(const RunStatistics& s, const MarchSettings& m) {
  std::vector<SummaryEntry> entries;
  if (m.until == MarchUntil::Known)
    entries.push_back(
        {"known", s.not_known.empty() ? "yes" : s.not_known, "",
         fmt::format("are the means of march.known known to {:g}, or why not", m.known_error)});
  for (const char* name : in_summary) {
    const NamedSummary* r = find(s, name);
    if (!r || !r->record.enough()) continue;
    const std::string unit = r->unit == "1" ? "" : r->unit;
    entries.push_back(
        {fmt::format("mean_{}", name), r->record.mean, unit, "over the time of the settled part"});
    entries.push_back({fmt::format("error_{}", name), r->record.error, unit,
                       "of this mean, half width of the 95 % interval"});
  }
  entries.push_back({"regime", word(s.lid.regime), "", "of the lid"});
  entries.push_back({"regime_probability", s.lid.probability, "",
                     "share of the resamples that give the likeliest regime"});
  entries.push_back(
      {"regime_likeliest", word(s.lid.likeliest), "", "whether or not it is decided"});
  if (!s.lid.why_undecided.empty())
    entries.push_back({"regime_why_undecided", s.lid.why_undecided, "", "of the lid"});
  entries.push_back({"regime_evidence", fmt::format("{}", fmt::join(s.lid.evidence, "; ")), "",
                     "for the regime"});
  return entries;
}

std::string regime_for_people(const RegimeVerdict& v) {
  std::string text;
  if (v.regime == Regime::Undecided)
    text = fmt::format("  regime                undecided: {}\n", v.why_undecided);
  else
    text = fmt::format("  regime                {}, probability {:.2f}\n", word(v.regime),
                       v.probability);
  for (const std::string& e : v.evidence) text += fmt::format("                        {}\n", e);
  if (v.regime == Regime::Undecided && v.likeliest != Regime::Undecided)
    text += fmt::format("                        as far as it goes: {}, {:.2f} of the resamples\n",
                        word(v.likeliest), v.probability);
  return text;
}

std::string statistics_for_people(const RunStatistics& s, const MarchSettings& m) {
  std::string text;
  const NamedSummary *nusselt = find(s, "nusselt_outer"), *t = find(s, "temperature_mean");
  if (nusselt && t)
    text += fmt::format(
        "  means over time       Nusselt number at the outer wall {}\n"
        "                        mean temperature {}\n",
        mean_text(nusselt->record), mean_text(t->record));
  if (m.until == MarchUntil::Known)
    text += s.not_known.empty() ? fmt::format("  known                 to {:g}: {}\n",
                                              m.known_error, m.known_quantities)
                                : fmt::format("  not known             {}\n", s.not_known);
  return text + regime_for_people(s.lid);
}

}  // namespace lidwright
