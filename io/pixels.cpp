#include "io/pixels.hpp"

#include <cmath>
#include <memory>

namespace lidwright::plot {

std::uint32_t packed(const Colour& c) {
  const auto byte = [](double x) { return static_cast<std::uint32_t>(std::lround(255 * x)); };
  return byte(c.red) << 16 | byte(c.green) << 8 | byte(c.blue);
}

void paint_pixels(Canvas& canvas, std::vector<std::uint32_t>& pixels, int width, Place corner) {
  const int height = static_cast<int>(pixels.size()) / width;
  const std::unique_ptr<cairo_surface_t, void (*)(cairo_surface_t*)> image(
      cairo_image_surface_create_for_data(reinterpret_cast<unsigned char*>(pixels.data()),
                                          CAIRO_FORMAT_RGB24, width, height, 4 * width),
      cairo_surface_destroy);
  {
    const Saved saved(canvas);
    cairo_t* cr = canvas.context();
    cairo_set_source_surface(cr, image.get(), corner.x, corner.y);
    cairo_pattern_set_filter(cairo_get_source(cr), CAIRO_FILTER_NEAREST);
    cairo_paint(cr);
  }
  cairo_surface_finish(image.get());  // a page that is written later takes its copy now
}

}  // namespace lidwright::plot
