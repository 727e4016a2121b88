#pragma once

#include <cairo.h>

#include <memory>
#include <string>
#include <vector>

#include "io/colour_map.hpp"
#include "io/sheet.hpp"

/// A page to draw on. Lengths are design units, y counts downwards; any file shows the same
/// drawing.
namespace lidwright::plot {

struct Place {
  double x, y;
};

struct Frame {
  double left, top, width, height;
  double right() const { return left + width; }
  double bottom() const { return top + height; }
  Place middle() const { return {left + width / 2, top + height / 2}; }
};

enum class Weight { Normal, Bold };

struct TextStyle {
  double size = 14;
  Colour colour{0.13, 0.15, 0.19};
  Weight weight = Weight::Normal;
  double widest = 0;  ///< what does not fit is left out with an ellipsis; 0: no limit
};

/// Which point of the text stands at the place given: 0 left or top, 1 right or bottom.
struct Anchor {
  double across = 0, down = 0;
};

struct Line {
  Colour colour;
  double width = 1;
  double opacity = 1;
};

class Canvas {
 public:
  /// Throws std::runtime_error when there is no memory or no font.
  explicit Canvas(const Sheet&);
  /// A PNG of that many pixels, one a unit.
  Canvas(int width, int height);

  cairo_t* context() { return context_.get(); }
  Frame page() const { return {0, 0, sheet_.width, sheet_.height}; }
  /// Resolution at which an image put on the page is worth having.
  double pixels_per_unit() const { return sheet_.pixels_per_unit; }

  void text(const std::string& markup, Place, Anchor, const TextStyle&);
  /// In the middle of a light patch, to be read over a field.
  void text_on_patch(const std::string& markup, Place middle, const TextStyle&);
  /// Read from bottom to top; the place is its middle.
  void upright_text(const std::string& markup, Place, const TextStyle&);
  double text_width(const std::string& markup, const TextStyle&);

  void line(const std::vector<Place>&, const Line&);
  void frame(const Frame&, const Line&);
  void dot(Place, double radius, Colour);
  /// Draws the current path.
  void stroke(const Line&);
  void clip_to(const Frame&);

  /// Ends the page: the bytes of its file, the same for the same drawing. Throws std::runtime_error
  /// when Cairo failed anywhere.
  std::string bytes();

 private:
  std::string png();

  Sheet sheet_;
  std::unique_ptr<std::string> written_;  ///< what a vector surface has written; stays in place
  std::unique_ptr<cairo_surface_t, void (*)(cairo_surface_t*)> surface_;
  std::unique_ptr<cairo_t, void (*)(cairo_t*)> context_;
};

/// What stands in markup as the plain text given.
std::string as_markup(const std::string& plain);

/// Keeps the context's state (clip, transformation) and restores it at the end.
class Saved {
 public:
  explicit Saved(Canvas& canvas) : context_(canvas.context()) { cairo_save(context_); }
  Saved(const Saved&) = delete;
  Saved& operator=(const Saved&) = delete;
  ~Saved() { cairo_restore(context_); }

 private:
  cairo_t* context_;
};

}  // namespace lidwright::plot
