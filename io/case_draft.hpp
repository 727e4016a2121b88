#pragma once

#include <optional>
#include <string>
#include <vector>

#include "io/case_file.hpp"

/// A case as its file says it: a Case, and beside it what the file words otherwise than the
/// program.
namespace lidwright::case_text {

enum class Extent { FullCircle, Sector, PoleToPole, Hemisphere };

struct WallDraft {
  std::optional<double> temperature;
  std::optional<double> heat_flux;
  std::optional<bool> insulating;
  Slip flow = Slip::Free;
};

enum class Approximation { Boussinesq, ExtendedBoussinesq, AnelasticLiquid };

/// One depth of the tabulated profiles; a property is there at all depths or at none.
struct ReferenceLevel {
  double depth = 0;
  std::optional<double> density, expansivity, gravity, conductivity, heat_capacity;
};

struct ReferenceDraft {
  Approximation approximation = Approximation::Boussinesq;
  std::optional<double> surface_temperature;  ///< of [numbers]
  std::optional<double> gruneisen, density_rise;
  std::string table;  ///< path of a file that gives the levels
  std::vector<ReferenceLevel> levels;
};

/// A property that may be tabulated: its name, its number at a level, its profile.
struct TabulatedProperty {
  const char* name;
  std::optional<double> ReferenceLevel::*value;
  RadialProfile ReferenceProfiles::*profile;
};
const std::vector<TabulatedProperty>& tabulated_properties();
bool tabulated(const ReferenceDraft&, const TabulatedProperty&);

/// The factors of a creep's viscosity; a table that is there makes its factor.
struct ProductDraft {
  double constant = ViscosityLaw{}.constant;
  LayeredViscosity layered;
  bool has_exponential = false, has_arrhenius = false;
  ExponentialViscosity exponential;
  ArrheniusViscosity arrhenius;  ///< but for its offset
};

struct Draft {
  Case made;
  std::optional<double> radius_ratio;
  std::optional<Extent> extent;   ///< absent: the whole circle or from pole to pole
  double from = 0;                ///< degrees
  std::optional<double> opening;  ///< degrees
  double width = 1;
  WallDraft inner, outer;
  ProductDraft diffusion;
  std::optional<double> arrhenius_surface;  ///< surface_temperature of its Arrhenius factor
  std::optional<double> highest_viscosity;
  bool has_dislocation = false, has_yielding = false;
  DislocationCreep dislocation;  ///< but for its viscosity
  ProductDraft dislocation_viscosity;
  Yielding yielding;  ///< but for the next two
  std::optional<double> lithostatic, yield_ceiling;
  ReferenceDraft reference;
  Body body;
  bool si = false;         ///< [body]: values are in SI
  bool body_used = false;  ///< [body_used]: values are dimensionless, the body is kept beside them

  bool box() const { return made.model.shell.shape == Shape::Box; }
  bool axisymmetric() const { return made.model.shell.shape == Shape::AxisymmetricShell; }
  bool compressible() const { return reference.approximation != Approximation::Boussinesq; }
  bool anelastic() const { return reference.approximation == Approximation::AnelasticLiquid; }
  /// Is there no diffusion creep?
  bool dislocation_alone() const { return has_dislocation && dislocation.alone; }
  bool any_arrhenius() const {
    return diffusion.has_arrhenius || (has_dislocation && dislocation_viscosity.has_arrhenius);
  }
  /// Absolute, where T = 0, in units of the drop; 0 if neither the body nor any key says it.
  double absolute_surface() const;
  double dissipation() const;   ///< Di of a compressible mantle
  double density_rise() const;  ///< by gruneisen or density_rise, else 1
  Extent extent_or_default() const;
  /// The body by which numbers in the file are converted.
  std::optional<Body> units() const { return si ? std::optional(body) : std::nullopt; }
};

/// inner_radius in thicknesses, from inner over outer radius.
double inner_radius_of(double radius_ratio);

/// The case, its derived parts (shell, walls, Rayleigh number) filled in. The draft has passed all
/// checks.
Case assemble(Draft);
/// The reverse; `assemble` of it gives the same case to the last bit, provided the case was once
/// read. Always dimensionless.
Draft take_apart(const Case&);

}  // namespace lidwright::case_text
