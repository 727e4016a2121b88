#include "io/grey_image.hpp"

#include <cairo.h>

#include <algorithm>
#include <memory>
#include <stdexcept>

namespace lidwright {
namespace {

using Surface = std::unique_ptr<cairo_surface_t, void (*)(cairo_surface_t*)>;

cairo_status_t append(void* target, const unsigned char* data, unsigned int length) {
  static_cast<std::string*>(target)->append(reinterpret_cast<const char*>(data), length);
  return CAIRO_STATUS_SUCCESS;
}

void check(cairo_status_t status) {
  if (status != CAIRO_STATUS_SUCCESS)
    throw std::runtime_error(std::string("cannot make an image: ") +
                             cairo_status_to_string(status));
}

}  // namespace

std::string grey_png(int width, int height, const std::vector<std::uint8_t>& rows) {
  const Surface surface(cairo_image_surface_create(CAIRO_FORMAT_A8, width, height),
                        cairo_surface_destroy);
  check(cairo_surface_status(surface.get()));
  unsigned char* const data = cairo_image_surface_get_data(surface.get());
  const int stride = cairo_image_surface_get_stride(surface.get());
  for (int y = 0; y < height; ++y)
    std::copy_n(rows.begin() + std::ptrdiff_t{y} * width, width, data + std::ptrdiff_t{y} * stride);
  cairo_surface_mark_dirty(surface.get());
  std::string bytes;
  check(cairo_surface_write_to_png_stream(surface.get(), append, &bytes));
  return bytes;
}

std::string base64(const std::string& bytes) {
  static constexpr char digits[] =
      "ABCDEFGHIJKLMNOPQRSTUVWXYZabcdefghijklmnopqrstuvwxyz0123456789+/";
  std::string text;
  text.reserve(4 * (bytes.size() / 3 + 1));
  for (std::size_t at = 0; at < bytes.size(); at += 3) {
    unsigned three = 0;
    for (std::size_t k = 0; k < 3; ++k)
      three =
          three << 8U | (at + k < bytes.size() ? static_cast<unsigned char>(bytes[at + k]) : 0U);
    for (std::size_t k = 0; k < 4; ++k)
      text += at + k <= bytes.size() ? digits[three >> (18 - 6 * k) & 63U] : '=';
  }
  return text;
}

}  // namespace lidwright
