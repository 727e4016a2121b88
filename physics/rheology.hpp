#pragma once

#include <algorithm>
#include <cmath>
#include <limits>
#include <optional>
#include <vector>

/// Viscosity laws, dimensionless: a law is a product of the factors that are present, cut off below
/// and above. Temperature T in units of the temperature drop above the surface temperature, depth
/// in shell thicknesses.
namespace lidwright {

/// Where and in what state a law is asked.
struct Point {
  double temperature;
  double depth;
};

/// Exponential in temperature and depth (Frank-Kamenetskii 1969):
///     eta = exp(-ln(thermal_contrast) (T - unity_at) + ln(depth_contrast) depth).
struct ExponentialViscosity {
  double thermal_contrast = 1;  ///< eta at T = 0 over eta at T = 1, > 0
  double depth_contrast = 1;    ///< eta at depth 1 over eta at depth 0, > 0
  double unity_at = 0;          ///< T at which the thermal factor is 1
  double operator()(const Point& p) const {
    return std::exp(-std::log(thermal_contrast) * (p.temperature - unity_at) +
                    std::log(depth_contrast) * p.depth);
  }
  /// d(ln eta)/dT.
  double log_slope(const Point&) const { return -std::log(thermal_contrast); }
};

/// Arrhenius: eta = exp[(E + V depth)/(T + T0) - (E + V depth_1)/(T_1 + T0)].
/// In SI terms E = activation energy/(R DeltaT), V = rho g d activation volume/(R DeltaT),
/// T0 = surface temperature/DeltaT; physics/scales.hpp converts.
struct ArrheniusViscosity {
  double energy = 0;          ///< E >= 0
  double volume = 0;          ///< V >= 0
  double offset = 1;          ///< T0 > 0
  double unity_at = 1;        ///< T_1, temperature at which eta = 1
  double unity_at_depth = 0;  ///< depth_1
  double operator()(const Point& p) const {
    return std::exp((energy + volume * p.depth) / (p.temperature + offset) -
                    (energy + volume * unity_at_depth) / (unity_at + offset));
  }
  /// d(ln eta)/dT.
  double log_slope(const Point& p) const {
    const double absolute = p.temperature + offset;
    return -(energy + volume * p.depth) / (absolute * absolute);
  }
};

/// A layer reaches from its `below` down to the next layer's (the last one to the inner wall);
/// above the first, the factor is 1. Sorted by `below`.
struct ViscosityLayer {
  double below = 0;   ///< depth of the layer's top, in [0, 1)
  double factor = 1;  ///< > 0
};

struct LayeredViscosity {
  std::vector<ViscosityLayer> layers;
  double operator()(const Point& p) const {
    double factor = 1;
    for (const ViscosityLayer& layer : layers)
      if (p.depth >= layer.below) factor = layer.factor;
    return factor;
  }
};

/// The product of what is present, with cut-offs applied last.
struct ViscosityLaw {
  double constant = 1;  ///< > 0
  std::optional<ExponentialViscosity> exponential;
  std::optional<ArrheniusViscosity> arrhenius;
  LayeredViscosity layered;
  double lowest = 0;
  double highest = std::numeric_limits<double>::infinity();

  double operator()(const Point& p) const { return std::clamp(without_cuts(p), lowest, highest); }
  /// d(ln eta)/dT; 0 where a cut-off holds.
  double log_slope(const Point& p) const {
    const double eta = without_cuts(p);
    if (eta <= lowest || eta >= highest) return 0;
    return (exponential ? exponential->log_slope(p) : 0) +
           (arrhenius ? arrhenius->log_slope(p) : 0);
  }
  double without_cuts(const Point& p) const {
    double eta = constant * layered(p);
    if (exponential) eta *= (*exponential)(p);
    if (arrhenius) eta *= (*arrhenius)(p);
    return eta;
  }
};

/// Dislocation creep, a power law of the stress (second invariant tau of its deviator):
///     e_II = tau / (2 A) (tau / tau_ref)^(n - 1),   A the viscosity at the reference stress.
/// Its rate adds to that of diffusion creep, or it creeps alone.
struct DislocationCreep {
  ViscosityLaw viscosity;       ///< A; its cut-offs are not used
  double exponent = 3.5;        ///< n >= 1
  double reference_stress = 1;  ///< tau_ref > 0, eta kappa/d^2
  bool alone = false;           ///< no diffusion creep beside it
};

/// How a rock that may yield joins creep and plastic flow, eta_p = floor + tau_y / (2 e_II):
/// the smaller viscosity, or 2 / (1/eta_creep + 1/eta_p) (Tosi et al. 2015, Geochem. Geophys.
/// Geosyst. 16, 2175, whose yield stress is tau_y / sqrt 2 as they divide it by sqrt(e : e)).
enum class YieldingLaw { Minimum, HarmonicMean };

/// Plastic yielding at tau_y = min(cohesion + friction * lithostatic pressure, ceiling), stresses
/// in eta kappa/d^2.
struct Yielding {
  YieldingLaw law = YieldingLaw::Minimum;
  double cohesion = 0;     ///< >= 0
  double friction = 0;     ///< coefficient, >= 0
  double lithostatic = 0;  ///< pressure at depth 1 were density and gravity uniform, >= 0:
                           ///< rho g d^3/(eta kappa) = Ra/(alpha DeltaT)
  double ceiling = std::numeric_limits<double>::infinity();  ///< > 0
  double floor = 0;  ///< viscosity of fast plastic flow, >= 0

  /// tau_y at a lithostatic pressure in eta kappa/d^2.
  double stress(double pressure) const { return std::min(cohesion + friction * pressure, ceiling); }
};

}  // namespace lidwright
