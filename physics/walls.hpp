#pragma once

#include <variant>

/// Conditions at the inner (lower) and outer (upper) wall, each a value whose member states the
/// sign.
namespace lidwright {

struct FixedTemperature {
  double value = 0;  ///< in units of the temperature drop, above the surface temperature
};
/// Heat flux along +r: at the outer wall > 0 leaves the shell, at the inner wall > 0 enters it. 0
/// insulates.
struct FixedHeatFlux {
  double outward = 0;  ///< in units of k DeltaT / d
};
using ThermalWall = std::variant<FixedTemperature, FixedHeatFlux>;

enum class Slip { Free, None };

struct Wall {
  ThermalWall thermal = FixedTemperature{};
  Slip slip = Slip::Free;
};

struct Walls {
  Wall inner{FixedTemperature{1}, Slip::Free};
  Wall outer{FixedTemperature{0}, Slip::Free};
};

}  // namespace lidwright
