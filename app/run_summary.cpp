#include "app/run_summary.hpp"

#include <fmt/format.h>

#include <cmath>

#include "app/progress.hpp"

namespace lidwright {

std::vector<SummaryEntry> state_entries(const HistoryRow& r) {
  return {
      {"heat_flow_inner", r.heat_flow_inner, "k DeltaT d^(n-2)",
       "through the inner wall, > 0 enters the shell"},
      {"heat_flow_outer", r.heat_flow_outer, "k DeltaT d^(n-2)",
       "through the outer wall, > 0 leaves it"},
      {"nusselt_inner", r.nusselt_inner, "",
       "heat flow over the conductive one at the same wall temperatures"},
      {"nusselt_outer", r.nusselt_outer, "",
       "heat flow over the conductive one at the same wall temperatures"},
      {"temperature_mean", r.temperature_mean, "DeltaT",
       "over the volume, above the surface temperature"},
      {"velocity_rms", r.velocity_rms, "kappa/d", "over the volume"},
      {"velocity_rms_outer", r.velocity_rms_outer, "kappa/d", "along the outer wall"},
      {"mobility", r.mobility, "", "velocity_rms_outer / velocity_rms"},
      {"lid_thickness_velocity", r.lid_thickness_velocity, "d",
       "by the tangent to the velocity profile at its inflection point"},
      {"lid_thickness_isotherm", r.lid_thickness_isotherm, "d",
       "to temperature_internal - 2.2 rheological_temperature"},
      {"temperature_internal", r.temperature_internal, "DeltaT",
       "between the thermal boundary layers"},
      {"rayleigh_internal", r.rayleigh_internal, "", "with the mean viscosity there"},
      {"work_mismatch", r.work_mismatch, "", "(dissipation - buoyancy work) / work"},
  };
}

std::string state_lines(const HistoryRow& r) {
  return fmt::format(
      "  Nusselt number        {:.6g} at the outer wall, {:.6g} at the inner\n"
      "  heat flow             {:.6g} out, {:.6g} in from below, {:.6g} from sources   [k DeltaT "
      "d^(n-2)]\n"
      "  mean temperature      {:.6g}   [DeltaT above the surface]\n"
      "  rms velocity          {:.6g} in the volume, {:.3g} along the outer wall   [kappa/d]\n"
      "  budgets               heat closed to {:.1e}, work against dissipation to {:.1e}\n",
      r.nusselt_outer, r.nusselt_inner, r.heat_flow_outer, r.heat_flow_inner, r.heat_source,
      r.temperature_mean, r.velocity_rms, r.velocity_rms_outer, std::abs(r.heat_budget_residual),
      std::abs(r.work_mismatch));
}

std::vector<SummaryEntry> summary_entries(const Case& c, const HistoryRow& r,
                                          const std::string& end) {
  std::vector<SummaryEntry> entries{
      {"title", c.title, "", "of the case"},
      {"end", end, "", "why the run stopped"},
      {"steps", r.step, "", "time steps"},
      {"time", r.time, "d^2/kappa", "at the last step"},
  };
  const std::vector<SummaryEntry> state = state_entries(r),
                                  last{
                                      {"heat_budget_residual", r.heat_budget_residual, "",
                                       "of the last step, over its largest term"},
                                      {"temperature_change_rate", r.temperature_change_rate,
                                       "DeltaT kappa/d^2", "rms of dT/dt over the last step"},
                                      {"factor_applications", r.applications, "",
                                       "of the flow's factor"},
                                      {"factorisations", r.factorisations, "",
                                       "of the flow's matrix"},
                                      {"wall_time", r.wall_time, "s", "over all sessions"},
                                  };
  entries.insert(entries.end(), state.begin(), state.end());
  entries.insert(entries.end(), last.begin(), last.end());
  return entries;
}

std::string summary_for_people(const Case& c, const HistoryRow& r, const std::string& end,
                               const std::string& statistics, const std::string& folder) {
  return fmt::format(
      "{}{}: {} steps to time {:.6g} in {}\n{}{}"
      "  flow solver           {:.2f} applications a step, {} factorisations\n"
      "  results in            {}",
      c.title.empty() ? "" : c.title + "\n", end, r.step, r.time, duration_text(r.wall_time),
      state_lines(r), statistics,
      r.step > 0 ? static_cast<double>(r.applications) / static_cast<double>(r.step) : 0.0,
      r.factorisations, folder);
}

}  // namespace lidwright
