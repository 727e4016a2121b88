#include "study/short_number.hpp"

#include <fmt/format.h>

#include <cmath>

namespace lidwright {

std::string short_number(double x, int digits) {
  const std::string text = fmt::format("{:.{}g}", x, digits);
  const auto e = text.find('e');
  if (e == std::string::npos) return text;
  const double rounded = std::stod(text);
  if (std::abs(rounded) >= 1e3 && std::abs(rounded) < 1e5) return fmt::format("{:.0f}", rounded);
  return fmt::format("{}e{}", text.substr(0, e), std::stoi(text.substr(e + 1)));
}

}  // namespace lidwright
