#pragma once

#include <optional>
#include <string>
#include <vector>

#include "io/colour_map.hpp"
#include "io/picture.hpp"
#include "io/plot_axis.hpp"
#include "io/run_reader.hpp"

/// A field of a snapshot in the units that people see, and the colours that show it. Pure.
namespace lidwright {

enum class FieldKind { Temperature, Viscosity, Speed, StrainRate, Stress };

/// "temperature", "viscosity", "speed", "strain-rate", "stress".
const std::vector<std::string>& field_words();
/// Of such a word; none for any other.
std::optional<FieldKind> field_kind(const std::string& word);

/// What the values of fields span. Several snapshots' spans may be joined.
struct FieldSpan {
  double low = 0, high = 0;  ///< of all cells (of temperatures: and of walls that hold theirs)
  double usual = 0;  ///< 1 cell in 200 is below: what a scale of powers begins with, since a point
                     ///< without strain would take it all
};
FieldSpan joined(const FieldSpan&, const FieldSpan&);

struct ColourRange {
  plot::Interval range;
  plot::Spacing spacing = plot::Spacing::Linear;
};

/// A scale of powers for viscosity, strain rate and stress where they span more than ten; a speed
/// counts from 0. Never empty.
ColourRange colour_range(FieldKind, const FieldSpan&);
/// The range asked for, "LOW:HIGH" in the units shown, spaced as the other. Throws InputError.
ColourRange colour_range_asked(const std::string& range, const ColourRange&);

struct FieldView {
  FieldKind kind;
  plot::Label label;  ///< with the unit
  ColourMap colours;
  std::vector<double> cells;  ///< in that unit, column by column
  FieldSpan span;
};

/// Of the fields and what is drawn over them. Those of an onset are of a disturbance of no scale,
/// whose temperature is no absolute one; its viscosity is that of the state at rest.
PictureUnits field_units(const SavedFields&, RunKind);

/// Stress is the second invariant, 2 * viscosity * strain rate. A body: kelvin, Pa s, mm/yr, 1/s,
/// MPa; none: the program's units.
FieldView field_view(FieldKind, const SavedFields&, const SavedRun&);

/// The cells as places along the colours: 0 low, 1 high, beyond both where the range is passed.
std::vector<double> shares(const FieldView&, const ColourRange&);

}  // namespace lidwright
