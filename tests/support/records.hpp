#pragma once

#include <cmath>
#include <cstdint>
#include <numbers>
#include <random>
#include <vector>

#include "study/series.hpp"

namespace lidwright {

/// Random numbers that are the same everywhere: the standard fixes the engine, but not its
/// distributions.
class Dice {
 public:
  explicit Dice(std::uint64_t seed) : engine_(seed) {}
  double uniform() { return (static_cast<double>(engine_() >> 11) + 0.5) * 0x1p-53; }
  double exponential() { return -std::log(uniform()); }
  double normal() {
    const double r = std::sqrt(2 * exponential());
    return r * std::cos(2 * std::numbers::pi * uniform());
  }

 private:
  std::mt19937_64 engine_;
};

/// Records whose mean over all time is known, at steps between 0.5 and 1.5.
struct Record {
  Series series;
  double truth = 0;
};

inline Series uneven_times(Dice& dice, int rows) {
  Series s;
  for (int k = 0; k < rows; ++k) {
    s.time.push_back(k == 0 ? 0 : s.time.back() + 0.5 + dice.uniform());
    s.value.push_back(0);
  }
  return s;
}

/// Autocorrelation exp(-t/tau) (AR(1) on equal steps, Ornstein and Uhlenbeck's process in time),
/// variance 1 about 5.
inline Record red_noise(Dice& dice, int rows, double tau) {
  Record r{uneven_times(dice, rows), 5};
  double x = dice.normal();
  for (std::size_t k = 0; k < r.series.size(); ++k) {
    const double kept = k == 0 ? 1 : std::exp((r.series.time[k - 1] - r.series.time[k]) / tau);
    x = kept * x + std::sqrt(1 - kept * kept) * dice.normal();
    r.series.value[k] = 5 + x;
  }
  return r;
}

/// 5 + cos(2 pi t/period + any phase) + noise.
inline Record oscillation(Dice& dice, int rows, double period, double noise, double tau) {
  Record r = red_noise(dice, rows, tau);
  const double phase = 2 * std::numbers::pi * dice.uniform();
  for (std::size_t k = 0; k < r.series.size(); ++k) {
    double& v = r.series.value[k];
    v = 5 + noise * (v - 5) + std::cos(2 * std::numbers::pi * r.series.time[k] / period + phase);
  }
  return r;
}

/// Shot noise on 1: bursts at random moments, `rate` a time, each of random height about 1 that
/// fades within tau. The mean over all time is 1 + rate tau.
inline Record bursts(Dice& dice, int rows, double rate, double tau) {
  Record r{uneven_times(dice, rows), 1 + rate * tau};
  double t = -20 * tau, next = t + dice.exponential() / rate, x = 0;
  for (std::size_t k = 0; k < r.series.size(); ++k) {
    for (; next <= r.series.time[k]; next += dice.exponential() / rate) {
      x = x * std::exp((t - next) / tau) + dice.exponential();
      t = next;
    }
    x *= std::exp((t - r.series.time[k]) / tau);
    t = r.series.time[k];
    r.series.value[k] = 1 + x;
  }
  return r;
}

/// height exp(-t/(share of the record)) more.
inline Record with_start_up(Record r, double height, double share) {
  for (std::size_t k = 0; k < r.series.size(); ++k)
    r.series.value[k] += height * std::exp(-r.series.time[k] / (share * r.series.length()));
  return r;
}

/// A line that rises by `change` over the record more.
inline Record with_drift(Record r, double change) {
  for (std::size_t k = 0; k < r.series.size(); ++k)
    r.series.value[k] += change * r.series.time[k] / r.series.length();
  return r;
}

}  // namespace lidwright
