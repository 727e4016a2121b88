#pragma once

#include <optional>
#include <string>
#include <vector>

#include "mesh/geometry.hpp"
#include "physics/scales.hpp"
#include "solver/settle.hpp"
#include "solver/snapshot.hpp"

/// A run at one look, as a PNG: the temperature and lines of flow in the shell, radial profiles,
/// and the heat flow so far. What is in it: docs/run_folder.md.
namespace lidwright {

inline constexpr int picture_width = 1600, picture_height = 900;

/// Columns of history.csv that a picture shows.
struct HeatFlowHistory {
  std::vector<double> time, nusselt_inner, nusselt_outer;
  std::vector<double> temperature_inner, temperature_outer;  ///< means over the walls
};

/// From the text of a history; a torn last row is left out. Throws InputError naming `path` when it
/// is damaged or a column is missing.
HeatFlowHistory heat_flow_history(const std::string& text, const std::string& path);

/// A quantity as a picture shows it: (value of the program) * scale + offset, with its unit.
struct Shown {
  double scale = 1, offset = 0;
  std::string unit;  ///< Pango markup
  double operator()(double value) const { return scale * value + offset; }
  std::vector<double> operator()(const std::vector<double>&) const;
};

/// The program's own units, or those of a body: km, K, Myr or Gyr, mm/yr, Pa s.
struct PictureUnits {
  Shown length, temperature, time, velocity, viscosity;
};
PictureUnits picture_units(const std::optional<Body>&);

/// Everything that a picture shows, on one rank.
struct PictureContents {
  std::string title;
  long step = 0;
  double time = 0;
  const Geometry& geometry;
  std::vector<double> temperature;      ///< cells, column by column
  std::vector<double> stream_function;  ///< corners, column by column
  RadialProfiles profiles;
  HeatFlowHistory history;
  PictureUnits units;
  std::string state = {};  ///< markup that stands instead of time and step; empty: not a state
  WallTrace inner = {}, outer = {};  ///< of such a state: their heat flux is shown
};

/// Temperatures that the colours span: those of all cells and of both walls.
struct TemperatureSpan {
  double low, high;
};
TemperatureSpan temperature_span(const PictureContents&);

/// The bytes of a PNG file.
std::string picture(const PictureContents&);

/// Draws a snapshot with the history that is in a file, on the first rank, and writes it
/// atomically. Collective; throws OutputError on all ranks.
void draw_run(const std::string& path, const Snapshot&, const std::string& history_path,
              const std::string& title, const PictureUnits&);

/// Draws a steady state in the same way, with the heat flux along the walls. `at`: what is said of
/// it beside its numbers, plain text; may be empty.
void draw_state(const std::string& path, const SteadyState&, const std::string& at,
                const std::string& title, const PictureUnits&);

/// File of picture n, relative to the run folder.
std::string picture_name(std::size_t n);

}  // namespace lidwright
