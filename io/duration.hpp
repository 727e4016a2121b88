#pragma once

#include <string>

namespace lidwright {

/// Seconds as "1 h 05 min", "2 min 13 s", "42 s".
std::string duration_text(double seconds);

}  // namespace lidwright
