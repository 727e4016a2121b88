#include "io/run_statistics.hpp"

#include <algorithm>

namespace lidwright {
namespace {

std::string what_is_not_known(const RunStatistics& s, const MarchSettings& m) {
  std::vector<Reason> reasons;
  for (const std::string& name : names_in(m.known_quantities)) {
    const NamedSummary* r = s.find(name);
    const std::string why =
        r ? why_not_known(r->record, m.known_error) : "not a column of this history";
    if (!why.empty()) reasons.push_back({name, why});
  }
  return joined(reasons);
}

}  // namespace

const NamedSummary* RunStatistics::find(const std::string& name) const {
  const auto found = std::find_if(records.begin(), records.end(),
                                  [&](const NamedSummary& r) { return r.name == name; });
  return found == records.end() ? nullptr : &*found;
}

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

}  // namespace lidwright
