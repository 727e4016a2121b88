#include "io/canvas.hpp"

#include <fmt/format.h>
#include <pango/pangocairo.h>

#include <new>
#include <stdexcept>

namespace lidwright::plot {
namespace {

using Layout = std::unique_ptr<PangoLayout, void (*)(gpointer)>;

void check(cairo_status_t status) {
  if (status != CAIRO_STATUS_SUCCESS)
    throw std::runtime_error(
        fmt::format("cannot draw a picture: {}; run without pictures (output.pictures = "
                    "false)",
                    cairo_status_to_string(status)));
}

void set_source(cairo_t* cr, const Colour& c, double opacity = 1) {
  cairo_set_source_rgba(cr, c.red, c.green, c.blue, opacity);
}

void set_font(PangoLayout* layout, const TextStyle& style) {
  const std::unique_ptr<PangoFontDescription, void (*)(PangoFontDescription*)> font(
      pango_font_description_from_string("DejaVu Sans, Sans"), pango_font_description_free);
  pango_font_description_set_absolute_size(font.get(), style.size * PANGO_SCALE);
  pango_font_description_set_weight(
      font.get(), style.weight == Weight::Bold ? PANGO_WEIGHT_BOLD : PANGO_WEIGHT_NORMAL);
  pango_layout_set_font_description(layout, font.get());
}

/// Pango does not survive a system without any font.
void require_font(cairo_t* cr) {
  const Layout layout(pango_cairo_create_layout(cr), g_object_unref);
  set_font(layout.get(), TextStyle{});
  PangoContext* context = pango_layout_get_context(layout.get());
  PangoFont* font =
      pango_context_load_font(context, pango_layout_get_font_description(layout.get()));
  if (!font)
    throw std::runtime_error(
        "cannot label a picture: no font is installed; install one (on Debian the package "
        "fonts-dejavu-core), or run without pictures (output.pictures = false)");
  g_object_unref(font);
}

Layout laid_out(cairo_t* cr, const std::string& markup, const TextStyle& style) {
  Layout layout(pango_cairo_create_layout(cr), g_object_unref);
  set_font(layout.get(), style);
  pango_layout_set_markup(layout.get(), markup.c_str(), static_cast<int>(markup.size()));
  if (style.widest > 0) {
    pango_layout_set_width(layout.get(), static_cast<int>(style.widest * PANGO_SCALE));
    pango_layout_set_ellipsize(layout.get(), PANGO_ELLIPSIZE_END);
  }
  return layout;
}

struct Size {
  double width, height;
};

Size size_of(PangoLayout* layout) {
  PangoRectangle box;
  pango_layout_get_extents(layout, nullptr, &box);
  return {static_cast<double>(box.width) / PANGO_SCALE,
          static_cast<double>(box.height) / PANGO_SCALE};
}

void show(cairo_t* cr, PangoLayout* layout, Place p, Anchor anchor, const Colour& colour) {
  const Size size = size_of(layout);
  cairo_move_to(cr, p.x - anchor.across * size.width, p.y - anchor.down * size.height);
  set_source(cr, colour);
  pango_cairo_show_layout(cr, layout);
}

cairo_status_t append(void* text, const unsigned char* bytes, unsigned int size) {
  try {
    static_cast<std::string*>(text)->append(reinterpret_cast<const char*>(bytes), size);
  } catch (const std::bad_alloc&) {
    return CAIRO_STATUS_NO_MEMORY;
  }
  return CAIRO_STATUS_SUCCESS;
}

}  // namespace

Canvas::Canvas(int width, int height)
    : width_(width),
      height_(height),
      surface_(cairo_image_surface_create(CAIRO_FORMAT_RGB24, width, height),
               cairo_surface_destroy),
      context_(cairo_create(surface_.get()), cairo_destroy) {
  check(cairo_status(context()));
  require_font(context());
  set_source(context(), {1, 1, 1});
  cairo_paint(context());
}

void Canvas::text(const std::string& markup, Place p, Anchor anchor, const TextStyle& style) {
  const Layout layout = laid_out(context(), markup, style);
  show(context(), layout.get(), p, anchor, style.colour);
}

void Canvas::upright_text(const std::string& markup, Place p, const TextStyle& style) {
  const Saved saved(*this);
  cairo_translate(context(), p.x, p.y);
  cairo_rotate(context(), -1.5707963267948966);
  text(markup, {0, 0}, {0.5, 0.5}, style);
}

double Canvas::text_width(const std::string& markup, const TextStyle& style) {
  return size_of(laid_out(context(), markup, style).get()).width;
}

void Canvas::line(const std::vector<Place>& places, const Line& style) {
  cairo_new_path(context());  // a text leaves its place behind
  for (const Place& p : places) cairo_line_to(context(), p.x, p.y);
  stroke(style);
}

void Canvas::frame(const Frame& f, const Line& style) {
  cairo_new_path(context());
  cairo_rectangle(context(), f.left, f.top, f.width, f.height);
  stroke(style);
}

void Canvas::dot(Place p, double radius, Colour colour) {
  cairo_new_path(context());
  cairo_arc(context(), p.x, p.y, radius, 0, 6.2831853071795864);
  set_source(context(), colour, 1);
  cairo_fill(context());
}

void Canvas::stroke(const Line& style) {
  set_source(context(), style.colour, style.opacity);
  cairo_set_line_width(context(), style.width);
  cairo_set_line_join(context(), CAIRO_LINE_JOIN_ROUND);
  cairo_stroke(context());
}

void Canvas::clip_to(const Frame& f) {
  cairo_rectangle(context(), f.left, f.top, f.width, f.height);
  cairo_clip(context());
}

std::string Canvas::png() {
  std::string bytes;
  check(cairo_status(context()));
  cairo_surface_flush(surface_.get());
  check(cairo_surface_write_to_png_stream(surface_.get(), append, &bytes));
  return bytes;
}

std::string as_markup(const std::string& plain) {
  const std::unique_ptr<gchar, void (*)(gpointer)> escaped(
      g_markup_escape_text(plain.c_str(), static_cast<gssize>(plain.size())), g_free);
  return escaped.get();
}

}  // namespace lidwright::plot
