#include "io/verify_table.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>

#include "io/csv_table.hpp"

namespace lidwright {
namespace {

constexpr const char* line = "  {:<25} {:>26} {:>11} {:>24} {:>7}  {:<10} {}\n";

/// Place of the first digit: 2 for 123, -1 for 0.1.
int magnitude(double x) { return static_cast<int>(std::floor(std::log10(std::abs(x)))); }

std::string order_text(const ErrorBar& bar) {
  if (std::isnan(bar.order) || bar.convergence == Convergence::Diverging)
    return word(bar.convergence);
  if (bar.convergence == Convergence::Sound) return fmt::format("{:.2f}", bar.order);
  return fmt::format("{:.2f} {}", bar.order, word(bar.convergence));
}

/// More digits than a table can use are left to the file.
std::string published_text(const Expectation& e) {
  if (!e.spread_stated) return e.text.size() > 14 ? fmt::format("{:.10g}", e.value) : e.text;
  return fmt::format("{} +- {:g}", e.text, e.spread);
}

std::string share_text(int part, int whole) {
  return fmt::format("{} of {} ({:.1f} %)", part, whole, 100.0 * part / whole);
}

std::string csv_number(double x) { return std::isfinite(x) ? fmt::format("{}", x) : ""; }

}  // namespace

std::string with_uncertainty(double value, double half_width) {
  if (!std::isfinite(value)) return "-";
  if (!(half_width > 0)) return fmt::format("{:.10g}", value);
  const int last = magnitude(half_width) - 1;  // two digits of the uncertainty
  const int first = value == 0 ? last : std::max(magnitude(value), last);
  if (first >= -3 && first < 7)
    return fmt::format("{:.{}f} +- {:.1e}", value, std::max(0, -last), half_width);
  return fmt::format("{:.{}e} +- {:.1e}", value, std::max(0, first - last), half_width);
}

std::string verify_head(const Benchmark& b) {
  return fmt::format("\n{}: {}\n", b.name, b.title) +
         fmt::format(line, "quantity", "ours +- error bar", "order", "published +- spread", "apart",
                     "verdict", "value is");
}

std::string verify_row(const Comparison& c) {
  const std::string verdict = c.judged() ? word(c.verdict) : fmt::format("({})", word(c.verdict));
  if (c.verdict == Verdict::NotSolved)
    return fmt::format(line, c.expected.quantity, "-", "-", published_text(c.expected), "-",
                       verdict, word(c.expected.mark));
  return fmt::format(line, c.expected.quantity, with_uncertainty(c.ours.value, c.ours.half_width),
                     order_text(c.ours), published_text(c.expected),
                     fmt::format("{:+.2f}", c.distance), verdict, word(c.expected.mark));
}

std::string verify_close(const Tally& t, double seconds) {
  const int judged = t.agree + t.marginal + t.differ + t.unresolved + t.not_solved;
  std::string text = judged ? fmt::format("\n{} values agree", share_text(t.agree, judged))
                            : "\nno value is judged";
  if (t.marginal) text += fmt::format(", {} marginal", t.marginal);
  if (t.differ) text += fmt::format(", {} differ", t.differ);
  if (t.unresolved) text += fmt::format(", {} unresolved", t.unresolved);
  if (t.not_solved) text += fmt::format(", {} not solved", t.not_solved);
  if (t.doubtful) text += fmt::format("; {} doubtful ones are shown, not judged", t.doubtful);
  if (t.bars)
    text += fmt::format(
        "\nthe error bar holds the published value in {}"
        "\nmedian width of a bar {:.2g} %, median difference {:.2g} % of the published value",
        share_text(t.contained, t.bars), 100 * t.median_width, 100 * t.median_difference);
  return text + fmt::format("\n{:.0f} s\n", seconds);
}

std::string verify_csv(const std::vector<Comparison>& comparisons) {
  std::string text =
      "# lidwright verify: ours (extrapolated, half width of its error bar, observed order, what "
      "the "
      "convergence looked like) beside published values\n"
      "# apart: (ours - published) / sqrt(half_width^2 + spread^2); agrees up to 1, marginal up to "
      "2\n";
  text += text_line({"benchmark", "variant", "settings", "quantity", "ours", "half_width", "order",
                     "convergence", "published", "spread", "spread_stated", "apart", "verdict",
                     "contained", "mark", "source", "definition"});
  for (const Comparison& c : comparisons) {
    const bool solved = c.verdict != Verdict::NotSolved;
    text += text_line(
        {c.benchmark, c.variant, c.settings, c.expected.quantity, csv_number(c.ours.value),
         solved ? csv_number(c.ours.half_width) : "", csv_number(c.ours.order),
         solved ? word(c.ours.convergence) : "", c.expected.text, csv_number(c.expected.spread),
         c.expected.spread_stated ? "yes" : "no", solved ? csv_number(c.distance) : "",
         word(c.verdict), solved && c.contained ? "yes" : "no", word(c.expected.mark),
         c.expected.source, c.expected.definition});
  }
  return text;
}

}  // namespace lidwright
