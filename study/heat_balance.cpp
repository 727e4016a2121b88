#include "study/heat_balance.hpp"

#include <algorithm>
#include <cmath>
#include <limits>

#include "physics/laws.hpp"
#include "study/derived.hpp"

namespace lidwright {
namespace {

constexpr int panels = 48;  // of integrals over depth, by midpoints

template <class Function>
double integral(Function&& f, double from, double to) {
  const double width = (to - from) / panels;
  double sum = 0;
  for (int k = 0; k < panels; ++k) sum += f(from + (k + 0.5) * width);
  return sum * width;
}

/// x in (low, high) where the rising f changes sign; the end that is nearest when it does not.
template <class Function>
double root(Function&& f, double low, double high) {
  for (int k = 0; k < 60; ++k) {
    const double middle = (low + high) / 2;
    (f(middle) > 0 ? high : low) = middle;
  }
  return (low + high) / 2;
}

/// A model's shell at any depth, and the heat through its layers.
class Balance {
 public:
  Balance(const Model& m, const Geometry& g, const BalanceLaws& laws)
      : m_(m), g_(g), laws_(laws), rows_(g, m.reference) {
    outer_area_ = g.wall_area(g.radial_cells());
    power_ = std::log(g.wall_area(0) / outer_area_) / std::log(1 - 1 / g.outer_radius());
    t_outer_ = std::get<FixedTemperature>(m.walls.outer.thermal).value;
    mean_rise_ = std::log(adiabatic_rise(m, g, rows_));
    uncut_.lowest = 0;
    uncut_.highest = std::numeric_limits<double>::infinity();
    sum_sources();
  }
  HeatBalance solve();

 private:
  struct Lid {
    double depth, flow;  ///< of its base; through it
  };
  double area(double depth) const {
    return outer_area_ * std::pow(1 - depth / g_.outer_radius(), power_);
  }
  void sum_sources();
  double source_above(double depth) const;
  double source(double from, double to) const { return source_above(to) - source_above(from); }
  double at(const RadialProfile& p, double depth) const { return p(depth, g_.outer_radius()); }
  double rayleigh(double depth) const;
  double adiabat(double t, double depth) const;
  double interior_viscosity(double t) const;
  double film_viscosity(double t, double wall, double depth) const;
  /// Also where a cut-off holds: what cold rock would be stiffer still makes no difference to a
  /// lid.
  double scale(double t) const { return 1 / std::abs(uncut_.log_slope({t, 0.5})); }
  double layer_flow(double a, double viscosity, double drop, double depth) const;
  double inner_flow(double t) const;
  double hot_wall(double t) const;
  Lid lid(double t) const;
  double drop_across_lid(const Lid&) const;
  double outer_flow(double t) const;
  double hottest() const;
  double capacity() const;

  const Model& m_;
  const Geometry& g_;
  BalanceLaws laws_;
  MantleRows rows_;
  ViscosityLaw uncut_ = m_.creep();
  double outer_area_, power_, t_outer_, mean_rise_;
  std::vector<double> sources_;  ///< above the depth of each place of a uniform list from 0 to 1
};

void Balance::sum_sources() {
  constexpr int places = 400;
  sources_.push_back(0);
  for (int k = 0; k < places; ++k) {
    const double z = (k + 0.5) / places;
    sources_.push_back(sources_.back() + m_.heat(z) * area(z) / places);
  }
}

double Balance::source_above(double depth) const {
  const double place = std::clamp(depth, 0.0, 1.0) * static_cast<double>(sources_.size() - 1);
  const auto k = std::min(static_cast<std::size_t>(place), sources_.size() - 2);
  return std::lerp(sources_[k], sources_[k + 1], place - static_cast<double>(k));
}

/// Of unit viscosity with the properties at a depth: rho alpha g (rho cp)/k.
double Balance::rayleigh(double depth) const {
  const ReferenceProfiles& r = m_.reference;
  const double density = at(r.density, depth);
  return m_.rayleigh * at(r.expansivity, depth) * at(r.gravity, depth) * density * density *
         at(r.heat_capacity, depth) / at(r.conductivity, depth);
}

/// Temperature at a depth of the adiabat that would have t at the surface; its rise is taken as
/// exponential in depth.
double Balance::adiabat(double t, double depth) const {
  const double surface = m_.reference.surface_temperature;
  return (t + surface) * std::exp(mean_rise_ * depth) - surface;
}

/// Geometric mean over depth, along the adiabat.
double Balance::interior_viscosity(double t) const {
  return std::exp(integral(
      [&](double z) {
        return std::log(m_.creep()({adiabat(t, z), z}));
      },
      0, 1));
}

/// With the temperature of the middle of a layer, at the interior's mean of what depends on depth.
double Balance::film_viscosity(double t, double wall, double depth) const {
  const ViscosityLaw& law = m_.creep();
  const double inside = adiabat(t, depth);
  return interior_viscosity(t) * law({(inside + wall) / 2, depth}) / law({inside, depth});
}

double Balance::layer_flow(double a, double viscosity, double drop, double depth) const {
  if (drop <= 0) return area(depth) * at(m_.reference.conductivity, depth) * drop;  // stable
  return area(depth) * at(m_.reference.conductivity, depth) * a *
         std::cbrt(rayleigh(depth) / viscosity) * std::pow(drop, 4.0 / 3);
}

double Balance::inner_flow(double t) const {
  if (const auto* flux = std::get_if<FixedHeatFlux>(&m_.walls.inner.thermal))
    return area(1) * flux->outward;
  const double wall = std::get<FixedTemperature>(m_.walls.inner.thermal).value;
  return layer_flow(laws_.inner, film_viscosity(t, wall, 1), wall - adiabat(t, 1), 1);
}

double Balance::hot_wall(double t) const {
  if (const auto* fixed = std::get_if<FixedTemperature>(&m_.walls.inner.thermal))
    return fixed->value;
  const double flux = inner_flow(t) / area(1);
  if (flux <= 0) return adiabat(t, 1);
  const double conductance = at(m_.reference.conductivity, 1) * laws_.inner *
                             std::cbrt(rayleigh(1) / interior_viscosity(t));
  return adiabat(t, 1) + std::pow(flux / conductance, 0.75);
}

double Balance::drop_across_lid(const Lid& lid) const {
  return integral(
      [&](double z) {
        return (lid.flow + source(z, lid.depth)) / (at(m_.reference.conductivity, z) * area(z));
      },
      0, lid.depth);
}

/// The lid that conducts what drips give to its base.
Balance::Lid Balance::lid(double t) const {
  const double drop = t - laws::lid_base_drop * scale(t) - t_outer_;
  const double flux =
      laws::drip_flux(laws_.drips, rayleigh(0.5) / interior_viscosity(t), scale(t)) *
      at(m_.reference.conductivity, 0.5);
  if (drop <= 0) return {0, flux * area(0)};
  const auto with_base = [&](double depth) { return Lid{depth, flux * area(depth)}; };
  const double depth =
      root([&](double z) { return drop_across_lid(with_base(z)) - drop; }, 0, 0.98);
  return with_base(depth);
}

/// Heat out of the interior into the surface's layer, or into the lid and its sources.
double Balance::outer_flow(double t) const {
  if (laws_.stagnant) {
    const Lid l = lid(t);
    return l.flow + source(0, l.depth);
  }
  const double eta = laws_.viscosity == LayerViscosity::Film ? film_viscosity(t, t_outer_, 0)
                                                             : interior_viscosity(t);
  return layer_flow(laws_.outer, eta, t - t_outer_, 0);
}

/// No interior is hotter.
double Balance::hottest() const {
  const auto* fixed = std::get_if<FixedTemperature>(&m_.walls.inner.thermal);
  const double thick = std::max(0.0, inner_flow(t_outer_)) + std::max(0.0, source(0, 1));
  const double conducted = t_outer_ + 2 * thick / rows_.conductive_heat_flow;
  return fixed ? std::max(fixed->value, conducted) : conducted;
}

/// Heat that the shell takes up while the interior, on its adiabat, warms by 1 at the surface.
double Balance::capacity() const {
  const ReferenceProfiles& r = m_.reference;
  return integral(
      [&](double z) {
        return at(r.density, z) * at(r.heat_capacity, z) * std::exp(mean_rise_ * z) * area(z);
      },
      0, 1);
}

HeatBalance Balance::solve() {
  HeatBalance b;
  const double produced = source(0, 1);
  const double high =
      std::holds_alternative<FixedTemperature>(m_.walls.inner.thermal) && produced <= 0
          ? std::get<FixedTemperature>(m_.walls.inner.thermal).value
          : hottest();
  const auto excess = [&](double t) { return outer_flow(t) - inner_flow(t) - produced; };
  const double t = root(excess, t_outer_, high);
  b.interior = t;
  b.hot_wall = hot_wall(t);
  const double out = outer_flow(t), in = inner_flow(t);
  const double unit = rows_.conductive_heat_flow * (b.hot_wall - t_outer_);
  b.nusselt_outer = out / unit;
  b.interior_rayleigh = m_.rayleigh / interior_viscosity(t);
  b.theta = (b.hot_wall - t_outer_) / scale(t);
  const double k0 = at(m_.reference.conductivity, 0);
  if (laws_.stagnant) {
    const Lid l = lid(t);
    b.lid = l.depth;
    b.outer_layer = laws::lid_base_drop * scale(t) * area(l.depth) *
                    at(m_.reference.conductivity, l.depth) / l.flow;
  } else {
    b.outer_layer = (t - t_outer_) * k0 * area(0) / out;
  }
  if (in > 0)
    b.inner_layer = (b.hot_wall - adiabat(t, 1)) * at(m_.reference.conductivity, 1) * area(1) / in;
  const double step = 1e-3 * (t - t_outer_);
  const double slope = (excess(t + step) - excess(t - step)) / (2 * step);
  b.settling = capacity() / slope + b.lid * b.lid / 2;
  return b;
}

}  // namespace

HeatBalance heat_balance(const Model& m, const Geometry& g, const BalanceLaws& laws) {
  if (!std::holds_alternative<FixedTemperature>(m.walls.outer.thermal) || m.rayleigh <= 0)
    return {};
  return Balance(m, g, laws).solve();
}

}  // namespace lidwright
