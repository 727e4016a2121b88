#pragma once

#include "solver/settings.hpp"

/// Small models that tests of forecasts share.
namespace lidwright {

/// A unit box, heated from below, free-slip, isoviscous, Ra = 1e4.
inline Model box_heated_below() {
  Model m;
  m.shell = {Shape::Box, 0, 0, 1, Sides::Reflecting};
  m.grid = {32, 32, {}, {}};
  m.rayleigh = 1e4;
  return m;
}

}  // namespace lidwright
