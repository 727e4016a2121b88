#include "io/linear_rules.hpp"

#include <fmt/format.h>

#include "io/case_entries.hpp"

namespace lidwright {
namespace {

std::string steady_state_of(const char* table) {
  return fmt::format(
      "[{}]: the viscosity depends on the rate of strain, which the Newton steps to a steady state "
      "do not know; march it instead (lidwright march, until march.steady), or remove the table",
      table);
}

std::string onset_of(const DislocationCreep& creep) {
  const char* remedy =
      creep.alone ? "take viscosity.dislocation.alone = false, or remove the table"
                  : "with diffusion creep beside it, the onset is that of diffusion creep: remove "
                    "the table; march to see finite disturbances";
  return fmt::format(
      "[viscosity.dislocation]: a power law has no linear onset, as it does not creep at rest; {}",
      remedy);
}

std::string onset_of(const Yielding& yielding) {
  const bool doubled = yielding.law == YieldingLaw::HarmonicMean;
  return fmt::format(
      "[viscosity.yielding]: at rest nothing yields, so that the onset is that of the creep{}: "
      "remove the table; march to see finite disturbances",
      doubled ? " with twice its viscosity, at twice its Rayleigh number (viscosity.yielding.law = "
                "\"harmonic-mean\")"
              : "");
}

}  // namespace

void refuse_nonlinear(const Model& m, Linearised what, const std::string& place) {
  using case_text::refuse;
  if (!m.nonlinear()) return;
  if (what == Linearised::SteadyState)
    refuse(place, steady_state_of(m.dislocation ? "viscosity.dislocation" : "viscosity.yielding"));
  refuse(place, m.dislocation ? onset_of(*m.dislocation) : onset_of(*m.yielding));
}

}  // namespace lidwright
