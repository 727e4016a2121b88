#pragma once

#include <optional>
#include <string>
#include <vector>

#include "io/figure_sheet.hpp"
#include "io/plot_marks.hpp"

/// The page of a chart figure: on a slide the title above, then the key, then charts.
namespace lidwright {

/// Where charts of one size stand, row by row.
struct Frames {
  std::vector<plot::Frame> all;
  double height;  ///< of the page
};

class FigurePage {
 public:
  /// `title`: plain text; on paper it stands in the file's properties only.
  FigurePage(const FigureStyle&, std::string title);

  /// A line below the title, also on paper. Markup; empty: none. Before `begin`.
  void set_line(const std::string& markup);
  /// Before `begin`.
  void set_key(std::vector<plot::KeyEntry>);

  double width() const { return sheet_width(style_.size); }
  /// Where charts may begin.
  double top() const;

  /// Room for charts with labels on both axes; `shape` is height over width of one on paper.
  Frames frames(int across, int down, double shape) const;

  /// The page, title and key drawn, as high as wished (a slide is as high as it is).
  plot::Canvas& begin(double height);

 private:
  double title_height() const;
  plot::Frame key_frame() const;

  FigureStyle style_;
  std::string title_, line_;
  std::vector<plot::KeyEntry> key_;
  double key_height_ = 0;
  plot::Canvas measuring_;
  std::optional<plot::Canvas> canvas_;
};

}  // namespace lidwright
