#include "app/field_source.hpp"

#include <fmt/format.h>

#include "solver/mantle.hpp"

namespace lidwright {
namespace {

/// An onset's mode may stand on more columns than the case has.
Model model_of(const SavedFields& fields) {
  Model model = fields.settings.model;
  model.grid = fields.grid;
  return model;
}

std::string moment(const SavedRun& run, std::size_t snapshot) {
  if (run.kind != RunKind::March) return snapshot_words(run, snapshot);
  const Shown time = picture_units(run.settings.body).time;
  return fmt::format("time {} {}", plot::four_digits(time(run.snapshots[snapshot].time)),
                     time.unit);
}

}  // namespace

FieldSource::FieldSource(const FigurePlan& plan, std::size_t snapshot)
    : plan_(plan),
      snapshot_(snapshot),
      fields_(read_fields(plan.run, snapshot)),
      geometry_(make_geometry(model_of(fields_))) {}

std::string FieldSource::draw(const FieldView& view, const ColourRange& colours,
                              bool stacked) const {
  OverlayData overlays{plan_.overlays, *geometry_, fields_, field_units(fields_, plan_.run.kind)};
  overlays.stacked = stacked;
  if (plan_.overlays.lid) {
    const std::string path = plan_.run.paths.history();
    overlays.lid_temperature = lid_base_temperature(*plan_.run.history, fields_.time, path);
    overlays.lid_undefined_by_law = lid_undefined_by_law(*plan_.run.history, fields_.time, path);
  }
  return draw_field(
      {plan_.run.settings.title, moment(plan_.run, snapshot_), view, colours, overlays},
      plan_.style);
}

ColourRange colours_for(const FigureRequest& request, FieldKind kind, const FieldSpan& span) {
  const ColourRange own = colour_range(kind, span);
  return request.range.empty() ? own : colour_range_asked(request.range, own);
}

}  // namespace lidwright
