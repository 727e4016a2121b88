#include "app/onset_summary.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <iterator>
#include <numbers>

#include "app/progress.hpp"

namespace lidwright {
namespace {

/// Modes shown on either side of the critical one.
constexpr int neighbours = 5;

const OnsetPoint& critical(const OnsetCurve& curve) {
  return curve.points[static_cast<std::size_t>(curve.least)];
}

double wavelength(const Wave& w) { return 2 * std::numbers::pi / w.wavenumber; }

double times_critical(const Case& c, const OnsetCurve& curve) {
  return c.model.rayleigh / critical(curve).rayleigh.value;
}

/// What the number of a mode counts.
std::string counted(const Shell& s, const Wave& w) {
  const char* plural = w.number == 1 ? "" : "s";
  if (s.shape == Shape::AxisymmetricShell)
    return fmt::format("degree {:.6g}, {} half wave{}", w.order, w.number, plural);
  if (s.sides == Sides::Reflecting) return fmt::format("{} half wave{}", w.number, plural);
  return fmt::format("{} wave{} {}", w.number, plural,
                     s.shape == Shape::Box ? "in the box" : "round the circle");
}

std::string grids_text(const OnsetCurve& curve) {
  return fmt::format("{} radial cells", fmt::join(curve.grids, ", "));
}

std::string row_text(const OnsetPoint& p, bool least) {
  const ErrorBar& bar = p.rayleigh;
  std::string text = fmt::format("  {} {:>6} {:>12.5g} {:>16.7g}", least ? '>' : ' ', p.wave.number,
                                 p.wave.wavenumber, bar.value);
  if (bar.half_width > 0)
    fmt::format_to(std::back_inserter(text), " {:>11.2g} {:>8.2f}", bar.half_width, bar.order);
  return text + "\n";
}

std::string table_text(const OnsetCurve& curve) {
  const bool bars = curve.grids.size() > 1;
  const int last = static_cast<int>(curve.points.size()) - 1;
  const int from = std::max(0, curve.least - neighbours),
            to = std::min(last, curve.least + neighbours);
  std::string text = fmt::format("    {:>6} {:>12} {:>16}{}\n", "mode", "wavenumber", "Rayleigh",
                                 bars ? "          +-    order" : "");
  if (from > 0) text += "       ...\n";
  for (int k = from; k <= to; ++k)
    text += row_text(curve.points[static_cast<std::size_t>(k)], k == curve.least);
  if (to < last) text += "       ...\n";
  return text;
}

/// What linear theory says about the case's own Rayleigh number.
std::string verdict(const Case& c, const OnsetCurve& curve) {
  const ErrorBar& bar = critical(curve).rayleigh;
  const std::string ratio = fmt::format("Ra {:.6g} is {:.4g} times critical: ", c.model.rayleigh,
                                        times_critical(c, curve));
  if (std::abs(c.model.rayleigh - bar.value) <= bar.half_width)
    return ratio + "too near to tell on this grid";
  if (c.model.rayleigh > bar.value) return ratio + "it convects";
  return ratio + "it conducts, small disturbances die away";
}

std::string caution(const OnsetCurve& curve) {
  if (curve.bracketed) return "";
  return fmt::format(
      "  caution               {}\n",
      curve.interrupted
          ? "interrupted: the least may lie beyond the modes that were reached"
          : "the least is at the end of the modes looked at: give more with --modes, or refine the "
            "grid for shorter waves");
}

/// Modes whose error bars meet that of the critical one.
std::string rivals(const OnsetCurve& curve) {
  const ErrorBar& least = critical(curve).rayleigh;
  std::vector<int> numbers;
  for (const OnsetPoint& p : curve.points)
    if (p.wave.number != critical(curve).wave.number &&
        p.rayleigh.value - p.rayleigh.half_width < least.value + least.half_width)
      numbers.push_back(p.wave.number);
  if (numbers.empty()) return "";
  return fmt::format("  error bars overlap    mode {} may be the critical one: refine the grid\n",
                     fmt::join(numbers, ", "));
}

std::string with_error(const ErrorBar& bar) {
  if (bar.half_width == 0) return fmt::format("{:.7g}", bar.value);
  return fmt::format("{:.7g} +- {:.2g}", bar.value, bar.half_width);
}

}  // namespace

std::vector<SummaryEntry> onset_entries(const Case& c, const OnsetCurve& curve) {
  const OnsetPoint& p = critical(curve);
  return {
      {"title", c.title, "", "of the case"},
      {"end", std::string(curve.interrupted ? "interrupted" : "complete"), "",
       "why the search stopped"},
      {"critical_rayleigh", p.rayleigh.value, "", "least neutral Rayleigh number"},
      {"critical_rayleigh_error", p.rayleigh.half_width, "", "half width of its error bar"},
      {"critical_mode", static_cast<long>(p.wave.number), "",
       "whole waves along a periodic shell, half waves between reflecting sides"},
      {"critical_wavelength", wavelength(p.wave), "d", "at mid-depth"},
      {"bracketed", static_cast<long>(curve.bracketed), "",
       "1 when larger Rayleigh numbers were found on both sides"},
      {"times_critical", times_critical(c, curve), "", "the case's Rayleigh number over critical"},
      {"radial_cells", static_cast<long>(curve.grids.back()), "", "of the finest grid"},
  };
}

std::string onset_for_people(const Case& c, const OnsetCurve& curve, double seconds,
                             const std::string& folder) {
  const OnsetPoint& p = critical(curve);
  return fmt::format(
      "{}onset of convection{}: modes {} to {} on {} in {}\n{}"
      "  critical Rayleigh     {}\n"
      "  critical mode         {}; wavelength {:.4g} d at mid-depth\n"
      "{}"
      "  this case             {}\n{}"
      "  results in            {}\n",
      c.title.empty() ? "" : c.title + "\n", curve.interrupted ? ", interrupted" : "",
      curve.points.front().wave.number, curve.points.back().wave.number, grids_text(curve),
      duration_text(seconds), table_text(curve), with_error(p.rayleigh),
      counted(c.model.shell, p.wave), wavelength(p.wave), rivals(curve), verdict(c, curve),
      caution(curve), folder);
}

}  // namespace lidwright
