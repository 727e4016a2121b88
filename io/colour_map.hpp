#pragma once

#include <array>

/// The colours of a scalar field, made for this program: from dark (low) to light (high). Computed
/// in OKLab (B. Ottosson 2020, A perceptual color space for image processing,
/// bottosson.github.io/posts/oklab): lightness rises all the way, so the map reads the same in grey
/// and to colour-blind people, and equal steps of the value are equal steps of perceived colour.
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

/// Warm, of temperatures: a dark blue-green over mauve and coral to yellow. Cool, of what moves and
/// resists, so that nobody takes one field for the other: a dark violet over blue to pale green.
enum class ColourMap { Warm, Cool };

/// The map at `share` of the range, clamped to [0, 1].
Colour colour_at(double share, ColourMap = ColourMap::Warm);

}  // namespace lidwright
