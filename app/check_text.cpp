#include "app/check_text.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>

#include "app/progress.hpp"

namespace lidwright {
namespace {

constexpr std::size_t name_width = 22, text_width = 54;  // 2 + 22 + 1 + 54 = 79 columns

/// Broken at blanks into lines of the text's width.
std::vector<std::string> broken(const std::string& text, std::size_t width) {
  std::vector<std::string> lines(1);
  std::size_t at = 0;
  while (at < text.size()) {
    const std::size_t end = std::min(text.find(' ', at), text.size());
    const std::string word = text.substr(at, end - at);
    if (!lines.back().empty() && lines.back().size() + 1 + word.size() > width)
      lines.emplace_back();
    lines.back() += (lines.back().empty() ? "" : " ") + word;
    at = end + 1;
  }
  return lines;
}

std::string spread(double low, double high) {
  return brief(low) == brief(high) ? brief(low) : fmt::format("{} to {}", brief(low), brief(high));
}

std::string regime_headline(const Prediction& p) {
  const std::string what = p.regime == Regime::Undecided ? "not foretold" : word(p.regime);
  return p.why.empty() ? what : what + ": " + p.why;
}

std::string nusselt_headline(const CheckFindings& f) {
  const Prediction& p = f.prediction;
  if (!p.foretold()) return "not foretold: no published law applies";
  return fmt::format("{} at the outer wall, by {} law{}", spread(p.low, p.high), p.laws.size(),
                     p.laws.size() == 1 ? "" : "s");
}

std::string time_headline(const CheckFindings& f) {
  if (!f.steps) return "not asked for (--no-steps)";
  return fmt::format("{} for {} steps{}", duration_text(f.forecast.total()),
                     brief(f.forecast.steps),
                     f.ranks > 1 ? fmt::format(", {} ranks", f.ranks) : "");
}

std::string memory_headline(const CheckFindings& f) {
  if (!f.steps) return "not asked for (--no-steps)";
  const double mebibyte = 1024.0 * 1024;
  std::string text = fmt::format("{:.0f} MiB at its peak", f.memory / mebibyte);
  if (f.ranks > 1) text += fmt::format(", {:.0f} on the largest rank", f.memory_largest / mebibyte);
  return text;
}

std::string headline(const CheckFindings& f) {
  const std::string gravest =
      f.cautions.empty() ? "nothing speaks against this case"
                         : fmt::format("{} point{} below; first: {}", f.cautions.size(),
                                       f.cautions.size() == 1 ? "" : "s", f.cautions.front());
  return fmt::format("{}\n", f.c.title.empty() ? f.file : f.c.title) +
         check_line("regime", regime_headline(f.prediction)) +
         check_line("Nusselt number", nusselt_headline(f)) +
         check_line("processor time", time_headline(f)) + check_line("memory", memory_headline(f)) +
         check_line("beware", gravest);
}

std::string cautions_text(const CheckFindings& f) {
  if (f.cautions.empty()) return "";
  std::string text = "\nBEWARE\n";
  for (std::size_t k = 0; k < f.cautions.size(); ++k) {
    const auto lines = broken(f.cautions[k], 74);
    for (std::size_t n = 0; n < lines.size(); ++n)
      text +=
          n == 0 ? fmt::format("{:>3}  {}\n", k + 1, lines[n]) : fmt::format("     {}\n", lines[n]);
  }
  return text;
}

}  // namespace

std::string brief(double x) {
  if (x != 0 && (std::abs(x) >= 1e5 || std::abs(x) < 1e-3)) {
    std::string text = fmt::format("{:.3g}", x);
    const auto e = text.find('e');
    if (e == std::string::npos) return text;
    const int power = std::stoi(text.substr(e + 1));
    return fmt::format("{}e{}", text.substr(0, e), power);
  }
  return std::abs(x) >= 1000 ? fmt::format("{:.0f}", x) : fmt::format("{:.3g}", x);
}

std::string check_line(const std::string& name, const std::string& text) {
  std::string all;
  const auto lines = broken(text, text_width);
  for (std::size_t k = 0; k < lines.size(); ++k)
    all += fmt::format("  {:<{}} {}\n", k == 0 ? name : "", name_width, lines[k]);
  return all;
}

std::string defaults_text(const CheckFindings& f) {
  if (f.defaults.empty()) return "\nDEFAULTS TAKEN\n  none: the file says everything\n";
  std::string text =
      fmt::format("\nDEFAULTS TAKEN, {} keys the file leaves out\n", f.defaults.size());
  for (std::size_t k = 0; k < f.defaults.size();) {
    const std::string table = f.defaults[k].table;
    std::string row;
    for (; k < f.defaults.size() && f.defaults[k].table == table; ++k) {
      const DefaultTaken& d = f.defaults[k];
      row += fmt::format("{}{} = {}{}", row.empty() ? "" : ", ", d.name, d.value,
                         d.unit.empty() || d.unit == "1" ? "" : " " + d.unit);
    }
    text += check_line("[" + table + "]", row);
  }
  return text;
}

std::string check_for_people(const CheckFindings& f) {
  std::string text =
      headline(f) + cautions_text(f) + numbers_text(f) + laws_text(f) + layers_text(f);
  if (f.steps) text += cost_text(f);
  return text + defaults_text(f);
}

}  // namespace lidwright
