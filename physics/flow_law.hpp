#pragma once

#include <limits>

#include "physics/rheology.hpp"

/// The viscosity that a rate of strain meets: creep mechanisms whose rates add, plastic yielding,
/// cut-offs last.
namespace lidwright {

/// A flow law where temperature and pressure are known, so that only the rate of strain is left.
/// Stress never falls as the rate rises: the dissipation potential is convex.
struct LocalFlowLaw {
  static constexpr double none = std::numeric_limits<double>::infinity();

  double diffusion = 1;        ///< viscosity of diffusion creep, > 0; `none`: no such creep
  double dislocation = none;   ///< A tau_ref^(n - 1), so that e_II = tau^n / (2 this); > 0
  double exponent = 1;         ///< n >= 1 of dislocation creep
  double yield_stress = none;  ///< tau_y >= 0
  YieldingLaw yielding = YieldingLaw::Minimum;
  double floor = 0;  ///< viscosity of fast plastic flow, >= 0
  double lowest = 0;
  double highest = none;

  struct Response {
    double viscosity;  ///< eta = tau / (2 e_II)
    double slope;      ///< d ln eta / d ln e_II, in [-1, 0]
    bool yields;       ///< is plastic flow easier than creep?
  };
  /// At e_II >= 0. Where only a power law acts, `highest` has to bound the viscosity at rest.
  Response operator()(double rate) const;

  /// tau = 2 eta e_II of creep alone.
  double creep_stress(double rate) const;

 private:
  /// What diffusion creep carries of the rate at which both mechanisms creep together, and the
  /// stress of both over that of dislocation creep alone.
  struct Shares {
    double diffusion, stress;
  };
  Shares shares(double by_diffusion, double by_dislocation) const;
  Response creep(double rate) const;
  Response with_yielding(const Response& creep, double rate) const;
};

/// Of creep at T and depth, and of yielding at the stress given.
LocalFlowLaw local_flow_law(const ViscosityLaw& diffusion, const DislocationCreep*, const Yielding*,
                            const Point&, double yield_stress);

}  // namespace lidwright
