#include "app/check_text.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <charconv>
#include <cmath>

#include "app/progress.hpp"

namespace lidwright {
namespace {

constexpr std::size_t line_width = 79;

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
  return short_number(low) == short_number(high)
             ? short_number(low)
             : fmt::format("{} to {}", short_number(low), short_number(high));
}

/// Numbers of a default in six digits, which tell what it is; the exact one is in
/// case_as_read.toml.
std::string tidy(const std::string& value) {
  double number = 0;
  const char* const end = value.data() + value.size();
  const auto read = std::from_chars(value.data(), end, number);
  return read.ec == std::errc() && read.ptr == end ? short_number(number, 6) : value;
}

/// That rock moves at all is taken for granted when onset is not known.
std::string regime_headline(const CheckFindings& f) {
  const Prediction& p = f.prediction;
  std::string text = p.regime == Regime::Undecided ? "not foretold" : word(p.regime);
  if (!p.why.empty()) text += ": " + p.why;
  if (p.regime != Regime::NotConvecting && !std::isfinite(f.times_critical))
    text += "; onset not known";
  return text;
}

std::string nusselt_headline(const CheckFindings& f) {
  const Prediction& p = f.prediction;
  std::string text = p.foretold()
                         ? fmt::format("{} at the outer wall by {} law{}", spread(p.low, p.high),
                                       p.laws.size(), p.laws.size() == 1 ? "" : "s")
                         : "not foretold: no published law applies";
  const double piloted = f.steps ? late_mean(f.pilot).nusselt_outer : std::nan("");
  if (std::isfinite(piloted))
    text += fmt::format("; {} in a coarse pilot's last half", short_number(piloted));
  return text;
}

std::string time_headline(const CheckFindings& f) {
  if (!f.steps) return "not asked for (--no-steps)";
  std::string text = fmt::format("{} for {} steps", cost_duration(f.forecast.total()),
                                 short_number(f.forecast.steps));
  if (f.ranks > 1) text += fmt::format(" on {} ranks", f.ranks);
  if (f.crowded())
    text += fmt::format("; {} if the machine stays as busy as now",
                        cost_duration(f.forecast.total() * f.trial.crowding));
  return text;
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
         check_line("regime", regime_headline(f)) +
         check_line("Nusselt number", nusselt_headline(f)) +
         check_line("time to march", time_headline(f)) + check_line("memory", memory_headline(f)) +
         check_line("beware", gravest);
}

std::string cautions_text(const CheckFindings& f) {
  if (f.cautions.empty()) return "";
  std::string text = "\nBEWARE\n";
  for (std::size_t k = 0; k < f.cautions.size(); ++k) {
    const auto lines = broken(f.cautions[k], line_width - 5);
    for (std::size_t n = 0; n < lines.size(); ++n)
      text +=
          n == 0 ? fmt::format("{:>3}  {}\n", k + 1, lines[n]) : fmt::format("     {}\n", lines[n]);
  }
  return text;
}

}  // namespace

std::string cost_duration(double seconds) {
  return seconds < 100 ? short_number(seconds) + " s" : duration_text(seconds);
}

std::string check_line(const std::string& name, const std::string& text, std::size_t columns) {
  if (name.size() > columns) return fmt::format("  {}\n", name) + check_line("", text, columns);
  std::string all;
  const auto lines = broken(text, line_width - 3 - columns);
  for (std::size_t k = 0; k < lines.size(); ++k)
    all += fmt::format("  {:<{}} {}\n", k == 0 ? name : "", columns, lines[k]);
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
      row += fmt::format("{}{} = {}{}", row.empty() ? "" : ", ", d.name, tidy(d.value),
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
