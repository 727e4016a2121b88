#pragma once

#include <string>

namespace lidwright {

/// A number as people write it: "0.042", "1450", "3.2e6".
std::string short_number(double, int digits = 3);

}  // namespace lidwright
