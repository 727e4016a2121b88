#pragma once

#include <string>

#include "io/field_overlays.hpp"
#include "io/field_view.hpp"
#include "io/figure_sheet.hpp"

/// Figures of fields on the shell's true geometry: docs/figures.md.
namespace lidwright {

struct FieldFigure {
  std::string title;   ///< plain; empty: none
  std::string moment;  ///< markup: when, or which state
  const FieldView& view;
  ColourRange colours;
  OverlayData overlays;
};

/// The bytes of a figure's file.
std::string draw_field(const FieldFigure&, const FigureStyle&);

}  // namespace lidwright
