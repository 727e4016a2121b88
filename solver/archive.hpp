#pragma once

#include <map>
#include <string>

#include "mesh/field.hpp"

/// Everything a march needs to go on bit for bit: named numbers and fields. io/checkpoint stores it
/// without knowing what it means.
namespace lidwright {

struct Archive {
  std::map<std::string, double> numbers;  ///< whole numbers up to 2^53 are exact
  std::map<std::string, CellField> cells;
  std::map<std::string, CornerField> corners;
};

}  // namespace lidwright
