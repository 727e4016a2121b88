#pragma once

#include <vector>

/// Internal heating per volume, in units of k DeltaT / d^2.
namespace lidwright {

/// A layer reaches from its `below` down to the next layer's (the last one to the inner wall).
struct HeatLayer {
  double below = 0;   ///< depth of the layer's top, in [0, 1)
  double source = 0;  ///< replaces the uniform source there
};

struct HeatSources {
  double uniform = 0;
  std::vector<HeatLayer> layers;  ///< sorted by `below`
  double operator()(double depth) const {
    double source = uniform;
    for (const HeatLayer& layer : layers)
      if (depth >= layer.below) source = layer.source;
    return source;
  }
};

}  // namespace lidwright
