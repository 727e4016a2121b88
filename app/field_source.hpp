#pragma once

#include <memory>
#include <string>

#include "app/figure_plan.hpp"
#include "io/figure_field.hpp"

/// A snapshot of a run, read once and drawn in as many ways as asked for.
namespace lidwright {

class FieldSource {
 public:
  /// Throws InputError when its files are missing or damaged.
  FieldSource(const FigurePlan&, std::size_t snapshot);

  FieldView view(FieldKind kind) const { return field_view(kind, fields_, plan_.run); }
  /// The bytes of the figure. `stacked`: the legend has one line an item, so that all pictures of a
  /// film are of one height.
  std::string draw(const FieldView&, const ColourRange&, bool stacked = false) const;

 private:
  const FigurePlan& plan_;
  std::size_t snapshot_;
  SavedFields fields_;
  std::shared_ptr<const Geometry> geometry_;
};

/// The field's colours: those asked for with --range, or what the span makes of them.
ColourRange colours_for(const FigureRequest&, FieldKind, const FieldSpan&);

}  // namespace lidwright
