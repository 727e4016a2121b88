#include <fmt/format.h>

#include <algorithm>

#include "app/check_text.hpp"

namespace lidwright {
namespace {

std::string law_line(const LawResult& law) {
  const std::string number = short_number(law.low) == short_number(law.high)
                                 ? short_number(law.low)
                                 : short_number(law.low) + " - " + short_number(law.high);
  constexpr std::size_t columns = 13;
  std::string text = check_line(number, law.name, columns);
  text += check_line("", std::string("for: ") + law.range, columns);
  if (!law.outside.empty()) text += check_line("", "here: " + law.outside, columns);
  return text;
}

/// How the headline's numbers come from the list.
std::string spread_line(const Prediction& p) {
  const auto low = [](const LawResult& a, const LawResult& b) { return a.low < b.low; };
  const auto high = [](const LawResult& a, const LawResult& b) { return a.high < b.high; };
  const double least = std::min_element(p.laws.begin(), p.laws.end(), low)->low;
  const double largest = std::max_element(p.laws.begin(), p.laws.end(), high)->high;
  if (p.low == least && p.high == largest) return "";
  const bool from_one = p.low == 1 && least > 1.1;
  return check_line("the spread",
                    fmt::format("{} to {}: {} to the largest, a tenth wider", short_number(p.low),
                                short_number(p.high),
                                from_one ? "from conduction, near onset," : "from the least"));
}

std::string in_kilometres(const CheckFindings& f, double length) {
  return f.c.body ? fmt::format(" ({} km)", short_number(length * thickness(*f.c.body) / 1000))
                  : "";
}

std::string advice(const CheckFindings& f) {
  const Grid& now = f.c.model.grid;
  if (!f.finer && !enough(f.layers))
    return fmt::format(
        "none of the grids tried (to {:.0f} times the cells, refinement {:.0f}) has {:.0f} cells a "
        "layer",
        most_cells, most_refinement, enough_cells);
  if (!f.finer)
    return fmt::format("[grid] radial = {} suffices for {:.0f} cells a layer", now.radial,
                       enough_cells);
  const Grid& g = *f.finer;
  std::string text =
      fmt::format("{:.0f} cells a layer (common practice) take [grid]", enough_cells);
  if (g.radial != now.radial)
    text += fmt::format(" radial = {}, lateral = {},", g.radial, g.lateral);
  if (g.radial_grading.first != now.radial_grading.first)
    text += fmt::format(" inner_refinement = {},", g.radial_grading.first);
  if (g.radial_grading.last != now.radial_grading.last)
    text += fmt::format(" outer_refinement = {},", g.radial_grading.last);
  text.back() = '.';
  return text;
}

}  // namespace

std::string laws_text(const CheckFindings& f) {
  if (!f.prediction.foretold()) return "";
  std::string text = "\nPUBLISHED LAWS, Nusselt number of the outer wall in settled convection\n";
  for (const LawResult& law : f.prediction.laws) text += law_line(law);
  text += spread_line(f.prediction);
  if (!f.prediction.unlike.empty()) text += check_line("none was made for", f.prediction.unlike);
  const HeatBalance& b = f.prediction.balance;
  if (b.settling > 0)
    text +=
        check_line(f.prediction.regime == Regime::Stagnant ? "drips, quieter end"
                   : f.prediction.laws.size() > 1          ? "middle of the spread"
                                                           : "this law",
                   fmt::format("interior at {} DeltaT{}; settles in about {} d^2/kappa",
                               short_number(b.interior),
                               b.lid > 0 ? fmt::format(", lid {} d thick{}", short_number(b.lid),
                                                       in_kilometres(f, b.lid))
                                         : "",
                               short_number(b.settling)));
  return text;
}

std::string layers_text(const CheckFindings& f) {
  if (f.layers.empty()) return "";
  std::string text = "\nBOUNDARY LAYERS foreseen, on this grid\n";
  for (const LayerOnGrid& l : f.layers)
    text += check_line(word(l.place),
                       fmt::format("{} d{}, {:.1f} cells across", short_number(l.thickness),
                                   in_kilometres(f, l.thickness), l.cells));
  return text + check_line("advice", advice(f));
}

}  // namespace lidwright
