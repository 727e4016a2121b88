#include "io/plot_axis.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>

namespace lidwright::plot {
namespace {

constexpr const char* minus = "\u2212";

double power(int exponent) { return std::pow(10.0, exponent); }

/// The least of 1, 2, 5, 10, 20, ... not below the number.
double step_for(double least) {
  const double base = power(static_cast<int>(std::floor(std::log10(least))));
  for (const double factor : {1.0, 2.0, 5.0})
    if (factor * base >= least * (1 - 1e-9)) return factor * base;
  return 10 * base;
}

/// Powers of a thousand are left out of labels that would be long.
int common_exponent(const Interval& r) {
  const double largest = std::max(std::abs(r.low), std::abs(r.high));
  const int exponent = static_cast<int>(std::floor(std::log10(largest) + 1e-9));
  return exponent >= 5 || exponent <= -3 ? 3 * static_cast<int>(std::floor(exponent / 3.0)) : 0;
}

std::string label(double value, int decimals) {
  const std::string digits = fmt::format("{:.{}f}", std::abs(value), decimals);
  const bool zero = digits.find_first_of("123456789") == std::string::npos;
  return value < 0 && !zero ? minus + digits : digits;
}

/// factor times ten to the exponent, spelt out where that is short.
std::string decade_label(int factor, int exponent) {
  if (exponent >= -2 && exponent <= 3) return fmt::format("{:g}", factor * power(exponent));
  if (factor == 1) return power_of_ten(exponent);
  return fmt::format("{} \u00d7 {}", factor, power_of_ten(exponent));
}

}  // namespace

void Interval::include(double value) {
  if (!std::isfinite(value)) return;
  low = std::min(low, value);
  high = std::max(high, value);
}

Interval range_of(const std::vector<double>& numbers) {
  const auto first =
      std::find_if(numbers.begin(), numbers.end(), [](double x) { return std::isfinite(x); });
  if (first == numbers.end()) return {};
  Interval range{*first, *first};
  for (const double x : numbers) range.include(x);
  return range;
}

bool spans_decades(const Interval& r) { return r.low > 0 && r.high > 10 * r.low; }

double Axis::place(double value) const {
  if (spacing == Spacing::Linear) return (value - range.low) / (range.high - range.low);
  return std::log(value / range.low) / std::log(range.high / range.low);
}

Axis linear_axis(Interval range, int most) {
  Axis axis{range, Spacing::Linear, {}, ""};
  const double step = step_for((range.high - range.low) / std::max(most, 1));
  const int exponent = common_exponent(range);
  const int decimals =
      std::max(0, exponent - static_cast<int>(std::floor(std::log10(step) + 1e-9)));
  if (exponent != 0) axis.power = power_of_ten(exponent);
  const double air = 1e-6 * step;
  for (double k = std::ceil((range.low - air) / step); k * step <= range.high + air; ++k)
    axis.ticks.push_back({k * step, label(k * step / power(exponent), decimals)});
  return axis;
}

Axis logarithmic_axis(Interval range, int most) {
  const int low = static_cast<int>(std::floor(std::log10(range.low) + 1e-9));
  const int high = std::max(low + 1, static_cast<int>(std::ceil(std::log10(range.high) - 1e-9)));
  const int stride = (high - low + most - 1) / std::max(most, 1);
  Axis axis{{power(low), power(high)}, Spacing::Logarithmic, {}, ""};
  for (int k = low; k <= high; ++k)
    if (k % stride == 0) axis.ticks.push_back({power(k), power_of_ten(k)});
  return axis;
}

Axis logarithmic_axis_within(Interval range, int most) {
  const double decades = std::log10(range.high / range.low);
  const int stride = std::max(1, static_cast<int>(std::ceil(decades / std::max(most, 1))));
  const bool between = 3 * decades <= most;
  Axis axis{range, Spacing::Logarithmic, {}, ""};
  const auto mark = [&](int factor, int exponent) {
    const double value = factor * power(exponent);
    if (value >= range.low && value <= range.high)
      axis.ticks.push_back({value, decade_label(factor, exponent)});
  };
  for (int k = static_cast<int>(std::floor(std::log10(range.low))); power(k) <= range.high; ++k) {
    if (k % stride != 0) continue;
    mark(1, k);
    if (between) mark(2, k);
    if (between) mark(5, k);
  }
  return axis;
}

Interval with_margin(Interval range, double share) {
  const double size = std::max(std::abs(range.low), std::abs(range.high));
  const double least = size > 0 ? 1e-3 * size : 1;
  const double air =
      range.high - range.low > 1e-9 * size ? share * (range.high - range.low) : least;
  return {range.low - air, range.high + air};
}

Interval with_margin_in_logarithm(Interval range, double share) {
  if (range.high / range.low < 1 + 1e-6) return {0.9 * range.low, 1.1 * range.high};
  const double factor = std::pow(range.high / range.low, share);
  return {range.low / factor, range.high * factor};
}

Axis axis_of_values(Interval range, Spacing spacing, int most, double air) {
  if (spacing == Spacing::Logarithmic && range.low > 0) {
    const Interval wider = with_margin_in_logarithm(range, air);
    Axis axis = logarithmic_axis_within(wider, most);
    if (axis.ticks.size() >= 2) return axis;
    axis = linear_axis(wider, most);
    axis.spacing = Spacing::Logarithmic;
    return axis;
  }
  const double size = std::max(std::abs(range.low), std::abs(range.high));
  if (range.high - range.low < 1e-5 * size)
    return linear_axis(with_margin({range.low, range.low}, 0), most);
  return linear_axis(with_margin(range, air), most);
}

std::string written(const Label& l, const Axis& axis) {
  const std::string gap = axis.power.empty() || l.unit.empty() ? "" : " ";
  const std::string unit = axis.power + gap + l.unit;
  return unit.empty() ? l.what : fmt::format("{} ({})", l.what, unit);
}

std::string four_digits(double value) {
  const double size = std::abs(value);
  if (value == 0 || (size >= 1e-3 && size < 1e5)) return fmt::format("{:.4g}", value);
  const int exponent = static_cast<int>(std::floor(std::log10(size)));
  return fmt::format("{:.4g} \u00d7 {}", value / power(exponent), power_of_ten(exponent));
}

std::string power_of_ten(int exponent) {
  if (exponent == 0) return "1";
  if (exponent == 1) return "10";
  return fmt::format("10<sup>{}{}</sup>", exponent < 0 ? minus : "", std::abs(exponent));
}

}  // namespace lidwright::plot
