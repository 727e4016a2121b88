#include "io/page_limits.hpp"

namespace lidwright::page {
namespace {

const char* of_compression(const Model& m) {
  if (m.reference.dissipation_number > 0)
    return "Compression and dissipation are allowed for with a reference state that does not move; "
           "properties depend on depth, not on temperature.";
  return "Boussinesq: no compression, no adiabatic gradient, no heating by dissipation. Good while "
         "the mantle is thin against the depth over which the adiabat changes by its own amount.";
}

const char* of_geometry(const Shell& s) {
  if (s.shape == Shape::AxisymmetricShell)
    return "Two dimensions: plumes are rings about an axis, but for those on it. Heat flow and "
           "planform differ from those of a three-dimensional mantle.";
  return "Two dimensions: plumes are sheets. Heat flow and planform differ from those of a "
         "three-dimensional mantle.";
}

const char* of_kind(RunKind kind) {
  switch (kind) {
    case RunKind::March:
      return "A mean is of this run: one start, one grid, one record. Closed budgets say that the "
             "equations were solved consistently, not that the grid was fine enough: compare two.";
    case RunKind::Settle:
      return "A steady state that is found need not be stable, nor the only one.";
    case RunKind::Onset:
      return "Onset is that of small, stationary disturbances; finite ones may convect below it.";
  }
  return "";
}

}  // namespace

std::vector<std::string> limits_of(const SavedRun& run) {
  const Model& m = run.settings.model;
  std::vector<std::string> all{
      "Research estimates of how a model mantle behaves. Not fit for hazard assessment, for "
      "engineering, or for statements about a particular body without an account of what is not "
      "known about it.",
      of_geometry(m.shell), of_compression(m), of_kind(run.kind),
      "One material: no composition, no crust, no melting, no phase changes, no elasticity, no "
      "grains or memory. The core is a wall with a temperature or a heat flux."};
  if (m.yielding)
    all.emplace_back(
        "Rock yields by an effective viscosity: shear zones are a cell or two wide, and their "
        "width "
        "depends on the grid.");
  return all;
}

}  // namespace lidwright::page
