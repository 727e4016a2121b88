#include "io/field_layout.hpp"

#include <algorithm>
#include <cmath>

#include "io/colour_bar.hpp"

namespace lidwright {
namespace {

using plot::Extent;
using plot::Frame;

constexpr double heading_height = 46, bar_width = 18, bar_gap = 18;
constexpr double legend_gap = 8, least_bar = 110, longest_bar = 440, least_level_bar = 300;
constexpr double tallest_shell = 640;  ///< in print, so that a caption fits below it on its page

/// Width and height that a shell may take, and what is kept beside and below it.
struct Room {
  double width, height;
};
struct Kept {
  double beside, below;
};

Kept for_bar(bool below, const FieldParts& parts) {
  if (below) return {0, bar_gap + bar_width + plot::level_bar_room};
  return {bar_gap + plot::bar_title_room + bar_width + parts.bar_room, 0};
}

double scale_in(const Room& room, const Extent& e) {
  return std::min(room.width / e.width(), room.height / e.height());
}

Room less(const Room& room, const Kept& kept) {
  return {room.width - kept.beside, room.height - kept.below};
}

Frame bar_beside(const Frame& shell, double least_top, double least_bottom) {
  const double room = least_bottom - least_top;
  const double height = std::clamp(shell.height, std::min(least_bar, room), longest_bar);
  return {std::floor(shell.right() + bar_gap + plot::bar_title_room),
          std::floor(shell.middle().y - height / 2), bar_width, std::floor(height)};
}

Frame bar_under(const Frame& shell, const Frame& area) {
  const double width = std::floor(
      std::clamp(0.8 * shell.width, std::min(least_level_bar, area.width - 40), area.width - 40));
  return {std::floor(area.middle().x - std::min(width, 640.0) / 2),
          std::floor(shell.bottom() + bar_gap), std::min(width, 640.0), bar_width};
}

}  // namespace

double page_margin(FigureSize size) { return size == FigureSize::Slide ? 34 : 12; }

FieldLayout field_layout(FigureSize size, const FieldParts& parts) {
  const double margin = page_margin(size), width = sheet_width(size) - 2 * margin;
  const double legend = parts.legend_height > 0 ? legend_gap + parts.legend_height : 0;
  const double top = margin + heading_height;
  // An upright bar's outermost numbers reach half a line past its ends.
  const Room room{width, size == FigureSize::Slide
                             ? sheet_height(size, 0) - top - margin - legend - 8
                             : tallest_shell};
  const double beside = scale_in(less(room, for_bar(false, parts)), parts.shell);
  const double below =
      scale_in(size == FigureSize::Slide ? less(room, for_bar(true, parts)) : room, parts.shell);
  FieldLayout layout;
  layout.bar_below = below > 1.03 * beside;
  const double scale = layout.bar_below ? below : beside;
  const Kept kept = for_bar(layout.bar_below, parts);
  const Room shell{scale * parts.shell.width(), scale * parts.shell.height()};
  const double least = layout.bar_below ? shell.height : std::max(shell.height, least_bar);
  const double taken = least + kept.below;
  const double slack = size == FigureSize::Slide ? std::max(0.0, room.height - taken) / 2 : 0;
  layout.heading = {margin, margin, width, heading_height};
  layout.shell = {margin + (width - shell.width - kept.beside) / 2,
                  top + slack + (least - shell.height) / 2, shell.width, shell.height};
  layout.bar = layout.bar_below ? bar_under(layout.shell, {margin, top, width, taken})
                                : bar_beside(layout.shell, top, top + taken);
  const double end = top + slack + taken + (layout.bar_below ? 0 : 8);
  layout.legend = {margin, end + legend_gap, width, parts.legend_height};
  layout.height = end + legend + margin;
  return layout;
}

}  // namespace lidwright
