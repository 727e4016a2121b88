#include "io/canvas.hpp"

#include <cairo-pdf.h>
#include <cairo-svg.h>
#include <fmt/format.h>
#include <pango/pangocairo.h>

#include <cmath>
#include <cstdint>
#include <functional>
#include <map>
#include <new>
#include <stdexcept>
#include <string_view>

#include "io/plain_text.hpp"
#include "io/seal.hpp"

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

/// Pango (1.50) makes <sup> and <sub> too large on a scaled page: their size and place are said
/// here.
std::string with_plain_scripts(std::string markup, double size) {
  const auto script = [&](double rise) {
    return fmt::format("<span size=\"70%\" rise=\"{}\">",
                       static_cast<int>(rise * size * PANGO_SCALE));
  };
  markup = replaced(markup, "<sup>", script(0.36));
  markup = replaced(markup, "<sub>", script(-0.16));
  for (const char* end : {"</sup>", "</sub>"}) markup = replaced(markup, end, "</span>");
  return markup;
}

Layout laid_out(cairo_t* cr, const std::string& markup, const TextStyle& style) {
  Layout layout(pango_cairo_create_layout(cr), g_object_unref);
  set_font(layout.get(), style);
  const std::string plain = with_plain_scripts(markup, style.size);
  pango_layout_set_markup(layout.get(), plain.c_str(), static_cast<int>(plain.size()));
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

void show(cairo_t* cr, PangoLayout* layout, Place p, Anchor anchor, const TextStyle& style) {
  const Size size = size_of(layout);
  cairo_new_path(cr);
  cairo_move_to(cr, p.x - anchor.across * size.width, p.y - anchor.down * size.height);
  set_source(cr, style.colour);
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

double device_per_unit(const Sheet& s) {
  return s.format == Format::Png ? s.pixels_per_unit : s.points_per_unit;
}

/// A page in a PDF says neither when nor by which version of Cairo it was drawn.
void describe(cairo_surface_t* pdf, const Sheet& s) {
  cairo_pdf_surface_set_metadata(pdf, CAIRO_PDF_METADATA_CREATE_DATE, "");
  cairo_pdf_surface_set_metadata(pdf, CAIRO_PDF_METADATA_CREATOR, "lidwright");
  cairo_pdf_surface_set_metadata(pdf, CAIRO_PDF_METADATA_TITLE, s.title.c_str());
}

cairo_surface_t* surface_for(const Sheet& s, std::string* written) {
  const double width = s.width * device_per_unit(s), height = s.height * device_per_unit(s);
  if (s.format == Format::Png)
    return cairo_image_surface_create(
        s.ground == Ground::Clear ? CAIRO_FORMAT_ARGB32 : CAIRO_FORMAT_RGB24,
        static_cast<int>(std::lround(width)), static_cast<int>(std::lround(height)));
  if (s.format == Format::Svg) {
    cairo_surface_t* svg = cairo_svg_surface_create_for_stream(append, written, width, height);
    cairo_svg_surface_set_document_unit(svg, CAIRO_SVG_UNIT_PT);
    return svg;
  }
  cairo_surface_t* pdf = cairo_pdf_surface_create_for_stream(append, written, width, height);
  describe(pdf, s);
  return pdf;
}

/// Texts are as wide in every format, not rounded to its pixels.
void keep_widths(cairo_t* cr) {
  const std::unique_ptr<cairo_font_options_t, void (*)(cairo_font_options_t*)> options(
      cairo_font_options_create(), cairo_font_options_destroy);
  cairo_font_options_set_hint_metrics(options.get(), CAIRO_HINT_METRICS_OFF);
  cairo_font_options_set_hint_style(options.get(), CAIRO_HINT_STYLE_NONE);
  cairo_font_options_set_antialias(options.get(), CAIRO_ANTIALIAS_GRAY);
  cairo_set_font_options(cr, options.get());
}

std::string four_bytes(std::uint32_t n) {
  std::string bytes;
  for (const unsigned shift : {24U, 16U, 8U, 0U}) bytes += static_cast<char>(n >> shift & 0xFFU);
  return bytes;
}

/// The PNG chunk that says how large a pixel is (PNG 1.2 specification, pHYs).
std::string pixel_size_chunk(double pixels_per_metre) {
  const std::string size = four_bytes(static_cast<std::uint32_t>(std::lround(pixels_per_metre)));
  const std::string body = "pHYs" + size + size + '\1';
  return four_bytes(9) + body + four_bytes(crc32(body));
}

/// The part of a name before its number, at a place after a quote or a hash; empty: another name.
std::string_view numbered_name(std::string_view text) {
  for (const std::string_view name : {"surface", "image"})
    if (text.starts_with(name) && text.size() > name.size() && text[name.size()] >= '0' &&
        text[name.size()] <= '9')
      return name;
  return {};
}

/// Cairo counts surfaces and images over the whole life of the program, and names them by that
/// number in an SVG: counted anew here, in the order in which they come.
std::string with_names_of_its_own(std::string_view rest) {
  std::map<std::string, std::size_t, std::less<>> numbers;
  std::string text;
  for (std::size_t at; (at = rest.find_first_of("\"#")) != std::string_view::npos;) {
    const std::string_view name = numbered_name(rest.substr(at + 1));
    text.append(rest.substr(0, at + 1)).append(name);
    rest.remove_prefix(at + 1 + name.size());
    if (name.empty()) continue;
    const std::string number(rest.substr(0, rest.find_first_not_of("0123456789")));
    text += std::to_string(numbers.try_emplace(number, numbers.size()).first->second);
    rest.remove_prefix(number.size());
  }
  return text.append(rest);
}

}  // namespace

Canvas::Canvas(const Sheet& sheet)
    : sheet_(sheet),
      written_(std::make_unique<std::string>()),
      surface_(surface_for(sheet, written_.get()), cairo_surface_destroy),
      context_(cairo_create(surface_.get()), cairo_destroy) {
  check(cairo_status(context()));
  const double scale = device_per_unit(sheet);
  cairo_scale(context(), scale, scale);
  if (scale != 1) keep_widths(context());
  require_font(context());
  if (sheet.ground == Ground::Clear) return;
  set_source(context(), {1, 1, 1});
  cairo_paint(context());
}

Canvas::Canvas(int width, int height)
    : Canvas(Sheet{static_cast<double>(width), static_cast<double>(height)}) {}

void Canvas::text(const std::string& markup, Place p, Anchor anchor, const TextStyle& style) {
  const Layout layout = laid_out(context(), markup, style);
  show(context(), layout.get(), p, anchor, style);
}

void Canvas::text_on_patch(const std::string& markup, Place middle, const TextStyle& style) {
  const Size size = size_of(laid_out(context(), markup, style).get());
  const double width = size.width + 0.3 * style.size, height = 1.1 * style.size;
  cairo_new_path(context());
  cairo_rectangle(context(), middle.x - width / 2, middle.y - height / 2, width, height);
  set_source(context(), {1, 1, 1}, 0.85);
  cairo_fill(context());
  text(markup, middle, {0.5, 0.5}, style);
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
  cairo_surface_flush(surface_.get());
  check(cairo_surface_write_to_png_stream(surface_.get(), append, &bytes));
  constexpr std::size_t after_head = 8 + 25;  // signature, and the chunk that must come first
  constexpr double points_per_metre = 72 / 0.0254;
  if (sheet_.points_per_unit > 0)
    bytes.insert(after_head, pixel_size_chunk(sheet_.pixels_per_unit / sheet_.points_per_unit *
                                              points_per_metre));
  return bytes;
}

std::string Canvas::bytes() {
  check(cairo_status(context()));
  if (sheet_.format == Format::Png) return png();
  cairo_surface_finish(surface_.get());
  check(cairo_surface_status(surface_.get()));
  return sheet_.format == Format::Svg ? with_names_of_its_own(*written_) : *written_;
}

std::string as_markup(const std::string& plain) {
  const std::unique_ptr<gchar, void (*)(gpointer)> escaped(
      g_markup_escape_text(plain.c_str(), static_cast<gssize>(plain.size())), g_free);
  return escaped.get();
}

}  // namespace lidwright::plot
