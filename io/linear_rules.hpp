#pragma once

#include <string>

#include "solver/settings.hpp"

/// What the verbs that linearise the equations cannot take.
namespace lidwright {

enum class Linearised { SteadyState, Onset };

/// Throws InputError at `place` if the viscosity depends on the rate of strain.
void refuse_nonlinear(const Model&, Linearised, const std::string& place);

}  // namespace lidwright
