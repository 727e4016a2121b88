#pragma once

#include <limits>
#include <span>

/// The discretisation error of a quantity from its values on grids refined by two: Richardson
/// extrapolation with a grid convergence index (P. J. Roache 1994, Perspective: a method for
/// uniform reporting of grid refinement studies, J. Fluids Eng. 116, 405-413; from memory).
///
/// With the values f1, f2, f3 from coarse to fine and the steps e1 = f2 - f1, e2 = f3 - f2, the
/// observed order is p = log2(e1/e2), the extrapolated value f3 + e2/(2^p - 1), and the half width
/// of the bar F |e2|/(2^p - 1) with a safety factor F.
namespace lidwright {

/// What the steps from grid to grid look like, which decides on order and safety factor.
enum class Convergence {
  Sound,        ///< monotone, 1.5 <= p <= 2.5 about the scheme's order 2: observed order, F = 1.25
  Steep,        ///< monotone, p > 2.5: order 2, F = 3, of the larger of e2 and e1/4
  Slow,         ///< monotone, p < 1.5: order 1, F = 3
  Oscillating,  ///< e1 and e2 of unlike sign: no extrapolation; F = 3, of the larger of them
  Diverging,    ///< |e2| >= |e1|: no extrapolation; F = 3, of e2
  Flat,         ///< steps at the solver's tolerance: no extrapolation; F = 3, of the larger step
  TwoGrids,     ///< no order can be observed: order 2, F = 3
};

struct ErrorBar {
  double value = std::numeric_limits<double>::quiet_NaN();  ///< extrapolated
  double half_width = 0;                                    ///< about the value, >= floor
  double order = std::numeric_limits<double>::quiet_NaN();  ///< observed; nan: none
  Convergence convergence = Convergence::Flat;
};

/// `values` from coarse to fine, two or more; the last three count. `floor`: absolute error that
/// the solver's tolerance leaves in a value, >= 0: steps of less than ten times as much are flat.
ErrorBar error_bar(std::span<const double> values, double floor);

/// One word for the table.
const char* word(Convergence);

}  // namespace lidwright
