#pragma once

#include <cmath>
#include <limits>
#include <optional>
#include <string_view>

#include "physics/scales.hpp"

/// What a number in a case file measures: its unit without and with a [body], and the way between
/// the two.
namespace lidwright::case_text {

enum class Quantity {
  Number,  ///< the same number in both
  Length,
  Temperature,  ///< above the surface temperature, or absolute in K
  TemperatureDifference,
  HeatFlux,
  HeatSource,
  Time,
  TemperatureRate,
  Viscosity,
  Stress,
  ActivationEnergy,
  ActivationVolume,
  Density,  ///< this and the following: 1, or with a body over the body's value
  Expansivity,
  Gravity,
  Conductivity,
  HeatCapacity,
  Kilometres,  ///< of a body: km in the file, m in the program
};

struct Units {
  std::string_view dimensionless, si;
};
Units units_of(Quantity);

/// stored = (written * unit - zero)/scale.
struct Conversion {
  double unit = 1, zero = 0, scale = 1;
  double stored(double written) const { return (written * unit - zero) / scale; }
  /// The number whose `stored` is exactly the one given, if there is one, else the nearest.
  double written(double stored) const;
};

/// With a body: from the file's SI units to dimensionless; without: as it stands.
Conversion conversion(Quantity, const std::optional<Body>&);

/// x near `guess` with f(x) == y to the last bit; `guess` if there is none. For f monotone and
/// smooth.
template <class F>
double exact_inverse(const F& f, double y, double guess) {
  const double infinity = std::numeric_limits<double>::infinity();
  double above = guess, below = guess;
  for (int k = 0; k < 16; ++k) {
    if (f(above) == y) return above;
    if (f(below) == y) return below;
    above = std::nextafter(above, infinity);
    below = std::nextafter(below, -infinity);
  }
  return guess;
}

}  // namespace lidwright::case_text
