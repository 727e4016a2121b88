#pragma once

#include <array>

/// The colours of a scalar field, made for this program: from a dark blue-green (low) over mauve
/// and coral to yellow (high). Computed in OKLab (B. Ottosson 2020, A perceptual color space
/// for image processing, bottosson.github.io/posts/oklab): lightness rises all the way, so the map
/// reads the same in grey and to colour-blind people, and equal steps of the value are equal steps
/// of perceived colour.
namespace lidwright {

/// Lightness in [0, 1], green-red, blue-yellow.
struct OkLab {
  double lightness, a, b;
};

/// sRGB, each in [0, 1].
struct Colour {
  double red, green, blue;
};

/// Components outside [0, 1] are colours that a screen cannot show.
Colour to_srgb(const OkLab&);
OkLab to_oklab(const Colour&);
double distance(const OkLab&, const OkLab&);

/// The map at `share` of the range, clamped to [0, 1].
Colour colour_at(double share);

}  // namespace lidwright
