#include "io/page_headline.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <array>
#include <cmath>
#include <limits>

#include "io/json.hpp"
#include "io/page_words.hpp"
#include "io/plain_text.hpp"

namespace lidwright::page {
namespace {

constexpr double unknown = std::numeric_limits<double>::quiet_NaN();

/// A column of the history as the headline calls it. `wall`: 1 and -1 for heat flows that are given
/// over the outer and the inner wall's area.
struct Asked {
  const char* column;
  const char* label;
  const char* unit;
  int wall = 0;
  bool absolute = false;
};

constexpr std::array<Asked, 8> asked{{
    {"heat_flow_outer", "Heat flux, outer wall", "k DeltaT/d", 1},
    {"heat_flow_inner", "Heat flux, inner wall", "k DeltaT/d", -1},
    {"nusselt_outer", "Nusselt number, outer wall", "1"},
    {"nusselt_inner", "Nusselt number, inner wall", "1"},
    {"velocity_rms", "Rms velocity", "kappa/d"},
    {"temperature_mean", "Mean temperature", "DeltaT", 0, true},
    {"lid_thickness_velocity", "Lid thickness, by velocity", "d"},
    {"mobility", "Mobility", "1"},
}};

double area_for(const Asked& a, const Model& m) {
  if (a.wall == 0) return 1;
  return Geometry(m.shell, m.grid).wall_area(a.wall > 0 ? m.grid.radial : 0);
}

const char* where_from(Finding f) {
  return f == Finding::Steady ? "steady; the error is the range of the last half" : "";
}

Figure figure_of(const Asked& a, const NamedSummary& s, double last, double area) {
  const RecordSummary& r = s.record;
  Figure f{a.label, last / area, unknown, a.unit, a.absolute, "", r.enough()};
  if (r.enough()) {
    f.value = r.mean / area;
    f.error = r.error / area;
    f.note = where_from(r.finding);
  } else {
    f.note = fmt::format("last value; no mean: {}", r.words);
  }
  return f;
}

std::string stated_json(double value, double error, const std::string& of) {
  const Stated s = stated(value, error);
  return json::object(
      {{"value", json::text(s.value)}, {"error", json::text(s.error)}, {"unit", json::text(of)}});
}

std::string body_json(const Figure& f, const std::optional<Body>& body) {
  const auto in = body ? in_body(f.unit, *body, f.absolute) : std::nullopt;
  if (!in || !std::isfinite(f.value)) return "null";
  return stated_json(in->scale * f.value + in->offset, in->scale * f.error, in->unit);
}

std::string shares_text(const RegimeVerdict& v) {
  std::vector<std::string> all;
  for (const auto& [regime, share] : v.shares)
    all.push_back(fmt::format("{} {:.2f}", word(regime), share));
  return fmt::format("{}", fmt::join(all, ", "));
}

/// Half width of the bar of a quantity; nan: it has none.
std::pair<double, double> bar_of(const NumberTable& bars, const std::string& quantity) {
  const auto* value = bars.find(quantity + " value");
  const auto* half = bars.find(quantity + " half_width");
  if (!value || !half) return {unknown, unknown};
  return {value->front(), half->front()};
}

/// The lines of error_bars.csv as one row: "nusselt_outer value", "nusselt_outer half_width".
NumberTable bars_by_name(const std::string& csv) {
  NumberTable t;
  std::vector<std::string> head;
  std::size_t at = 0;
  for (std::size_t end; (end = csv.find('\n', at)) != std::string::npos; at = end + 1) {
    const std::string line = csv.substr(at, end - at);
    if (line.empty() || line.front() == '#') continue;
    const std::vector<std::string> fields = names_in(line);
    if (head.empty()) {
      head = fields;
      continue;
    }
    for (std::size_t k = 2; k + 1 < std::min(fields.size(), head.size()); ++k) {
      t.names.push_back(fields[0] + " " + head[k]);
      t.columns.push_back({std::strtod(fields[k].c_str(), nullptr)});
    }
  }
  return t;
}

/// Of a run that goes on or was killed; the way so far may stand in its tables.
Verdict not_finished() {
  return {"not finished", "The run has written no summary yet.", {}, Tone::Doubtful};
}

}  // namespace

const char* word(Tone t) {
  if (t == Tone::Good) return "good";
  return t == Tone::Doubtful ? "doubtful" : "plain";
}

std::string json_of(const Verdict& v) {
  std::vector<std::string> evidence = v.evidence;
  for (std::string& line : evidence) line = replaced(line, "+-", "±");
  return json::object({{"heading", json::text(v.heading)},
                       {"sentence", json::text(v.sentence)},
                       {"evidence", json::texts(evidence)},
                       {"tone", json::text(word(v.tone))}});
}

std::string json_of(const std::vector<Figure>& figures, const std::optional<Body>& body) {
  std::vector<std::string> all;
  for (const Figure& f : figures)
    all.push_back(json::object({{"label", json::text(f.label)},
                                {"number", stated_json(f.value, f.error, unit(f.unit))},
                                {"body", body_json(f, body)},
                                {"note", json::text(f.note)},
                                {"known", json::truth(f.known)}}));
  return json::list(all);
}

Verdict march_verdict(const RunStatistics& s, bool running) {
  const RegimeVerdict& v = s.lid;
  const std::string so_far = running ? " so far" : "";
  if (v.regime == Regime::Undecided) {
    std::string sentence =
        fmt::format("The regime of the lid is undecided{}: {}.", so_far,
                    v.why_undecided.empty() ? "too little is known" : v.why_undecided);
    if (v.likeliest != Regime::Undecided)
      sentence += fmt::format(" As far as it goes: {}, in {:.2f} of the resamples.",
                              word(v.likeliest), v.probability);
    return {"undecided", sentence, v.evidence, Tone::Doubtful};
  }
  std::string sentence = fmt::format(
      "Probability {:.2f}{}, by resampling the settled part of the "
      "record.",
      v.probability, so_far);
  if (v.shares.size() > 1) sentence += fmt::format(" Shares of the resamples: {}.", shares_text(v));
  return {word(v.regime), sentence, v.evidence, Tone::Good};
}

std::string soundness(const RunStatistics& s) {
  std::vector<std::string> why;
  std::size_t count = 0;
  for (const Asked& a : asked) {
    const NamedSummary* r = s.find(a.column);
    if (!r) continue;
    ++count;
    if (!r->record.enough()) why.push_back(r->record.words);
  }
  if (why.empty())
    return fmt::format("All {} means are good for use, within their errors (95 %).", count);
  if (why.size() == count && std::count(why.begin(), why.end(), why.front()) == std::ssize(why))
    return fmt::format("No mean is good for use yet: {}.", why.front());
  return fmt::format(
      "{} of {} means are good for use, within their errors (95 %); the others say "
      "what they lack.",
      count - why.size(), count);
}

std::vector<Figure> march_figures(const SavedRun& run, const RunStatistics& s) {
  std::vector<Figure> figures;
  for (const Asked& a : asked) {
    const NamedSummary* r = s.find(a.column);
    const std::vector<double>* column = run.history->find(a.column);
    if (r && column && !column->empty())
      figures.push_back(figure_of(a, *r, column->back(), area_for(a, run.settings.model)));
  }
  return figures;
}

Verdict settle_verdict(const TomlSection& summary, const std::string& key) {
  if (summary.entries.empty()) return not_finished();
  if (!key.empty())
    return {fmt::format("{} steady states along {}", summary["points"], key),
            fmt::format("Walk along the branch: {}. {} of the states stand at values that were "
                        "asked for, the others on the way.",
                        summary["end"], summary["asked_for"]),
            {},
            summary["end"] == "complete" ? Tone::Good : Tone::Doubtful};
  Verdict v;
  v.heading = summary["end"].empty() ? "no end yet" : summary["end"];
  const bool steady = v.heading == "steady" || v.heading == "does not convect";
  v.tone = steady ? Tone::Good : Tone::Doubtful;
  v.sentence = fmt::format("{} x {} cells, {} Newton steps{}.", summary["radial"],
                           summary["lateral"], summary["newton_steps"],
                           summary["remark"].empty() ? "" : "; " + summary["remark"]);
  const std::string stable = summary["stable"];
  if (stable == "1") v.evidence.push_back("Stable: small disturbances die away.");
  if (stable == "0")
    v.evidence.push_back("Unstable: a small disturbance grows, a march would leave this state.");
  if (stable.empty() && steady)
    v.evidence.push_back(
        "Whether small disturbances grow was not asked (settle --stability says it).");
  return v;
}

std::vector<Figure> settle_figures(const SavedRun& run, const TomlSection& summary,
                                   const std::string& bars_csv) {
  const NumberTable bars = bars_by_name(bars_csv);
  std::vector<Figure> figures;
  for (const Asked& a : asked) {
    const double value = summary.number(a.column), area = area_for(a, run.settings.model);
    if (summary[a.column].empty()) continue;
    const auto [extrapolated, half] = bar_of(bars, a.column);
    const bool bar = std::isfinite(half);
    figures.push_back({a.label, (bar ? extrapolated : value) / area, half / area, a.unit,
                       a.absolute,
                       bar ? fmt::format("extrapolated to cells of no size; {} on this grid",
                                         digits(value / area, 6))
                           : "on this grid",
                       std::isfinite(value)});
  }
  return figures;
}

std::vector<Figure> branch_figures(const NumberTable& branch, const std::string& key) {
  std::vector<Figure> figures;
  const auto* parameter = branch.find("parameter");
  if (!parameter || parameter->empty()) return figures;
  for (const bool last : {false, true})
    for (const auto& [name, label, of] :
         {std::tuple{"nusselt_outer", "Nusselt number, outer wall", "1"},
          std::tuple{"velocity_rms", "Rms velocity", "kappa/d"}})
      if (const auto* column = branch.find(name))
        figures.push_back({label, last ? column->back() : column->front(), unknown, of, false,
                           fmt::format("at {} = {}", key,
                                       with_unit(last ? parameter->back() : parameter->front(),
                                                 unit(branch.units.front()))),
                           true});
  return figures;
}

Verdict onset_verdict(const TomlSection& summary) {
  const double times = summary.number("times_critical");
  if (summary.entries.empty()) return not_finished();
  if (!std::isfinite(times))
    return {"not known",
            "The summary has no Rayleigh number over the critical one.",
            {},
            Tone::Doubtful};
  Verdict v;
  v.heading = times > 1 ? "this case convects" : "this case conducts";
  v.sentence = fmt::format(
      "Its Rayleigh number is {} times the critical one, {}. The mode that sets in first has "
      "number "
      "{}.",
      digits(times), compact(summary.number("critical_rayleigh")), summary["critical_mode"]);
  const bool bracketed = summary["bracketed"] == "1";
  v.evidence.push_back(
      bracketed ? "Larger Rayleigh numbers were found on both sides of the least."
                : "The least stands at the end of the modes that were looked at: shorter "
                  "or longer waves may set in earlier (onset --modes).");
  const double error = summary.number("critical_rayleigh_error") /
                       summary.number("critical_rayleigh") * std::max(times, 1.0);
  const bool near = std::abs(times - 1) <= error;
  if (near) {
    v.heading = "too near to tell";
    v.evidence.push_back("The error bar holds the case's own Rayleigh number.");
  }
  v.tone = bracketed && !near && summary["end"] == "complete" ? Tone::Good : Tone::Doubtful;
  return v;
}

std::vector<Figure> onset_figures(const TomlSection& s) {
  if (s.entries.empty()) return {};
  const double bar = s.number("critical_rayleigh_error"), error = bar > 0 ? bar : unknown;
  return {{"Critical Rayleigh number", s.number("critical_rayleigh"), error, "1", false,
           error > 0 ? "" : "no error bar was asked for", true},
          {"Rayleigh number over the critical one", s.number("times_critical"), unknown, "1", false,
           "", true},
          {"Critical mode", s.number("critical_mode"), 0, "1", false,
           "whole waves along a periodic shell, half waves between reflecting sides", true},
          {"Critical wavelength", s.number("critical_wavelength"), unknown, "d", false,
           "at mid-depth", true}};
}

}  // namespace lidwright::page
