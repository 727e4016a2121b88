#pragma once

#include <string>
#include <vector>

#include "io/canvas.hpp"
#include "io/curve_looks.hpp"

/// Symbols, patterned lines, grounds, and the key that names them.
namespace lidwright::plot {

void draw_line(Canvas&, const std::vector<Place>&, const Line&, Pattern);
void fill(Canvas&, const Frame&, const Colour&, double opacity);
/// A filled symbol, or the outline of one on white; `radius` as a dot's.
void draw_symbol(Canvas&, Symbol, Place, double radius, const Colour&);
/// A bar from one place to the other, with caps of that half width.
void draw_error_bar(Canvas&, Place, Place, const Line&, double cap);
/// A head of an arrow at a place, along (dx, dy).
void draw_arrow_head(Canvas&, Place, double dx, double dy, double size, const Colour&);

/// A line, a symbol on it or a ground, and its name.
struct KeyEntry {
  std::string name;  ///< markup
  Colour colour;
  double width = 2;  ///< of the line; 0: none
  Pattern pattern = Pattern::Solid;
  Symbol symbol = Symbol::None;
  double ground = 0;  ///< opacity of a filled patch instead; 0: none
};

/// The entries side by side, in as many rows as they need.
double key_height(Canvas&, const std::vector<KeyEntry>&, double width);
void draw_key(Canvas&, const std::vector<KeyEntry>&, const Frame&);

}  // namespace lidwright::plot
