#pragma once

#include <functional>
#include <map>
#include <string>
#include <vector>

#include "study/benchmark.hpp"

/// Quantities of a problem with their error bars, from grids refined by two.
namespace lidwright {

struct Measured {
  std::map<std::string, ErrorBar> bars;
  StoredTemperature end;  ///< Settle, Relax: of the steady state on the finest grid
};

/// How the work is watched.
struct Watch {
  std::function<void(const std::string&)> say = [](const std::string&) {};  ///< what goes on now
  std::function<bool()> stop = [] { return false; };  ///< has someone asked to stop?
};

/// Thrown when `Watch::stop` said so.
struct Stopped {};

/// The wanted quantities. Runs on the calling rank alone. Throws SolveError and Stopped.
Measured measured(How, const Problem&, int grids, const std::vector<std::string>& wanted,
                  const Watch&);

/// Whether `measured` may be asked for a quantity, and all it may be asked for (where a name has a
/// number in it, with the letter N).
bool measurable(How, const std::string& quantity);
std::vector<std::string> measurable_names(How);

}  // namespace lidwright
