#pragma once

#include <algorithm>
#include <array>
#include <cmath>
#include <string>
#include <vector>

#include "io/colour_map.hpp"

/// Colours as people see them who lack one kind of cone, or in grey.
namespace lidwright {

using SightMatrix = std::array<std::array<double, 3>, 3>;

struct Sight {
  std::string name;
  SightMatrix of_linear;  ///< of linear red, green and blue
};

/// G. M. Machado, M. M. Oliveira & L. A. F. Fernandes 2009, IEEE Trans. Vis. Comput. Graph. 15,
/// 1291, severity 1 (from memory; that rows sum to 1, so that white stays white, is tested). Grey:
/// luminance alone (ITU-R BT.709).
inline std::vector<Sight> all_sights() {
  constexpr std::array<double, 3> luminance{0.2126, 0.7152, 0.0722};
  return {{"full", {{{1, 0, 0}, {0, 1, 0}, {0, 0, 1}}}},
          {"protanopia",
           {{{0.152286, 1.052583, -0.204868},
             {0.114503, 0.786281, 0.099216},
             {-0.003882, -0.048116, 1.051998}}}},
          {"deuteranopia",
           {{{0.367322, 0.860646, -0.227968},
             {0.280085, 0.672501, 0.047413},
             {-0.011820, 0.042940, 0.968881}}}},
          {"tritanopia",
           {{{1.255528, -0.076749, -0.178779},
             {-0.078411, 0.930809, 0.147602},
             {0.004733, 0.691367, 0.303900}}}},
          {"grey", {{luminance, luminance, luminance}}}};
}

/// The transfer curve of sRGB (IEC 61966-2-1) and its inverse.
inline double decoded(double x) {
  return x <= 0.04045 ? x / 12.92 : std::pow((x + 0.055) / 1.055, 2.4);
}
inline double encoded(double x) {
  return x <= 0.0031308 ? 12.92 * x : 1.055 * std::pow(x, 1 / 2.4) - 0.055;
}

inline OkLab seen(const Sight& sight, const Colour& c) {
  const std::array<double, 3> linear{decoded(c.red), decoded(c.green), decoded(c.blue)};
  std::array<double, 3> out{};
  for (std::size_t k = 0; k < 3; ++k) {
    const auto& row = sight.of_linear[k];
    const double sum = row[0] * linear[0] + row[1] * linear[1] + row[2] * linear[2];
    out[k] = encoded(std::clamp(sum, 0.0, 1.0));
  }
  return to_oklab({out[0], out[1], out[2]});
}

}  // namespace lidwright
