#include "io/field_view.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <variant>

#include "io/plain_text.hpp"

namespace lidwright {
namespace {

using plot::Interval;
using plot::Spacing;

/// Of a disturbance: only its pattern means something.
const Shown of_no_scale{1, 0, "to no scale"};

Shown strain_rate_units(const std::optional<Body>& body) {
  if (!body) return {1, 0, "<i>\u03ba</i>/<i>d</i>\u00b2"};
  return {1 / scales_of(*body).time, 0, "1/s"};
}

Shown stress_units(const std::optional<Body>& body) {
  constexpr double megapascal = 1e6;
  if (!body) return {1, 0, "<i>\u03b7</i><sub>ref</sub> <i>\u03ba</i>/<i>d</i>\u00b2"};
  return {scales_of(*body).stress / megapascal, 0, "MPa"};
}

std::vector<double> speeds(const SavedFields& f) {
  std::vector<double> all;
  for (std::size_t k = 0; k < f.velocity_radial.size(); ++k)
    all.push_back(std::hypot(f.velocity_radial[k], f.velocity_lateral[k]));
  return all;
}

std::vector<double> stresses(const SavedFields& f) {
  std::vector<double> all;
  for (std::size_t k = 0; k < f.viscosity.size(); ++k)
    all.push_back(2 * f.viscosity[k] * f.strain_rate[k]);
  return all;
}

struct Quantity {
  std::string name;
  std::vector<double> values;
  Shown units;
};

Quantity quantity(FieldKind kind, const SavedFields& f, RunKind run) {
  const std::optional<Body>& body = f.settings.body;
  const bool scaled = run != RunKind::Onset;
  const PictureUnits units = field_units(f, run);
  switch (kind) {
    case FieldKind::Temperature:
      return {"temperature", f.temperature, units.temperature};
    case FieldKind::Viscosity:
      return {"viscosity", f.viscosity, units.viscosity};
    case FieldKind::Speed:
      return {"speed", speeds(f), units.velocity};
    case FieldKind::StrainRate:
      return {"strain rate", f.strain_rate, scaled ? strain_rate_units(body) : of_no_scale};
    case FieldKind::Stress:
      break;
  }
  return {"stress", stresses(f), scaled ? stress_units(body) : of_no_scale};
}

double usual_least(std::vector<double> values) {
  const auto place = values.begin() + static_cast<std::ptrdiff_t>(values.size() / 200);
  std::nth_element(values.begin(), place, values.end());
  return *place;
}

void include_walls(FieldSpan& span, const Walls& walls, const Shown& units) {
  for (const Wall* wall : {&walls.inner, &walls.outer})
    if (const auto* fixed = std::get_if<FixedTemperature>(&wall->thermal)) {
      span.low = std::min(span.low, units(fixed->value));
      span.high = std::max(span.high, units(fixed->value));
    }
}

bool counts_powers(FieldKind kind, const Interval& r) {
  const bool may =
      kind == FieldKind::Viscosity || kind == FieldKind::StrainRate || kind == FieldKind::Stress;
  return may && plot::spans_decades(r);
}

Interval not_empty(Interval r) {
  const double size = std::max(std::abs(r.low), std::abs(r.high));
  return r.high - r.low > 1e-6 * size ? r : plot::with_margin({r.low, r.low}, 0);
}

bool read_number(std::string_view text, double& value) {
  value = number_of(text).value_or(std::nan(""));
  return std::isfinite(value);
}

}  // namespace

const std::vector<std::string>& field_words() {
  static const std::vector<std::string> words{"temperature", "viscosity", "speed", "strain-rate",
                                              "stress"};
  return words;
}

std::optional<FieldKind> field_kind(const std::string& word) {
  const auto& words = field_words();
  const auto found = std::find(words.begin(), words.end(), word);
  if (found == words.end()) return std::nullopt;
  return static_cast<FieldKind>(found - words.begin());
}

PictureUnits field_units(const SavedFields& fields, RunKind run) {
  PictureUnits units = picture_units(fields.settings.body);
  if (run == RunKind::Onset) units.temperature = units.velocity = of_no_scale;
  return units;
}

FieldSpan joined(const FieldSpan& p, const FieldSpan& q) {
  return {std::min(p.low, q.low), std::max(p.high, q.high), std::min(p.usual, q.usual)};
}

ColourRange colour_range(FieldKind kind, const FieldSpan& span) {
  const double low = kind == FieldKind::Viscosity ? span.low : span.usual;
  if (counts_powers(kind, {low, span.high})) return {{low, span.high}, Spacing::Logarithmic};
  return {not_empty({kind == FieldKind::Speed ? 0 : span.low, span.high}), Spacing::Linear};
}

ColourRange colour_range_asked(const std::string& range, const ColourRange& own) {
  const std::size_t colon = range.find(':');
  Interval r;
  const bool read = colon != std::string::npos &&
                    read_number(std::string_view(range).substr(0, colon), r.low) &&
                    read_number(std::string_view(range).substr(colon + 1), r.high);
  if (!read || r.empty())
    throw InputError(fmt::format(
        "--range {}: must be LOW:HIGH, two numbers that rise, as in --range 0.2:0.9", range));
  if (own.spacing == Spacing::Logarithmic && r.low <= 0)
    throw InputError(fmt::format(
        "--range {}: the colours count powers of ten here, so LOW must be above 0", range));
  return {r, own.spacing};
}

FieldView field_view(FieldKind kind, const SavedFields& fields, const SavedRun& run) {
  const Quantity q = quantity(kind, fields, run.kind);
  FieldView view{kind,
                 {q.name, q.units.unit},
                 kind == FieldKind::Temperature ? ColourMap::Warm : ColourMap::Cool,
                 q.units(q.values),
                 {}};
  const Interval all = plot::range_of(view.cells);
  view.span = {all.low, all.high, usual_least(view.cells)};
  if (kind == FieldKind::Temperature && run.kind != RunKind::Onset)
    include_walls(view.span, fields.settings.model.walls, q.units);
  return view;
}

std::vector<double> shares(const FieldView& view, const ColourRange& colours) {
  const plot::Axis axis{colours.range, colours.spacing, {}, ""};
  std::vector<double> all;
  all.reserve(view.cells.size());
  for (const double value : view.cells) {
    const double share = axis.place(value);
    all.push_back(std::isfinite(share) ? std::clamp(share, -1.0, 2.0) : 0);
  }
  return all;
}

}  // namespace lidwright
