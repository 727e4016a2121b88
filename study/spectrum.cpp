#include "study/spectrum.hpp"

#include <Eigen/Core>
#include <algorithm>
#include <cmath>
#include <complex>
#include <limits>
#include <numbers>
#include <unsupported/Eigen/FFT>
#include <utility>

namespace lidwright {
namespace {

using std::numbers::pi;
using Complex = std::complex<double>;
constexpr double nan = std::numeric_limits<double>::quiet_NaN();

std::vector<Complex> transform(const std::vector<double>& x) {
  Eigen::FFT<double> fft;
  std::vector<Complex> spectrum;
  fft.fwd(spectrum, x);
  return spectrum;
}

/// Autocorrelation at all lags, each over the pairs there are.
std::vector<double> autocorrelation(std::span<const double> x) {
  const std::size_t n = x.size();
  std::vector<double> padded(2 * n, 0.0);
  const double mean = mean_of(x);
  for (std::size_t k = 0; k < n; ++k) padded[k] = x[k] - mean;
  std::vector<Complex> power = transform(padded);
  for (Complex& c : power) c = std::norm(c);
  Eigen::FFT<double> fft;
  std::vector<double> sums;
  fft.inv(sums, power);
  const double variance = sums[0] / static_cast<double>(n);
  std::vector<double> rho(n, 0.0);
  if (variance > 0)
    for (std::size_t lag = 0; lag < n; ++lag)
      rho[lag] = sums[lag] / (static_cast<double>(n - lag) * variance);
  return rho;
}

double fall_to_one_in_e(const std::vector<double>& rho) {
  const double level = std::exp(-1.0);
  for (std::size_t lag = 1; lag < rho.size(); ++lag)
    if (rho[lag] < level)
      return static_cast<double>(lag - 1) + (rho[lag - 1] - level) / (rho[lag - 1] - rho[lag]);
  return static_cast<double>(rho.size());
}

double windowed_sum(const std::vector<double>& rho) {
  double sum = 0.5;
  for (std::size_t lag = 1; lag < rho.size() / 2; ++lag) {
    sum += rho[lag];
    if (static_cast<double>(lag) >= 5 * sum) break;
  }
  return std::max(sum, 0.0);
}

/// |sum x exp(-2 pi i f j)|^2/n at any frequency f.
double power_at(std::span<const double> x, double f) {
  const Complex turn = std::polar(1.0, -2 * pi * f);
  Complex phase = 1, sum = 0;
  for (const double v : x) {
    sum += v * phase;
    phase *= turn;
  }
  return std::norm(sum) / static_cast<double>(x.size());
}

/// The frequency of the maximum in [low, high], by golden sections.
double refined_frequency(std::span<const double> x, double low, double high) {
  constexpr double part = 1 / std::numbers::phi;
  double a = high - part * (high - low), b = low + part * (high - low);
  double at_a = power_at(x, a), at_b = power_at(x, b);
  for (int k = 0; k < 30; ++k) {
    if (at_a > at_b) {
      high = std::exchange(b, a);
      at_b = at_a;
      a = high - part * (high - low);
      at_a = power_at(x, a);
    } else {
      low = std::exchange(a, b);
      at_a = at_b;
      b = low + part * (high - low);
      at_b = power_at(x, b);
    }
  }
  return (low + high) / 2;
}

/// Which ordinates of a periodogram are peaks and not noise.
class Peaks {
 public:
  explicit Peaks(std::span<const double> x)
      : n_(x.size()), power_(periodogram(x)), rho_(autocorrelation(x)) {
    least_ratio_ = std::log(static_cast<double>(power_.size()) / false_alarm);
  }

  std::size_t largest() const {
    return static_cast<std::size_t>(std::max_element(power_.begin(), power_.end()) -
                                    power_.begin());
  }
  double power(std::size_t k) const { return power_[k]; }

  bool stands_out(std::size_t k) const {
    if (k < least_cycles || power_[k] < power_[k - 1] || power_[k] < least_ratio_ * red_noise(k))
      return false;
    return power_[k] >= least_ratio_ * noise_about(k) || repeats(k);
  }

  /// The larger of the ordinates next to a place between them.
  std::size_t near(double place) const {
    const auto k = static_cast<std::size_t>(place);
    return k + 1 < power_.size() && power_[k + 1] > power_[k] ? k + 1 : k;
  }

 private:
  static constexpr std::size_t least_cycles = 3;
  static constexpr double false_alarm = 1e-3;

  /// Of the noise without the peak itself: variance and first autocorrelation from the ordinates
  /// elsewhere.
  double red_noise(std::size_t k) const {
    const double n = static_cast<double>(n_);
    double sum = 0, product = 0;
    for (std::size_t j = 1; j < power_.size(); ++j) {
      if (j + 2 >= k && j <= k + 2) continue;
      sum += power_[j];
      product += power_[j] * std::cos(2 * pi * static_cast<double>(j) / n);
    }
    if (sum == 0) return 0;
    const double phi = std::clamp(product / sum, 0.0, 1 - 1e-12);
    const double f = static_cast<double>(k) / n;
    return 2 * sum / n * (1 - phi * phi) / (1 + phi * phi - 2 * phi * std::cos(2 * pi * f));
  }

  /// From the median over an octave on either side, at least six ordinates up; of an exponential
  /// distribution it is ln 2 of the mean.
  double noise_about(std::size_t k) const {
    const std::size_t first = std::max<std::size_t>(k / 2, 1);
    const std::size_t last = std::min(std::max(2 * k, k + 8), power_.size() - 1);
    std::vector<double> about;
    for (std::size_t j = first; j <= last; ++j)
      if (j + 2 < k || j > k + 2) about.push_back(power_[j]);
    if (about.empty()) return std::numeric_limits<double>::infinity();
    const auto middle = about.begin() + static_cast<std::ptrdiff_t>(about.size() / 2);
    std::nth_element(about.begin(), middle, about.end());
    return *middle / std::numbers::ln2;
  }

  bool repeats(std::size_t k) const {
    const auto lag =
        static_cast<std::size_t>(std::lround(static_cast<double>(n_) / static_cast<double>(k)));
    return lag < rho_.size() && rho_[lag] >= 0.5;
  }

  std::size_t n_;
  std::vector<double> power_, rho_;
  double least_ratio_ = 0;
};

/// The largest peak, or one at a half or a third of its frequency.
std::size_t lowest_of_its_kind(const Peaks& peaks, std::size_t largest) {
  for (const int divisor : {3, 2}) {
    const std::size_t k = peaks.near(static_cast<double>(largest) / divisor);
    if (peaks.stands_out(k) && peaks.power(k) > 0.05 * peaks.power(largest)) return k;
  }
  return largest;
}

}  // namespace

double mean_of(std::span<const double> x) {
  double sum = 0;
  for (const double v : x) sum += v;
  return sum / static_cast<double>(x.size());
}

std::vector<double> periodogram(std::span<const double> x) {
  const double mean = mean_of(x);
  std::vector<double> centred(x.begin(), x.end());
  for (double& v : centred) v -= mean;
  const std::vector<Complex> spectrum = transform(centred);
  std::vector<double> power(x.size() / 2 + 1);
  for (std::size_t k = 0; k < power.size(); ++k)
    power[k] = std::norm(spectrum[k]) / static_cast<double>(x.size());
  return power;
}

double line_slope(std::span<const double> x) {
  const double n = static_cast<double>(x.size()), mean = mean_of(x), middle = (n - 1) / 2;
  double moment = 0;
  for (std::size_t k = 0; k < x.size(); ++k)
    moment += (static_cast<double>(k) - middle) * (x[k] - mean);
  return 12 * moment / (n * (n * n - 1));
}

std::vector<double> without_line(std::span<const double> x) {
  const double slope = line_slope(x), mean = mean_of(x);
  const double middle = (static_cast<double>(x.size()) - 1) / 2;
  std::vector<double> rest(x.size());
  for (std::size_t k = 0; k < x.size(); ++k)
    rest[k] = x[k] - mean - slope * (static_cast<double>(k) - middle);
  return rest;
}

double correlation_time(std::span<const double> x) {
  const std::vector<double> rho = autocorrelation(x);
  if (!(rho[0] > 0)) return 0;
  const double found = std::max(fall_to_one_in_e(rho), windowed_sum(rho));
  return found * (1 + 4 * found / static_cast<double>(x.size()));
}

double dominant_period(std::span<const double> x) {
  if (x.size() < 16) return nan;
  const std::vector<double> rest = without_line(x);
  const Peaks peaks(rest);
  const std::size_t largest = peaks.largest();
  if (!peaks.stands_out(largest)) return nan;
  const double n = static_cast<double>(x.size());
  const double k = static_cast<double>(lowest_of_its_kind(peaks, largest));
  return 1 / refined_frequency(rest, (k - 0.9) / n, std::min((k + 0.9) / n, 0.5));
}

}  // namespace lidwright
