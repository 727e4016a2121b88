#pragma once

#include <cstddef>
#include <span>

/// The mean of correlated values at equal steps: how far off it may be, whether it drifts, and
/// where the settled part begins.
namespace lidwright {

/// A mean and its standard error.
struct MeanError {
  double mean = 0;
  double standard_error = 0;
  double freedom = 1;         ///< degrees of freedom of the standard error
  double half_width() const;  ///< of the 95 % interval, by Student's t
};

/// From the spectrum at zero frequency, taken as the mean of the `ordinates` >= 1 lowest ordinates
/// of the periodogram (P. Heidelberger & P. D. Welch 1981, Commun. ACM 24, 233-245; P. C. B.
/// Phillips 2005, Econometric Theory 21, 116-142; from memory). Their number does not grow with the
/// record, so that the ratio follows Student's t with twice as many degrees of freedom (U. K.
/// Mueller 2007, J. Econometrics 141, 1331-1352; from memory). Each is divided by what is left at
/// its frequency of a spectrum that belongs to an autocorrelation falling with `correlation_time`
/// (in steps; 0: flat).
MeanError mean_error(std::span<const double> x, std::size_t ordinates, double correlation_time = 0);

/// Two-sided probability of a slope at least this large in a settled record: the fitted line
/// against the spectrum at zero frequency of what is left, with about 2 ordinates - 1 degrees of
/// freedom.
double slope_chance(std::span<const double> x, std::size_t ordinates, double correlation_time = 0);

/// How many batches of five precede the settled part: the truncation point that minimises the
/// marginal standard error (MSER-5: K. P. White 1997, Simulation 69, 323-334; from memory), of
/// those that leave at least `least_left` batches. When it lies in the second half, all may be
/// transient.
std::size_t settled_from(std::span<const double> x, std::size_t least_left = 5);
inline constexpr std::size_t values_a_batch = 5;

}  // namespace lidwright
