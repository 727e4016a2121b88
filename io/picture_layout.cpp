#include "io/picture_layout.hpp"

#include <algorithm>
#include <cmath>

#include "io/plot_chart.hpp"

namespace lidwright {
namespace {

using plot::chart_margins;
using plot::Extent;
using plot::Frame;

constexpr double heading = 100;   ///< height of the title and the line below it
constexpr double bar_width = 20;  ///< of the colours
constexpr double bar_left_room = 56, bar_right_room = 66;  ///< for its title and its numbers
constexpr double profile_gap = 22;
constexpr double wide = 2.2;  ///< width over height from which a shell stands above the charts

/// The frame of a chart that fills an area with its labels.
Frame within(const Frame& area) {
  return {area.left + chart_margins.left, area.top + chart_margins.top,
          area.width - chart_margins.left - chart_margins.right,
          area.height - chart_margins.top - chart_margins.bottom};
}

std::vector<Frame> side_by_side(const Frame& f, int n) {
  const double width = (f.width - (n - 1) * profile_gap) / n;
  std::vector<Frame> frames;
  for (int k = 0; k < n; ++k)
    frames.push_back({f.left + k * (width + profile_gap), f.top, width, f.height});
  return frames;
}

Frame bar_beside(const Frame& shell) {
  const double height = std::floor(std::min(shell.height, 440.0));
  return {std::floor(shell.right() + bar_left_room), std::floor(shell.middle().y - height / 2),
          bar_width, height};
}

PictureLayout shell_beside_charts(const Extent& e, const Frame& area, int profiles) {
  const double width =
      std::clamp(area.height * e.width() / e.height(), 0.25 * area.width, 0.51 * area.width);
  PictureLayout layout;
  layout.shell = {area.left, area.top, width, area.height};
  layout.colour_bar = bar_beside(layout.shell);
  const double left = layout.colour_bar.right() + bar_right_room;
  const double split = area.top + 0.54 * area.height;
  const Frame upper = within({left, area.top - 8, area.right() - left, split - area.top + 8});
  layout.profiles = side_by_side(upper, profiles);
  layout.history = within({left, split, area.right() - left, area.bottom() - split});
  return layout;
}

PictureLayout shell_above_charts(const Extent& e, const Frame& area, int profiles) {
  const double most_width = area.width - bar_left_room - bar_width - bar_right_room;
  const double height = std::min(most_width * e.height() / e.width(), 0.5 * area.height);
  PictureLayout layout;
  layout.shell = {area.left, area.top, most_width, height};
  layout.colour_bar = bar_beside(layout.shell);
  const double top = area.top + height + 26, share = profiles == 3 ? 0.58 : 0.48;
  const Frame left = within({area.left, top, share * area.width, area.bottom() - top});
  layout.profiles = side_by_side(left, profiles);
  layout.history = within({area.left + share * area.width + 10, top, (1 - share) * area.width - 10,
                           area.bottom() - top});
  return layout;
}

}  // namespace

PictureLayout layout_for(const Extent& e, const Frame& page, int profiles) {
  const Frame area{page_border, heading, page.width - 2 * page_border,
                   page.height - heading - 0.5 * page_border};
  const bool above = e.width() > wide * e.height();
  return above ? shell_above_charts(e, area, profiles) : shell_beside_charts(e, area, profiles);
}

int ticks_across(const Frame& f) {
  const double room = f.width < 250 ? 46 : 70;  // narrow frames have short labels
  return std::max(2, static_cast<int>(f.width / room));
}
int ticks_upright(const Frame& f) { return std::max(2, static_cast<int>(f.height / 48)); }

}  // namespace lidwright
