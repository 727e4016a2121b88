#include "study/prediction.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <array>
#include <cmath>

#include "physics/laws.hpp"
#include "study/short_number.hpp"

namespace lidwright {
namespace {

/// What coefficients from memory and cells of other widths leave open, beyond the laws' own spread.
constexpr double margin = 1.1;
/// Below this many times critical, power laws of Ra do not hold (common practice, no source).
constexpr double high_enough = 10;

/// Contrast of viscosity by depth alone that laws of uniform layers do not know (own choice).
constexpr double uneven_depth = 3;
/// Ra above which cells are seldom steady, and Ra_Q from which it is called high: own choice, no
/// source.
constexpr double steady_to = 1e7, high_rayleigh_q = 1e4;

/// A law of a wall's layer.
struct WallLaw {
  const char* name;
  const char* range;
  double coefficient;   ///< a between free-slip walls
  double least, most;   ///< Rayleigh numbers, the walls' drop, viscosity of the interior
  const char* sources;  ///< what is said where there are some; null: made for them
  bool within = false;  ///< made for sources alone: the range is that of Ra_Q
};

/// What a law of a stagnant lid was made for.
struct LidRange {
  double least_theta = 8;  ///< where lids are stagnant: ours, for a law whose source gives none
  double most_theta = 1e99;
  double least_contrast = 0, most_contrast = 1e99;  ///< exp(theta)
  double most_hot = 1e99;  ///< Rayleigh number, the walls' drop, viscosity of the inner wall
  bool box = false;        ///< of the whole layer: no balance carries it over to other shells
};
constexpr LidRange of_solomatov_moresi{};
constexpr LidRange of_davaille_jaupart{.most_contrast = 1e6};
constexpr LidRange of_moresi_solomatov{.most_theta = 30, .most_hot = 1e9, .box = true};
constexpr LidRange of_deschamps_lin{
    .least_theta = 0, .least_contrast = 1e5, .most_contrast = 1e8, .box = true};

bool insulated(const Model& m) {
  const auto* flux = std::get_if<FixedHeatFlux>(&m.walls.inner.thermal);
  return flux && flux->outward == 0;
}
bool given_flux(const Model& m) {
  return std::holds_alternative<FixedHeatFlux>(m.walls.inner.thermal);
}

double per_cube_root(double nusselt, double rayleigh) { return nusselt / std::cbrt(rayleigh); }

std::vector<WallLaw> wall_laws(const Model& m, double interior_rayleigh) {
  using namespace laws;
  const double ra = std::max(interior_rayleigh, 2 * critical_free);
  const double moore = wall_coefficient(per_cube_root(nusselt_moore(ra), ra));
  std::vector<WallLaw> all = {
      {"local stability (Turcotte & Schubert, ch. 6)", "Ra >> critical",
       wall_coefficient(nusselt_local_stability(1)), high_enough * critical_free, 1e99, "sources"},
      {"steady cells (Turcotte & Oxburgh 1967)", "steady, free-slip, from above",
       wall_coefficient(nusselt_steady_cells(1)), high_enough * critical_free, steady_to,
       "sources"}};
  if (insulated(m))
    all.push_back({"heated within (Turcotte & Schubert, ch. 6)", "insulated below, high Ra_Q",
                   internal_heating_coefficient(), high_rayleigh_q, 1e99, nullptr, true});
  else
    all.push_back({"Moore 2008", "2-D, Ra 1e5 to 1e9", moore, 1e5, 1e9,
                   "sources, its H/2 for them left out"});
  all.push_back(
      {"Sotin & Labrosse 1999", "3-D box, Ra 1e5 to 1e7", sotin_labrosse, 1e5, 1e7, nullptr});
  return all;
}

/// A wall that grips is worth so much less: by the critical Rayleigh numbers (own scaling).
double grip(Slip slip) {
  return slip == Slip::Free ? 1 : std::cbrt(laws::critical_free / laws::critical_rigid);
}

std::string join(const std::vector<std::string>& words) {
  std::string text;
  for (const std::string& w : words) text += (text.empty() ? "" : ", ") + w;
  return text;
}

/// What no law of this list was made for.
std::vector<std::string> unlike_all(const Model& m, const DerivedNumbers& n) {
  std::vector<std::string> found;
  if (m.shell.shape != Shape::Box) found.push_back("curved");
  if (m.reference.dissipation_number > 0) found.push_back("compressible");
  if (n.depth_contrast > uneven_depth) found.push_back("viscosity by depth");
  if (m.walls.outer.slip == Slip::None || m.walls.inner.slip == Slip::None)
    found.push_back("no-slip");
  return found;
}

class Predictor {
 public:
  Predictor(const Model& m, const Geometry& g, const AtRest& rest, const DerivedNumbers& n,
            double times_critical)
      : m_(m), g_(g), rest_(rest), n_(n), times_critical_(times_critical) {}
  Prediction run();

 private:
  void at_rest(const std::string& why, const char* range);
  void tell_regime();
  void add_mobile();
  void add_stagnant();
  void add_plane_stagnant();
  void add(LawResult, const std::vector<BalanceLaws>&);
  void span();
  void set_doubts();
  double effective_contrast() const;
  /// As the laws have it: of the walls' own drop, viscosity of the interior.
  double rayleigh_of_drop() const {
    return mobile_.interior_rayleigh * (mobile_.hot_wall - n_.t_outer);
  }
  std::string outside(const WallLaw&) const;
  std::string outside_stagnant(const LidRange&, double theta, double hot) const;

  const Model& m_;
  const Geometry& g_;
  const AtRest& rest_;
  const DerivedNumbers& n_;
  double times_critical_;
  Prediction p_;
  HeatBalance mobile_;  ///< by local stability, which tells how hot the interior is
  struct Tried {
    double nusselt;
    HeatBalance balance;
  };
  std::vector<Tried> tried_;
};

/// Is rock at rest nowhere hotter below than above?
bool nothing_drives(const AtRest& rest) {
  const auto& t = rest.temperature;
  const auto hotter_below = [](double below, double above) { return below > above + 1e-9; };
  return std::adjacent_find(t.begin(), t.end(), hotter_below) == t.end();
}

void Predictor::at_rest(const std::string& why, const char* range) {
  p_.regime = Regime::NotConvecting;
  p_.why = why;
  const double unit = n_.conductive_flow * (rest_.t_inner - rest_.t_outer);
  if (std::abs(unit) < 1e-12) return;
  p_.low = p_.high = rest_.heat_flow_outer / unit;
  p_.balance.hot_wall = rest_.t_inner;
  p_.balance.interior = rest_.mean;
  p_.laws.push_back({"conduction", range, p_.low, p_.high, ""});
}

/// Between the outer wall and the hottest rock; no more than the slope at the interior makes of it,
/// which is what an Arrhenius law's lid feels.
double Predictor::effective_contrast() const {
  const ViscosityLaw& law = m_.creep();
  const double whole = law({n_.t_outer, 0.5}) / law({mobile_.hot_wall, 0.5});
  return std::min(whole, std::exp(std::min(mobile_.theta, 300.0)));
}

void Predictor::tell_regime() {
  const double contrast = effective_contrast() * (1 - 1e-9);  // as given, to round-off
  const char* source = "(Solomatov 1995: mobile to 1e2, stagnant above 1e4)";
  if (m_.yielding) {
    p_.regime = Regime::Undecided;
    p_.why = "the lid may yield; no published law tells from a yield stress which regime follows";
    return;
  }
  const laws::Lid lid = laws::lid_by_contrast(contrast);
  p_.regime = lid == laws::Lid::Mobile     ? Regime::Mobile
              : lid == laws::Lid::Sluggish ? Regime::Sluggish
                                           : Regime::Stagnant;
  p_.why = fmt::format("viscosity contrast {} acts on the lid {}", short_number(contrast), source);
  if (m_.walls.outer.slip == Slip::Free || p_.regime == Regime::Stagnant) return;
  // A wall that grips makes a lid of rock that would move along with a free one.
  p_.why = fmt::format("held by its no-slip wall; rock below moves as under a {}: {}",
                       word(p_.regime), p_.why);
  p_.regime = Regime::Undecided;
  p_.doubts.push_back(
      mobile_.theta > 1
          ? "a no-slip surface: the spread runs from a lid that holds to one that moves"
          : "a no-slip surface: laws of a free one, weakened as its critical Rayleigh number is "
            "higher (own scaling)");
}

std::string Predictor::outside(const WallLaw& law) const {
  std::vector<std::string> found;
  const double ra = law.within ? mobile_.interior_rayleigh * n_.mean_source : rayleigh_of_drop();
  if (ra < law.least) found.push_back(law.within ? "Ra_Q low" : "Ra low");
  if (ra > law.most) found.push_back("Ra high");
  if (law.sources && n_.source != 0) found.push_back(law.sources);
  if (mobile_.theta > std::log(10.0)) found.push_back("variable viscosity");
  return join(found);
}

void Predictor::add(LawResult law, const std::vector<BalanceLaws>& choices) {
  law.low = std::numeric_limits<double>::infinity();
  for (const BalanceLaws& choice : choices) {
    const HeatBalance b = heat_balance(m_, g_, choice);
    const double nusselt = std::max(1.0, b.nusselt_outer);
    law.low = std::min(law.low, nusselt);
    law.high = std::max(law.high, nusselt);
    tried_.push_back({nusselt, b});
  }
  p_.laws.push_back(std::move(law));
}

void Predictor::add_mobile() {
  for (const WallLaw& law : wall_laws(m_, rayleigh_of_drop())) {
    std::vector<BalanceLaws> choices;
    for (const LayerViscosity viscosity : {LayerViscosity::Interior, LayerViscosity::Film})
      choices.push_back({false, 0, law.coefficient * grip(m_.walls.outer.slip),
                         law.coefficient * grip(m_.walls.inner.slip), viscosity});
    add({law.name, law.range, 0, 0, outside(law)}, choices);
  }
}

std::string Predictor::outside_stagnant(const LidRange& range, double theta, double hot) const {
  const double contrast = std::exp(theta), above = 1 + 1e-9, below = 1 - 1e-9;  // to round-off
  std::vector<std::string> found;
  const auto tell = [&](bool when, const char* what, double bound) {
    if (when) found.push_back(what + short_number(bound));
  };
  tell(theta < range.least_theta * below, "theta below ", range.least_theta);
  tell(theta > range.most_theta * above, "theta above ", range.most_theta);
  tell(contrast < range.least_contrast * below, "contrast below ", range.least_contrast);
  tell(contrast > range.most_contrast * above, "contrast above ", range.most_contrast);
  tell(hot > range.most_hot * above, "Ra_1 above ", range.most_hot);
  if (range.box && m_.shell.shape != Shape::Box) found.push_back("curved");
  if (m_.dislocation) found.push_back("dislocation creep");
  return join(found);
}

void Predictor::add_stagnant() {
  using namespace laws;
  const double quiet = wall_coefficient(nusselt_local_stability(1)) * grip(m_.walls.inner.slip);
  const double steady = wall_coefficient(nusselt_steady_cells(1)) * grip(m_.walls.inner.slip);
  const auto choices = [&](double low, double high) {
    return std::vector<BalanceLaws>{{true, low, 0, quiet, LayerViscosity::Interior},
                                    {true, high, 0, steady, LayerViscosity::Interior}};
  };
  const HeatBalance b = heat_balance(m_, g_, choices(solomatov_moresi, 0).front());
  const auto unlike = [&](const LidRange& range) { return outside_stagnant(range, b.theta, 0); };
  add({"drips (Solomatov & Moresi 2000)", "2-D, time-dependent, theta >= 8", 0, 0,
       unlike(of_solomatov_moresi)},
      choices(solomatov_moresi, solomatov_moresi));
  add({"drips (Davaille & Jaupart 1993)", "laboratory, contrast to 1e6", 0, 0,
       unlike(of_davaille_jaupart)},
      choices(davaille_jaupart - davaille_jaupart_spread,
              davaille_jaupart + davaille_jaupart_spread));
  add_plane_stagnant();
}

/// Laws of the whole layer, which no balance can carry over to other shells: taken there as they
/// stand, and said so.
void Predictor::add_plane_stagnant() {
  if (given_flux(m_) || n_.source != 0 || m_.reference.dissipation_number > 0) return;
  const double drop = n_.t_inner - n_.t_outer, theta = n_.frank_kamenetskii;
  if (!(theta > 1)) return;
  const auto rayleigh = [&](double t) { return m_.rayleigh * drop / m_.creep()({t, 0.5}); };
  const double inside = rayleigh(n_.t_outer + drop * laws::interior_deschamps_lin(theta));
  const double hot = rayleigh(n_.t_inner);
  const auto put = [&](const char* name, const char* range, double nusselt, const LidRange& lids) {
    nusselt = std::max(1.0, nusselt);
    p_.laws.push_back({name, range, nusselt, nusselt, outside_stagnant(lids, theta, hot)});
  };
  put("Moresi & Solomatov 1995", "unit box, steady, theta 8 to 30, Ra_1 to 1e9",
      laws::nusselt_moresi_solomatov(hot, theta), of_moresi_solomatov);
  put("Deschamps & Lin 2014", "3-D box, contrast 1e5 to 1e8",
      laws::nusselt_deschamps_lin(inside, theta), of_deschamps_lin);
}

void Predictor::span() {
  p_.low = std::numeric_limits<double>::infinity();
  p_.high = 0;
  for (const LawResult& law : p_.laws) {
    p_.low = std::min(p_.low, law.low);
    p_.high = std::max(p_.high, law.high);
  }
  p_.low = std::max(1.0, p_.low / margin);
  p_.high *= margin;
  if (times_critical_ < 3) p_.low = 1;
  // Whose interior is the least hot: under lids heated from below the others are hotter than runs.
  if (p_.regime == Regime::Stagnant) {
    p_.balance = tried_.front().balance;
    return;
  }
  const double middle = std::sqrt(p_.low * p_.high);
  const auto away = [&](const Tried& t) { return std::abs(std::log(t.nusselt / middle)); };
  p_.balance = std::min_element(tried_.begin(), tried_.end(), [&](const Tried& a, const Tried& b) {
                 return away(a) < away(b);
               })->balance;
}

void Predictor::set_doubts() {
  if (m_.dislocation)
    p_.doubts.push_back("dislocation creep: the laws are for viscosity that no stress changes");
  if (m_.yielding)
    p_.doubts.push_back(
        "the lid may yield: whether it moves no published law foretells; the spread runs from a "
        "lid "
        "that holds to one that moves");
  if (times_critical_ < high_enough)
    p_.doubts.push_back(
        fmt::format("Ra is {:.3g} times critical: power laws hold from about 10", times_critical_));
  if (n_.depth_contrast > uneven_depth)
    p_.doubts.push_back(fmt::format("viscosity varies {}-fold by depth: the laws take its mean",
                                    short_number(n_.depth_contrast)));
}

Prediction Predictor::run() {
  if (std::holds_alternative<FixedHeatFlux>(m_.walls.outer.thermal)) {
    p_.why = "the outer wall's heat flux is given: no law for that here";
    return p_;
  }
  if (nothing_drives(rest_)) {
    at_rest("conduction leaves rock nowhere hotter below: flow, if the start drives any, dies away",
            "rock at rest");
    return p_;
  }
  if (times_critical_ < 1 && !m_.nonlinear()) {
    at_rest(
        fmt::format("Ra is {:.3g} times critical: small disturbances die away", times_critical_),
        "below onset");
    return p_;
  }
  const double quiet = laws::wall_coefficient(laws::nusselt_local_stability(1));
  mobile_ = heat_balance(m_, g_,
                         {false, 0, quiet * grip(m_.walls.outer.slip),
                          quiet * grip(m_.walls.inner.slip), LayerViscosity::Interior});
  tell_regime();
  const bool either = p_.regime == Regime::Sluggish || p_.regime == Regime::Undecided;
  if (p_.regime == Regime::Mobile || either) add_mobile();
  if ((p_.regime == Regime::Stagnant || either) && mobile_.theta > 1) add_stagnant();
  p_.unlike = join(unlike_all(m_, n_));
  span();
  set_doubts();
  return p_;
}

}  // namespace

Prediction predict(const Model& m, const Geometry& g, const AtRest& rest, const DerivedNumbers& n,
                   double times_critical) {
  return Predictor(m, g, rest, n, times_critical).run();
}

}  // namespace lidwright
