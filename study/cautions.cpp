#include "study/cautions.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>

#include "physics/laws.hpp"
#include "study/short_number.hpp"

namespace lidwright {
namespace {

// All bounds: common practice, no source.
constexpr double small_dissipation = 0.1, small_expansion = 0.1, steep_viscosity = 3.0;
constexpr double settled_after = 3;  ///< settling times until a mean is one

class Cautions {
 public:
  explicit Cautions(const CautionInputs& in) : in_(in) {}
  std::vector<std::string> all();

 private:
  template <class... Args>
  void say(bool when, fmt::format_string<Args...> text, Args&&... args) {
    if (when) found_.push_back(fmt::format(text, std::forward<Args>(args)...));
  }
  void of_onset();
  void of_grid();
  double rise_across(LayerPlace) const;
  void of_viscosity();
  double interior() const;
  void of_approximation();
  void of_end();
  void of_laws();

  const CautionInputs& in_;
  std::vector<std::string> found_;
};

void Cautions::of_onset() {
  const double x = in_.times_critical;
  say(x < 1, "Ra is {:.3g} times critical: what is stirred dies away, heat is conducted", x);
  say(x > 0.95 && x < 1.05,
      "that is too near to critical for the coarse grid of a check: `lidwright onset` tells");
  say(x > 0.5 && x < 1 && in_.numbers.thermal_contrast > 1e3,
      "with a contrast of {} strong disturbances may convect below critical",
      short_number(in_.numbers.thermal_contrast));
  say(x >= 1 && x < 2, "Ra is only {:.3g} times critical: convection grows slowly and stays weak",
      x);
}

void Cautions::of_grid() {
  for (const LayerOnGrid& l : in_.layers)
    say(l.cells < enough_cells,
        "the boundary layer {} has {:.1f} cells across {:.3g} d; {:.0f} or more are common "
        "practice",
        word(l.place), l.cells, l.thickness, enough_cells);
}

/// Change of ln(eta) across a layer, of temperature alone.
double Cautions::rise_across(LayerPlace place) const {
  if (place == LayerPlace::BelowLid) return laws::lid_base_drop;
  const ViscosityLaw& law = in_.model.creep();
  return std::log(law({in_.numbers.t_outer, 0.5}) / law({in_.prediction.balance.interior, 0.5}));
}

/// ln(eta) from cell to cell in the steepest layer.
void Cautions::of_viscosity() {
  for (const LayerOnGrid& l : in_.layers) {
    if (l.place == LayerPlace::InnerWall) continue;
    const double step = std::exp(rise_across(l.place) / std::max(l.cells, 1e-3));
    say(step > steep_viscosity, "viscosity changes {}-fold from cell to cell {}",
        short_number(step), word(l.place));
  }
  const double cell = 1.0 / in_.model.grid.radial, peclet = in_.velocity * cell;
  say(in_.march.heat.flux == HeatFlux::Central && peclet > 5,
      "transport.flux = \"central\" with {:.2g} kappa/d through cells of {:.2g} d: temperatures "
      "will overshoot, take \"limited\" or finer cells",
      in_.velocity, cell);
  if (const auto& a = in_.model.creep().arrhenius) {
    const double surface = (a->energy) / std::pow(a->offset + in_.numbers.t_outer, 2);
    const double inside =
        std::abs(in_.model.creep().log_slope({in_.prediction.balance.interior, 0.5}));
    say(surface > 3 * inside && inside > 0,
        "Arrhenius viscosity: laws with one theta take the slope in the interior, {:.3g} per "
        "DeltaT; at the surface it is {:.3g}",
        inside, surface);
  }
}

/// Temperature that the laws foresee; without laws half way between the walls'.
double Cautions::interior() const {
  return in_.prediction.foretold() ? in_.prediction.balance.interior
                                   : (in_.numbers.t_inner + in_.numbers.t_outer) / 2;
}

void Cautions::of_approximation() {
  const bool boussinesq = in_.model.reference.dissipation_number == 0;
  say(boussinesq && in_.dissipation > small_dissipation,
      "Boussinesq with a dissipation number of {:.2g}: compression heats by {:.2g} DeltaT, take "
      "reference.approximation = \"extended-boussinesq\" or \"anelastic-liquid\"",
      in_.dissipation, std::expm1(in_.dissipation) * (interior() + in_.surface));
  const bool extended = !boussinesq && in_.model.reference.density.constant();
  say(extended && in_.dissipation > 0.3,
      "extended Boussinesq with a dissipation number of {:.2g}: density should vary, take "
      "\"anelastic-liquid\"",
      in_.dissipation);
  say(in_.expansion > small_expansion,
      "expansivity times temperature drop is {:.2g}: density changes are not small", in_.expansion);
}

void Cautions::of_end() {
  const double settling = in_.prediction.balance.settling, end = in_.march.march.end_time;
  say(settling > 0 && end < settled_after * settling,
      "march.end_time is {:.2g} d^2/kappa, less than {:.0f} times the {:.2g} in which heat "
      "settles: "
      "numbers at the end depend on the start, and laws of settled convection may not hold yet",
      end, settled_after, settling);
  const InitialSettings& start = in_.march.initial;
  say(start.modes.empty() && start.noise == 0 && start.from.empty(),
      "nothing disturbs the start: without [initial] modes or noise the mantle stays at rest");
}

/// Along mid-depth.
double breadth(const Shell& s) {
  const double length = s.lateral_end - s.lateral_begin;
  return s.shape == Shape::Box ? length : length * (s.inner_radius + 0.5);
}

void Cautions::of_laws() {
  say(in_.model.shell.sides == Sides::Reflecting && breadth(in_.model.shell) < 1.5 &&
          in_.prediction.regime != Regime::NotConvecting,
      "the region is {:.2g} d wide: one cell, whose Nusselt number goes with its width",
      breadth(in_.model.shell));
  const bool sources = in_.numbers.source != 0;
  say(sources && in_.prediction.regime == Regime::Sluggish,
      "heated within under a sluggish lid: no law is known for that");
  say(sources && std::isfinite(in_.times_critical) && in_.times_critical > 1 &&
          in_.numbers.mean_source < 0,
      "sources take heat away: no law is known for that");
  for (const std::string& doubt : in_.prediction.doubts) found_.push_back(doubt);
}

std::vector<std::string> Cautions::all() {
  of_onset();
  of_grid();
  of_end();
  of_approximation();
  of_viscosity();
  of_laws();
  return std::move(found_);
}

}  // namespace

std::vector<std::string> cautions(const CautionInputs& in) { return Cautions(in).all(); }

}  // namespace lidwright
