#pragma once

/// Student's t distribution (W. S. Gosset 1908, Biometrika 6, 1-25).
namespace lidwright {

/// Probability that |t| exceeds `t` >= 0, with `freedom` > 0 degrees of freedom (need not be
/// whole).
double t_two_sided(double t, double freedom);

/// The t that |t| exceeds with probability `outside` in (0, 1).
double t_quantile(double outside, double freedom);

}  // namespace lidwright
