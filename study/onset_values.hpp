#pragma once

#include <string>
#include <string_view>

#include "study/measured.hpp"

/// Critical Rayleigh numbers as quantities of a benchmark, by study/onset_curve.hpp.
namespace lidwright {

inline constexpr const char* critical_name = "rayleigh_critical";
/// Before the number of the mode.
inline constexpr std::string_view mode_prefix = "rayleigh_mode_";

/// The wanted ones. The Rayleigh number and the lateral cells of the problem have no effect.
/// Throws SolveError and Stopped.
Measured measured_onset(const Problem&, const std::vector<std::string>& wanted, const Watch&);

/// Number of the mode that "rayleigh_mode_12" names; 0 for any other text.
int mode_named(const std::string& quantity);

}  // namespace lidwright
