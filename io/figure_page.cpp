#include "io/figure_page.hpp"

#include "io/plot_chart.hpp"

namespace lidwright {
namespace {

using namespace plot;

constexpr double side = 14, line_height = 24;

}  // namespace

FigurePage::FigurePage(const FigureStyle& style, std::string title)
    : style_(style), title_(std::move(title)), measuring_(figure_sheet(style, 10, "")) {}

double FigurePage::title_height() const { return style_.size == FigureSize::Slide ? 46 : 8; }

Frame FigurePage::key_frame() const {
  const double line = line_.empty() ? 0 : line_height;
  return {side, title_height() + line, width() - 2 * side, key_height_};
}

void FigurePage::set_line(const std::string& markup) { line_ = markup; }

void FigurePage::set_key(std::vector<KeyEntry> key) {
  key_ = std::move(key);
  key_height_ = key_.empty() ? 0 : key_height(measuring_, key_, width() - 2 * side) + 2;
}

double FigurePage::top() const { return key_frame().bottom(); }

Frames FigurePage::frames(int across, int down, double shape) const {
  constexpr double left = chart_margins.left + 8, above = 12;
  const double cell = width() / across, wide = cell - left - chart_margins.right - 4;
  const double others = top() + down * (above + chart_margins.bottom);
  Frames frames{{}, sheet_height(style_.size, others + down * shape * wide)};
  const double high = (frames.height - others) / down;
  for (int row = 0; row < down; ++row)
    for (int column = 0; column < across; ++column)
      frames.all.push_back({left + column * cell,
                            top() + above + row * (high + above + chart_margins.bottom), wide,
                            high});
  return frames;
}

Canvas& FigurePage::begin(double height) {
  canvas_.emplace(figure_sheet(style_, height, title_));
  if (style_.size == FigureSize::Slide)
    canvas_->text(as_markup(title_), {side, 12}, {0, 0},
                  {22, ink, Weight::Bold, width() - 2 * side});
  if (!line_.empty())
    canvas_->text(line_, {side, title_height()}, {0, 0},
                  {15, faint_ink, Weight::Normal, width() - 2 * side});
  draw_key(*canvas_, key_, key_frame());
  return *canvas_;
}

}  // namespace lidwright
