#include "study/onset_values.hpp"

#include <fmt/format.h>

#include <algorithm>

#include "solver/solve_error.hpp"
#include "study/onset_curve.hpp"

namespace lidwright {
namespace {

OnsetCurve curve(const Problem& p, int first, int last, const Watch& watch) {
  OnsetSettings settings;
  settings.first = first;
  settings.last = last;
  const OnsetCurve found = onset_curve(p.model, settings, [&](int number) {
    watch.say(fmt::format("mode {}", number));
    return !watch.stop();
  });
  if (found.interrupted) throw Stopped{};
  return found;
}

void keep_modes(const OnsetCurve& found, Measured& m) {
  for (const OnsetPoint& point : found.points)
    m.bars[fmt::format("{}{}", mode_prefix, point.wave.number)] = point.rayleigh;
}

ErrorBar critical(const OnsetCurve& found) {
  if (!found.bracketed)
    throw SolveError("the least Rayleigh number lies at an end of the modes that were tried");
  return found.points.at(static_cast<std::size_t>(found.least)).rayleigh;
}

}  // namespace

Measured measured_onset(const Problem& p, const std::vector<std::string>& wanted,
                        const Watch& watch) {
  Measured m;
  if (std::find(wanted.begin(), wanted.end(), critical_name) != wanted.end()) {
    const OnsetCurve found = curve(p, 1, 0, watch);
    m.bars[critical_name] = critical(found);
    keep_modes(found, m);
  }
  for (const std::string& name : wanted)
    if (!m.bars.count(name)) keep_modes(curve(p, mode_named(name), mode_named(name), watch), m);
  return m;
}

int mode_named(const std::string& quantity) {
  if (!quantity.starts_with(mode_prefix)) return 0;
  const std::string number = quantity.substr(mode_prefix.size());
  const bool plain = !number.empty() && number.size() < 5 && number.front() != '0' &&
                     number.find_first_not_of("0123456789") == std::string::npos;
  return plain ? std::stoi(number) : 0;
}

}  // namespace lidwright
