#pragma once

#include <ostream>
#include <string>
#include <vector>

#include "solver/onset.hpp"
#include "tests/support/reference_table.hpp"

/// The tables tests/reference/onset_*.csv (collocation in 80-bit arithmetic, twelve digits; their
/// heads say what they solve) as models to solve.
namespace lidwright {

/// One row.
struct OnsetCase {
  std::string name;  ///< of the problem: all that a critical mode is the least of
  Model model;
  int number = 1;       ///< of the mode
  double rayleigh = 0;  ///< in the model's own units
  bool critical = false;
};
void PrintTo(const OnsetCase&, std::ostream*);

/// Rows of a table, by its name without "onset_" and ".csv".
std::vector<OnsetCase> onset_cases(const std::string& table);

/// The extrapolated Rayleigh number of three grids, the finest with `radial_cells` cells. Throws
/// std::runtime_error when there is none.
class Extrapolated {
 public:
  Extrapolated(const Model&, int radial_cells);
  double operator()(int number);

 private:
  std::vector<NeutralModes> grids_;
};

}  // namespace lidwright
