#include <fmt/format.h>

#include <cmath>

#include "app/check_text.hpp"

namespace lidwright {
namespace {

bool given_flux(const Wall& wall) { return std::holds_alternative<FixedHeatFlux>(wall.thermal); }

/// Which walls' temperatures are taken from rock at rest, as none are given.
std::string walls_at_rest(const CheckFindings& f) {
  std::string text;
  if (given_flux(f.c.model.walls.outer))
    text += fmt::format(", outer wall as at rest, {} DeltaT", short_number(f.numbers.t_outer));
  if (given_flux(f.c.model.walls.inner))
    text += fmt::format(", inner wall as at rest, {} DeltaT", short_number(f.numbers.t_inner));
  return text.empty() ? "" : " (" + text.substr(2) + ")";
}

std::string rayleigh_lines(const CheckFindings& f) {
  const DerivedNumbers& n = f.numbers;
  const ReferenceProfiles& r = f.c.model.reference;
  const bool uniform = r.expansivity.constant() && r.gravity.constant() && r.density.constant();
  std::string text =
      check_line("Rayleigh number",
                 fmt::format("{}, viscosity where the law gives 1{}", short_number(n.reference),
                             uniform ? "" : "; properties where their profiles are 1"));
  if (n.wall_contrast != 1 || n.depth_contrast != 1) {
    text += check_line("  at the walls",
                       fmt::format("{} outer, {} inner, viscosity of each{}", short_number(n.outer),
                                   short_number(n.inner), walls_at_rest(f)));
    text += check_line("  half way", fmt::format("{}, viscosity at mid-depth and the mean of the "
                                                 "walls' temperatures",
                                                 short_number(n.half)));
    text += check_line("  at rest", fmt::format("{}, mean of ln(viscosity) over the shell in "
                                                "conduction",
                                                short_number(n.at_rest)));
  }
  if (f.prediction.balance.interior_rayleigh > 0)
    text += check_line("  of the interior",
                       fmt::format("{}, viscosity at {} DeltaT, as the laws below foresee it",
                                   short_number(f.prediction.balance.interior_rayleigh),
                                   short_number(f.prediction.balance.interior)));
  if (std::isfinite(n.internal))
    text += check_line(
        "  Ra_Q, sources",
        n.internal == n.internal_half
            ? fmt::format("{}, rho alpha g H d^5/(kappa k eta)", short_number(n.internal))
            : fmt::format("{}, rho alpha g H d^5/(kappa k eta), eta where the law "
                          "gives 1; {} half way",
                          short_number(n.internal), short_number(n.internal_half)));
  return text;
}

std::string onset_line(const CheckFindings& f) {
  if (!std::isfinite(f.times_critical)) return check_line("onset", "not known: " + f.no_onset);
  std::string text = fmt::format("Ra is {} times critical ({})", short_number(f.times_critical),
                                 short_number(f.critical));
  if (f.c.model.nonlinear()) text += ", of the creep alone";
  return check_line("onset", text);
}

std::string contrast_lines(const CheckFindings& f) {
  const DerivedNumbers& n = f.numbers;
  if (n.wall_contrast == 1 && n.depth_contrast == 1) return check_line("viscosity", "uniform");
  std::string text = check_line(
      "viscosity contrast",
      fmt::format("{} by temperature, outer over inner wall at mid-depth; {} from wall to "
                  "wall, depth included{}",
                  short_number(n.thermal_contrast), short_number(n.wall_contrast),
                  walls_at_rest(f)));
  if (n.depth_contrast > 1.001)
    text += check_line("  by depth alone", short_number(n.depth_contrast) + ", largest over least");
  return text + check_line("Frank-Kamenetskii",
                           fmt::format("theta = {}, ln of the contrast by temperature; {} by the "
                                       "slope at the inner wall{}",
                                       short_number(n.theta), short_number(n.frank_kamenetskii),
                                       walls_at_rest(f)));
}

/// A heat flow of the program in W or W/m^2 of the wall.
std::string flux_in_si(const CheckFindings& f, double flow, bool outer) {
  if (!f.c.body) return "";
  const auto g = make_geometry(f.c.model);
  const double area = g->wall_area(outer ? g->radial_cells() : 0);
  return fmt::format(" ({} mW/m^2)",
                     short_number(1e3 * flow / area * scales_of(*f.c.body).heat_flux));
}

/// Without sources. With a given flux the walls' drop, and what Nu is made with, changes in time.
std::string conduction_line(const CheckFindings& f) {
  const DerivedNumbers& n = f.numbers;
  const Walls& walls = f.c.model.walls;
  const bool changes = given_flux(walls.inner) || given_flux(walls.outer);
  const double flow = n.conductive_flow * (changes ? 1 : n.t_inner - n.t_outer);
  const char* what = changes ? "of a unit drop, without sources; Nu is made with the walls' drop "
                               "of the time"
                             : "without sources, where Nu is 1";
  return check_line("conducted heat", fmt::format("{} k DeltaT d^(n-2){} {}", short_number(flow),
                                                  flux_in_si(f, flow, true), what));
}

std::string heat_lines(const CheckFindings& f) {
  const DerivedNumbers& n = f.numbers;
  std::string text = conduction_line(f);
  if (n.source == 0) return text;
  return text + check_line("  with sources",
                           fmt::format("{} out{}, {} in from below, {} from sources; {} DeltaT at "
                                       "the hottest",
                                       short_number(f.rest.heat_flow_outer),
                                       flux_in_si(f, f.rest.heat_flow_outer, true),
                                       short_number(f.rest.heat_flow_inner), short_number(n.source),
                                       short_number(f.rest.hottest)));
}

std::string adiabat_line(const CheckFindings& f) {
  const double number = f.c.model.reference.dissipation_number;
  if (number == 0 && !f.c.body) return check_line("adiabatic rise", "none, Boussinesq");
  if (number == 0)
    return check_line("adiabatic rise",
                      fmt::format("left out, Boussinesq; the body's dissipation number is {}",
                                  short_number(dissipation_number(*f.c.body))));
  return check_line("adiabatic rise",
                    fmt::format("Di = {}; T + T_surf rises {}-fold to the core, by {} DeltaT from "
                                "the mean of the walls",
                                short_number(number), short_number(f.numbers.adiabatic_rise),
                                short_number(f.numbers.adiabatic_drop)));
}

std::string scale_lines(const CheckFindings& f) {
  if (!f.c.body) return "";
  const Scales s = scales_of(*f.c.body);
  const double velocity = s.velocity * year * 1000;
  return check_line("units",
                    fmt::format("time d^2/kappa = {} Myr, length d = {} km, velocity "
                                "kappa/d = {} mm/yr, temperature {} K",
                                short_number(s.time / million_years), short_number(s.length / 1000),
                                short_number(velocity), short_number(s.temperature))) +
         check_line("the march",
                    fmt::format("{} Myr, {} d^2/kappa",
                                short_number(f.c.march.end_time * s.time / million_years),
                                short_number(f.c.march.end_time)));
}

}  // namespace

std::string numbers_text(const CheckFindings& f) {
  return "\nNUMBERS\n" + rayleigh_lines(f) + onset_line(f) + contrast_lines(f) + heat_lines(f) +
         adiabat_line(f) + scale_lines(f);
}

}  // namespace lidwright
