#pragma once

#include <cstddef>
#include <span>
#include <vector>

/// Spectrum, correlation and period of a record with equal steps, all counted in steps.
namespace lidwright {

double mean_of(std::span<const double> x);

/// I_k = |sum_j x_j exp(-2 pi i j k/n)|^2/n for k = 0 to n/2: uncorrelated numbers of variance s^2
/// have I_k = s^2 on average, k > 0. For a correlated record I_k tends to the sum of all
/// autocovariances as k/n tends to 0.
std::vector<double> periodogram(std::span<const double> x);

/// x less the straight line that fits it best.
std::vector<double> without_line(std::span<const double> x);
/// Slope of that line, a step.
double line_slope(std::span<const double> x);

/// The time constant of a record whose autocorrelation falls exponentially: the larger of the time
/// in which it falls to 1/e and of the sum of the autocorrelation over positive lags up to five
/// such sums (A. D. Sokal 1997, Monte Carlo methods in statistical mechanics, section 3; from
/// memory). 0 for a constant.
double correlation_time(std::span<const double> x);

/// Period of the largest peak of the periodogram, between 2 steps and a third of the record; nan:
/// no peak stands out. It must rise above the noise, red (K. Hasselmann 1976, Tellus 28, 473-485;
/// from memory) and as the median of the ordinates about it says, with a chance of less than 1 in
/// 1000 of such a peak in noise; instead of the median, an autocorrelation of at least one half
/// after one period will do. A peak at twice or thrice the period that stands out too is preferred.
double dominant_period(std::span<const double> x);

}  // namespace lidwright
