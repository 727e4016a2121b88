#include "io/figure_branch.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <filesystem>

#include "io/atomic_file.hpp"
#include "io/figure_page.hpp"
#include "io/figure_words.hpp"
#include "io/picture_layout.hpp"
#include "io/plot_marks.hpp"

namespace lidwright {
namespace {

using namespace plot;

constexpr double outer_width = 3.5, inner_width = 1.8;

using Rows = std::vector<BranchRow>;
using Quantity = double HistoryRow::*;

Stability stability_of(const BranchRow& r) {
  if (std::isnan(r.leading.growth)) return Stability::Unknown;
  return r.leading.growth > 0 ? Stability::Unstable : Stability::Stable;
}

/// Where between two points the growth rate is 0; halfway when one is not known.
double change_between(const BranchRow& p, const BranchRow& q) {
  const double share = p.leading.growth / (p.leading.growth - q.leading.growth);
  return std::isfinite(share) ? share : 0.5;
}

std::vector<double> parameters(const Rows& rows) {
  std::vector<double> all;
  for (const BranchRow& r : rows) all.push_back(r.parameter);
  return all;
}

std::vector<double> values(const Rows& rows, Quantity quantity) {
  std::vector<double> all;
  for (const BranchRow& r : rows) all.push_back(r.row.*quantity);
  return all;
}

double at_place(const std::vector<double>& numbers, double place) {
  const auto k = std::min(static_cast<std::size_t>(place), numbers.size() - 1);
  const double share = place - static_cast<double>(k);
  return share == 0 ? numbers[k] : numbers[k] + share * (numbers[k + 1] - numbers[k]);
}

struct Drawn {
  Quantity quantity;
  Colour colour;
  std::string name;
  double width, radius;
};

/// Do both walls lose the same heat all along? Then they are one curve.
bool walls_agree(const Rows& rows) {
  return std::all_of(rows.begin(), rows.end(), [](const BranchRow& r) {
    return std::abs(r.row.nusselt_outer - r.row.nusselt_inner) <= 1e-3 * r.row.nusselt_outer;
  });
}

std::vector<Drawn> nusselt_numbers(const Rows& rows) {
  if (walls_agree(rows))
    return {{&HistoryRow::nusselt_outer, curve_colour(0), "both walls", 2.5, 5}};
  return {{&HistoryRow::nusselt_outer, curve_colour(0), "outer wall", outer_width, 6},
          {&HistoryRow::nusselt_inner, curve_colour(1), "inner wall", inner_width, 3.5}};
}

bool any(const Rows& rows, Stability s) {
  return std::any_of(rows.begin(), rows.end(),
                     [&](const BranchRow& r) { return stability_of(r) == s; });
}

bool any_known(const Rows& rows) {
  return any(rows, Stability::Stable) || any(rows, Stability::Unstable);
}

bool any_backwards(const Rows& rows) {
  return std::any_of(rows.begin(), rows.end(), [](const BranchRow& r) { return r.backwards; });
}

Chart chart_of(const SavedBranch& b, const std::vector<Drawn>& drawn, const Label& label,
               const Frame& f) {
  Chart c;
  c.x_label = {as_markup(b.parameter.key), as_markup(b.parameter.unit)};
  c.y_label = label;
  c.x = axis_of_values(range_of(parameters(b.rows)),
                       b.parameter.logarithmic ? Spacing::Logarithmic : Spacing::Linear,
                       ticks_across(f), 0.04);
  std::vector<double> all;
  for (const Drawn& d : drawn)
    for (const double v : values(b.rows, d.quantity)) all.push_back(v);
  const Interval range = range_of(all);
  const bool decades = spans_decades(range);
  c.y = axis_of_values(range, decades ? Spacing::Logarithmic : Spacing::Linear, ticks_upright(f),
                       0.08);
  if (std::none_of(all.begin(), all.end(), [](double v) { return std::isfinite(v); }))
    c.note = "not defined on this branch";
  return c;
}

void add_curves(Chart& c, const Rows& rows, const Drawn& d) {
  const std::vector<double> x = parameters(rows), y = values(rows, d.quantity);
  for (const BranchPiece& piece : pieces_of(rows)) {
    Curve curve{{}, {}, d.colour, "", d.width, pattern_of(piece.stability, any_known(rows))};
    for (const double place : piece.place) {
      curve.x.push_back(at_place(x, place));
      curve.y.push_back(at_place(y, place));
    }
    c.curves.push_back(std::move(curve));
  }
}

/// What stands on the curves of one quantity.
class Marks {
 public:
  Marks(Canvas& canvas, const Chart& chart, const Frame& f, const Rows& rows, const Drawn& d)
      : canvas_(canvas), chart_(chart), frame_(f), rows_(rows), drawn_(d) {}

  void draw_all() {
    for (const BranchRow& r : rows_)
      if (r.asked_for) symbol(r);
    for (const std::size_t k : folds_of(rows_))
      draw_symbol(canvas_, Symbol::Diamond, place(rows_[k]), 5, curve_colour(2));
    for (std::size_t k = 1; k < rows_.size(); ++k)
      if (middle_of_backward_stretch(k)) arrow(rows_[k - 1], rows_[k]);
  }

 private:
  Place place(const BranchRow& r) const {
    return on_page(chart_, frame_, r.parameter, r.row.*drawn_.quantity);
  }
  void symbol(const BranchRow& r) {
    const Place p = place(r);
    if (!std::isfinite(p.x) || !std::isfinite(p.y)) return;
    const bool unstable = stability_of(r) == Stability::Unstable;
    draw_symbol(canvas_, unstable ? Symbol::Ring : Symbol::Dot, p, drawn_.radius, drawn_.colour);
  }
  bool middle_of_backward_stretch(std::size_t k) const {
    std::size_t from = k, to = k;
    while (from > 0 && rows_[from - 1].backwards) --from;
    while (to < rows_.size() && rows_[to].backwards) ++to;
    return rows_[k].backwards && k == (from + to) / 2;
  }
  void arrow(const BranchRow& from, const BranchRow& to) {
    const Place p = place(from), q = place(to);
    draw_arrow_head(canvas_, {(p.x + q.x) / 2, (p.y + q.y) / 2}, q.x - p.x, q.y - p.y, 8,
                    drawn_.colour);
  }

  Canvas& canvas_;
  const Chart& chart_;
  const Frame& frame_;
  const Rows& rows_;
  const Drawn& drawn_;
};

std::vector<KeyEntry> key_of(const Rows& rows) {
  std::vector<KeyEntry> key;
  for (const Drawn& d : nusselt_numbers(rows))
    key.push_back({d.name, d.colour, d.width, Pattern::Solid});
  if (any(rows, Stability::Stable)) key.push_back({"stable", ink, 2, Pattern::Solid, Symbol::Dot});
  if (any(rows, Stability::Unstable))
    key.push_back({"unstable", ink, 2, Pattern::Dashed, Symbol::Ring});
  if (any_known(rows) && any(rows, Stability::Unknown))
    key.push_back({"stability not computed", ink, 2, Pattern::Dotted});
  if (!folds_of(rows).empty())
    key.push_back({"fold", curve_colour(2), 0, Pattern::Solid, Symbol::Diamond});
  if (any_backwards(rows))
    key.push_back({"parameter turned back", ink, 2, Pattern::Solid, Symbol::ArrowHead});
  return key;
}

std::string line_of(const SavedBranch& b) {
  const auto asked =
      std::count_if(b.rows.begin(), b.rows.end(), [](const BranchRow& r) { return r.asked_for; });
  return fmt::format("{} steady states at values asked for (dots), {} on the way", asked,
                     static_cast<std::ptrdiff_t>(b.rows.size()) - asked);
}

void draw_chart(Canvas& canvas, const SavedBranch& b, const std::vector<Drawn>& drawn,
                const Label& label, const Frame& f) {
  Chart c = chart_of(b, drawn, label, f);
  for (const Drawn& d : drawn) add_curves(c, b.rows, d);
  draw(canvas, c, f);
  if (!c.note.empty()) return;
  const Saved saved(canvas);
  for (const Drawn& d : drawn) Marks(canvas, c, f, b.rows, d).draw_all();
}

}  // namespace

Pattern pattern_of(Stability s, bool any_known) {
  if (s == Stability::Unstable) return Pattern::Dashed;
  return s == Stability::Unknown && any_known ? Pattern::Dotted : Pattern::Solid;
}

std::vector<BranchPiece> pieces_of(const Rows& rows) {
  std::vector<BranchPiece> pieces;
  for (std::size_t k = 0; k < rows.size(); ++k) {
    const Stability s = stability_of(rows[k]);
    if (pieces.empty() || pieces.back().stability != s) {
      if (!pieces.empty()) {
        const double change = static_cast<double>(k - 1) + change_between(rows[k - 1], rows[k]);
        pieces.back().place.push_back(change);
        pieces.push_back({s, {change}});
      } else {
        pieces.push_back({s, {}});
      }
    }
    pieces.back().place.push_back(static_cast<double>(k));
  }
  return pieces;
}

std::vector<std::size_t> folds_of(const Rows& rows) {
  std::vector<std::size_t> folds;
  for (std::size_t k = 1; k + 1 < rows.size(); ++k) {
    const double before = rows[k].parameter - rows[k - 1].parameter,
                 after = rows[k + 1].parameter - rows[k].parameter;
    if (before * after < 0) folds.push_back(k);
  }
  return folds;
}

std::string branch_figure(const SavedBranch& b, const std::string& title,
                          const FigureStyle& style) {
  FigurePage page(style, title.empty() ? "Steady states" : title);
  page.set_line(line_of(b));
  page.set_key(key_of(b.rows));
  const bool stacked = style.size == FigureSize::OneColumn;
  const Frames frames = page.frames(stacked ? 1 : 2, stacked ? 2 : 1, 0.6);
  Canvas& canvas = page.begin(frames.height);
  draw_chart(canvas, b, nusselt_numbers(b.rows), {"Nusselt number", ""}, frames.all[0]);
  draw_chart(canvas, b, {{&HistoryRow::velocity_rms, curve_colour(2), "", 2, 5}},
             {"rms velocity", unit_markup("kappa/d", Shape::Box)}, frames.all[1]);
  return canvas.bytes();
}

std::string branch_figure(const SavedRun& run, const FigureStyle& style) {
  const std::string path = run.paths.branch();
  if (!std::filesystem::exists(path))
    throw InputError(
        fmt::format("{}: holds no branch.csv; name a folder of settle --along", run.paths.folder));
  return branch_figure(read_branch(read_whole_file(path), path), run.settings.title, style);
}

}  // namespace lidwright
