#pragma once

#include <optional>
#include <string>
#include <vector>

#include "io/canvas.hpp"
#include "io/picture.hpp"
#include "io/run_reader.hpp"
#include "io/shell_map.hpp"

/// What is drawn over a field, and the legend that says so.
namespace lidwright {

struct Overlays {
  bool flow_lines = false, arrows = false, lid = false, isotherms = false;
};

/// "flow-lines", "arrows", "lid", "isotherms".
std::vector<std::string> overlay_words();
/// Of some of these. Throws InputError for any other word.
Overlays overlays_of(const std::vector<std::string>& words);

/// Base of the lid: where the temperature, down from the outer wall, first reaches T_i - 2.2 DT_rh
/// (lid_thickness_isotherm in docs/diagnostics.md, column by column), with both from the row of the
/// history nearest to the snapshot. Not a number where one of them is not, or there is no row.
double lid_base_temperature(const HistoryTable&, double time, const std::string& path);
/// Is it not a number since viscosity does not depend on temperature? The row says so: it has the
/// one temperature and not the other.
bool lid_undefined_by_law(const HistoryTable&, double time, const std::string& path);

struct OverlayData {
  Overlays drawn;
  const Geometry& geometry;
  const SavedFields& fields;
  PictureUnits units;
  double lid_temperature = 0;         ///< in the program's units; not a number: there is no lid
  bool lid_undefined_by_law = false;  ///< why it is not a number
  bool stacked = false;               ///< the legend has one line an item, whatever room there is
};

/// Depth of the lid's base in each column of cells; not a number where there is none.
std::vector<double> lid_depths(const OverlayData&);

/// Over the field; `shares` of the colours below decide where a line of flow is light or dark.
void draw_overlays(plot::Canvas&, const plot::ShellMap&, const OverlayData&,
                   const std::vector<double>& shares);

/// Lines that say what was drawn, no wider than asked for; 0 high when nothing was.
double legend_height(plot::Canvas& ruler, const OverlayData&, double width);
void draw_legend(plot::Canvas&, const OverlayData&, const plot::Frame&);

}  // namespace lidwright
