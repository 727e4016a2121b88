#include "study/benchmark.hpp"

#include <algorithm>
#include <cmath>

namespace lidwright {
namespace {

constexpr double agreeing_distance = 1, most_distance = 2;  // combined uncertainties
constexpr double widest_bar = 1.0 / 20;                     // half width over value

Verdict verdict_of(const Comparison& c) {
  if (!std::isfinite(c.ours.value)) return Verdict::NotSolved;
  if (c.ours.half_width > widest_bar * std::abs(c.expected.value)) return Verdict::Unresolved;
  if (std::abs(c.distance) <= agreeing_distance) return Verdict::Agrees;
  return std::abs(c.distance) <= most_distance ? Verdict::Marginal : Verdict::Differs;
}

double median(std::vector<double> values) {
  if (values.empty()) return 0;
  std::sort(values.begin(), values.end());
  const std::size_t n = values.size();
  return n % 2 ? values[n / 2] : (values[n / 2 - 1] + values[n / 2]) / 2;
}

void count(Tally& t, Verdict v) {
  if (v == Verdict::Agrees) ++t.agree;
  if (v == Verdict::Marginal) ++t.marginal;
  if (v == Verdict::Differs) ++t.differ;
  if (v == Verdict::Unresolved) ++t.unresolved;
  if (v == Verdict::NotSolved) ++t.not_solved;
}

}  // namespace

Comparison compare(const Expectation& expected, const ErrorBar& ours) {
  Comparison c;
  c.expected = expected;
  c.ours = ours;
  const double difference = ours.value - expected.value;
  c.distance = difference / std::hypot(ours.half_width, expected.spread);
  c.contained = std::abs(difference) <= ours.half_width + expected.spread;
  c.verdict = verdict_of(c);
  return c;
}

Comparison not_solved(const Expectation& expected) {
  Comparison c;
  c.expected = expected;
  return c;
}

Tally tally(std::span<const Comparison> comparisons) {
  Tally t;
  std::vector<double> widths, differences;
  for (const Comparison& c : comparisons) {
    if (!c.judged()) {
      ++t.doubtful;
      continue;
    }
    count(t, c.verdict);
    if (c.verdict == Verdict::NotSolved) continue;
    ++t.bars;
    t.contained += c.contained;
    widths.push_back(2 * c.ours.half_width / std::abs(c.expected.value));
    differences.push_back(std::abs(c.ours.value / c.expected.value - 1));
  }
  t.median_width = median(std::move(widths));
  t.median_difference = median(std::move(differences));
  return t;
}

double rounding_of(const std::string& number) {
  const std::size_t exponent_at = number.find_first_of("eE");
  const std::string digits = number.substr(0, exponent_at);
  const std::size_t point = digits.find('.');
  const int exponent =
      exponent_at == std::string::npos ? 0 : std::stoi(number.substr(exponent_at + 1));
  const int decimals = point == std::string::npos ? 0 : static_cast<int>(digits.size() - point - 1);
  return 0.5 * std::pow(10.0, exponent - decimals);
}

const char* word(Verdict v) {
  switch (v) {
    case Verdict::Agrees:
      return "agrees";
    case Verdict::Marginal:
      return "marginal";
    case Verdict::Differs:
      return "DIFFERS";
    case Verdict::Unresolved:
      return "UNRESOLVED";
    case Verdict::NotSolved:
      break;
  }
  return "NOT SOLVED";
}

const char* word(Mark m) {
  switch (m) {
    case Mark::Analytic:
      return "analytic";
    case Mark::Computed:
      return "computed";
    case Mark::Published:
      return "published";
    case Mark::Confirmed:
      return "confirmed";
    case Mark::Remembered:
      return "remembered";
    case Mark::Doubtful:
      break;
  }
  return "doubtful";
}

}  // namespace lidwright
