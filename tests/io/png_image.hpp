#pragma once

#include <cairo.h>

#include <algorithm>
#include <cmath>
#include <memory>
#include <string>
#include <string_view>

#include "io/colour_map.hpp"

/// A PNG read back, to look at its pixels.
namespace lidwright::test {

class PngImage {
 public:
  explicit PngImage(const std::string& bytes) {
    std::string_view rest = bytes;
    surface_.reset(cairo_image_surface_create_from_png_stream(take, &rest));
  }
  bool sound() const { return cairo_surface_status(surface_.get()) == CAIRO_STATUS_SUCCESS; }
  int width() const { return cairo_image_surface_get_width(surface_.get()); }
  int height() const { return cairo_image_surface_get_height(surface_.get()); }
  /// 0xAARRGGBB; the first two digits mean something only in a picture with a clear ground.
  unsigned pixel(int x, int y) const {
    const unsigned char* row =
        cairo_image_surface_get_data(surface_.get()) +
        static_cast<long>(y) * cairo_image_surface_get_stride(surface_.get());
    return reinterpret_cast<const unsigned*>(row)[x];
  }
  unsigned colour(int x, int y) const { return pixel(x, y) & 0xffffffU; }
  unsigned opacity(int x, int y) const { return pixel(x, y) >> 24U; }
  /// How many pixels have exactly this colour.
  long count(const Colour& c) const {
    long n = 0;
    for (int y = 0; y < height(); ++y)
      for (int x = 0; x < width(); ++x) n += colour(x, y) == packed(c) ? 1 : 0;
    return n;
  }
  static unsigned packed(const Colour& c) {
    const auto byte = [](double x) { return static_cast<unsigned>(std::lround(255 * x)); };
    return byte(c.red) << 16U | byte(c.green) << 8U | byte(c.blue);
  }

 private:
  static cairo_status_t take(void* from, unsigned char* to, unsigned int n) {
    auto& source = *static_cast<std::string_view*>(from);
    if (source.size() < n) return CAIRO_STATUS_READ_ERROR;
    std::copy_n(source.begin(), n, to);
    source.remove_prefix(n);
    return CAIRO_STATUS_SUCCESS;
  }

  std::unique_ptr<cairo_surface_t, void (*)(cairo_surface_t*)> surface_{nullptr,
                                                                        cairo_surface_destroy};
};

/// Is a frame of that many pixels around the picture white?
inline bool white_margins(const PngImage& image, int wide) {
  for (int y = 0; y < image.height(); ++y)
    for (int x = 0; x < image.width(); ++x) {
      const bool inside =
          x >= wide && x < image.width() - wide && y >= wide && y < image.height() - wide;
      if (!inside && image.colour(x, y) != 0xffffffU) return false;
    }
  return true;
}

}  // namespace lidwright::test
