#pragma once

#include <cstdint>
#include <string>
#include <vector>

/// Numbers from 0 to 255 as the bytes of a PNG file in grey, and bytes as base64.
namespace lidwright {

/// Row by row from the top, `width` numbers a row. Throws std::runtime_error when Cairo fails.
std::string grey_png(int width, int height, const std::vector<std::uint8_t>& rows);

/// RFC 4648, with padding.
std::string base64(const std::string& bytes);

}  // namespace lidwright
