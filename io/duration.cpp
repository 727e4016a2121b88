#include "io/duration.hpp"

#include <fmt/format.h>

#include <cmath>

namespace lidwright {

std::string duration_text(double seconds) {
  const auto s = static_cast<long>(std::lround(seconds));
  if (s >= 3600) return fmt::format("{} h {:02d} min", s / 3600, s / 60 % 60);
  if (s >= 60) return fmt::format("{} min {:02d} s", s / 60, s % 60);
  return fmt::format("{} s", s);
}

}  // namespace lidwright
