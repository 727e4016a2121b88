#include "app/run_statistics.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>

namespace lidwright {
namespace {

/// Means that the summary names; all are in statistics.csv.
constexpr const char* in_summary[] = {"nusselt_outer", "heat_flow_outer", "temperature_mean",
                                      "velocity_rms", "mobility"};

std::string mean_text(const RecordSummary& r) {
  return r.enough() ? fmt::format("{:.6g} +- {:.1g}", r.mean, r.error)
                    : fmt::format("not known: {}", r.words);
}

}  // namespace

std::vector<SummaryEntry> statistics_entries(const RunStatistics& s, const MarchSettings& m) {
  std::vector<SummaryEntry> entries;
  if (m.until == MarchUntil::Known)
    entries.push_back(
        {"known", s.not_known.empty() ? "yes" : s.not_known, "",
         fmt::format("are the means of march.known known to {:g}, or why not", m.known_error)});
  for (const char* name : in_summary) {
    const NamedSummary* r = s.find(name);
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
  const NamedSummary *nusselt = s.find("nusselt_outer"), *t = s.find("temperature_mean");
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
