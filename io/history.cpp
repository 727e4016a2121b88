#include "io/history.hpp"

#include <fcntl.h>
#include <fmt/format.h>
#include <unistd.h>

#include <algorithm>
#include <array>
#include <cerrno>
#include <charconv>
#include <string_view>

#include "io/case_file.hpp"
#include "io/collective.hpp"

namespace lidwright {
namespace {

constexpr std::string_view title = "lidwright history";

constexpr std::array<Column, 46> columns{{
    {"step", "1", "number of the time step; 0 is the start"},
    {"time", "d^2/kappa", "time at the end of the step"},
    {"time_step", "d^2/kappa", "length of the step"},
    {"heat_flow_inner", "k DeltaT d^(n-2)", "heat through the inner wall, > 0 enters the shell"},
    {"heat_flow_outer", "k DeltaT d^(n-2)", "heat through the outer wall, > 0 leaves the shell"},
    {"nusselt_inner", "1",
     "heat_flow_inner over the conductive flow without sources at the same wall temperatures"},
    {"nusselt_outer", "1",
     "heat_flow_outer over the conductive flow without sources at the same wall temperatures"},
    {"temperature_mean", "DeltaT", "mean over the volume"},
    {"temperature_min", "DeltaT", "least of all cells"},
    {"temperature_max", "DeltaT", "largest of all cells"},
    {"temperature_inner", "DeltaT", "mean over the inner wall"},
    {"temperature_outer", "DeltaT", "mean over the outer wall"},
    {"velocity_rms", "kappa/d", "root mean square over the volume"},
    {"velocity_rms_inner", "kappa/d", "root mean square along the inner wall, over its area"},
    {"velocity_rms_outer", "kappa/d", "root mean square along the outer wall, over its area"},
    {"dissipation", "eta kappa^2 d^(n-4)", "integral of stress : strain rate over the volume"},
    {"buoyancy_work", "eta kappa^2 d^(n-4)",
     "integral of Ra alpha rho g T u_r over the volume, > 0 drives the flow"},
    {"work_mismatch", "1", "(dissipation - buoyancy_work) / buoyancy_work"},
    {"flow_error", "1",
     "relative velocity error in the dissipation norm, as the solver estimates it"},
    {"heat_source", "k DeltaT d^(n-2)", "integral of the internal heating over the volume"},
    {"viscous_heating", "k DeltaT d^(n-2)", "Di/Ra times dissipation"},
    {"adiabatic_cooling", "k DeltaT d^(n-2)",
     "integral of Di alpha rho g u_r (T + T_surf) over the volume, > 0 cools"},
    {"heat_budget_residual", "1",
     "of the last step: change of heat content less wall flows and sources, over the largest of "
     "them"},
    {"temperature_change_rate", "DeltaT kappa/d^2",
     "root mean square over the volume of the rate of change of temperature"},
    {"mobility", "1", "velocity_rms_outer / velocity_rms"},
    {"plateness", "1",
     "1 - f/0.6, f the share of the outer wall that holds 80 % of its deformation"},
    {"velocity_rms_lid_base", "kappa/d",
     "root mean square over the surface at depth lid_thickness_isotherm"},
    {"lid_thickness_velocity", "d",
     "depth where the tangent to the velocity profile at its inflection point meets velocity 0"},
    {"lid_thickness_isotherm", "d",
     "depth where the mean temperature is temperature_internal - 2.2 rheological_temperature"},
    {"lid_thickness_advection", "d",
     "depth where advection carries a tenth of the heat through the surface"},
    {"lid_thickness_conduction", "d",
     "outer thermal boundary layer: depth where the temperature profile's tangent at the outer "
     "wall reaches temperature_internal"},
    {"boundary_layer_inner", "d",
     "inner thermal boundary layer: the same from the inner wall, in height above it"},
    {"temperature_internal", "DeltaT",
     "mean over the volume between the two thermal boundary layers"},
    {"rayleigh_internal", "1",
     "Rayleigh number of the case over the geometric mean of the viscosity there"},
    {"rheological_temperature", "DeltaT", "|eta/(d eta/dT)| at temperature_internal"},
    {"frank_kamenetskii", "1", "(temperature_inner - temperature_outer) / rheological_temperature"},
    {"stress_rms_outer", "eta kappa/d^2",
     "root mean square of the stress's second invariant, continued to the outer wall"},
    {"topography_rms_outer", "eta kappa/d^2",
     "root mean square of the normal stress on the outer wall, less its mean"},
    {"plumes", "1", "hot currents upwards in the middle of the interior"},
    {"downwellings", "1", "cold currents downwards there"},
    {"yielding_share", "1", "share of the volume that yields"},
    {"flow_iterations", "1",
     "Newton iterations of the flow at this step; 0: viscosity does not depend on it"},
    {"fixed_point_steps", "1",
     "steps of fixed-point iteration that stood in for Newton's, since the start"},
    {"applications", "1", "applications of the factor since the start"},
    {"factorisations", "1", "factorisations since the start"},
    {"wall_time", "s",
     "time by the clock since the start, over all sessions; the one column that differs between "
     "equal runs"},
}};

/// Step of a whole row, -1 for anything else.
long step_of(std::string_view line) {
  if (std::count(line.begin(), line.end(), ',') + 1 != static_cast<long>(columns.size())) return -1;
  long step = -1;
  const auto [end, error] = std::from_chars(line.data(), line.data() + line.size(), step);
  return error == std::errc() && *end == ',' && line.back() != ',' ? step : -1;
}

/// Of a text that ends with a whole row or with the head.
long step_of_last_row(std::string_view text) {
  text.remove_suffix(1);
  const std::size_t before = text.rfind('\n');
  return step_of(text.substr(before + 1));
}

}  // namespace

std::string history_head() { return table_head(title, columns); }

std::span<const Column> history_columns() { return columns; }

std::vector<double> history_numbers(const HistoryRow& r) {
  return {static_cast<double>(r.step),
          r.time,
          r.time_step,
          r.heat_flow_inner,
          r.heat_flow_outer,
          r.nusselt_inner,
          r.nusselt_outer,
          r.temperature_mean,
          r.temperature_min,
          r.temperature_max,
          r.temperature_inner,
          r.temperature_outer,
          r.velocity_rms,
          r.velocity_rms_inner,
          r.velocity_rms_outer,
          r.dissipation,
          r.buoyancy_work,
          r.work_mismatch,
          r.flow_error,
          r.heat_source,
          r.viscous_heating,
          r.adiabatic_cooling,
          r.heat_budget_residual,
          r.temperature_change_rate,
          r.mobility,
          r.plateness,
          r.velocity_rms_lid_base,
          r.lid_thickness_velocity,
          r.lid_thickness_isotherm,
          r.lid_thickness_advection,
          r.lid_thickness_conduction,
          r.boundary_layer_inner,
          r.temperature_internal,
          r.rayleigh_internal,
          r.rheological_temperature,
          r.frank_kamenetskii,
          r.stress_rms_outer,
          r.topography_rms_outer,
          static_cast<double>(r.plumes),
          static_cast<double>(r.downwellings),
          r.yielding_share,
          static_cast<double>(r.flow_iterations),
          static_cast<double>(r.fixed_point_steps),
          static_cast<double>(r.applications),
          static_cast<double>(r.factorisations),
          r.wall_time};
}

std::string history_row(const HistoryRow& r) { return table_row(history_numbers(r)); }

std::string history_until(const std::string& text, long step, const std::string& path) {
  const std::string head = history_head();
  if (!text.starts_with(head))
    throw InputError(fmt::format(
        "{}: not a history this version can go on with (its head is another one); resume with "
        "the version that wrote it, or start a new run in another folder",
        path));
  std::size_t kept = head.size();
  while (true) {
    const std::size_t end = text.find('\n', kept);
    if (end == std::string::npos) break;
    const long row = step_of(std::string_view(text).substr(kept, end - kept));
    if (row < 0 || row > step) break;
    kept = end + 1;
  }
  return text.substr(0, kept);
}

History::History(MPI_Comm comm, std::string path) : comm_(comm), path_(std::move(path)) {}

void History::open_for_appending() {
  file_ = Descriptor(::open(path_.c_str(), O_WRONLY | O_APPEND | O_CLOEXEC));
  if (file_ < 0) throw OutputError(output_failure(path_, errno));
}

History History::start(MPI_Comm comm, const std::string& path) {
  History history(comm, path);
  on_first_rank<OutputError>(comm, [&] {
    write_atomically(path, history_head());
    history.open_for_appending();
  });
  return history;
}

History History::resume(MPI_Comm comm, const std::string& path, long step) {
  History history(comm, path);
  std::string before, kept;
  on_first_rank<InputError>(comm, [&] {
    before = read_whole_file(path);
    kept = history_until(before, step, path);
  });
  on_first_rank<OutputError>(comm, [&] {
    if (kept != before) write_atomically(path, kept);
    history.open_for_appending();
    history.last_step_ = step_of_last_row(kept);
  });
  MPI_Bcast(&history.last_step_, 1, MPI_LONG, 0, comm);
  return history;
}

void History::append(const HistoryRow& row) {
  on_first_rank<OutputError>(comm_, [&] {
    const off_t before = ::lseek(file_, 0, SEEK_END);
    const int error = write_all(file_, history_row(row));
    if (error == 0) return;
    // Half a row is worse than none; if even this fails, `resume` drops it.
    if (before < 0 || ::ftruncate(file_, before) != 0)
      throw OutputError(output_failure(path_, error));
    throw OutputError(output_failure(path_, error));
  });
  last_step_ = row.step;
}

void History::sync() {
  on_first_rank<OutputError>(comm_, [&] {
    if (::fsync(file_) != 0) throw OutputError(output_failure(path_, errno));
  });
}

}  // namespace lidwright
