#include "solver/initial.hpp"

#include <algorithm>
#include <cmath>
#include <numbers>
#include <stdexcept>

namespace lidwright {
namespace {

using std::numbers::pi;

std::optional<double> fixed_value(const ThermalWall& wall) {
  if (const auto* fixed = std::get_if<FixedTemperature>(&wall)) return fixed->value;
  return std::nullopt;
}

/// Boundary layers of error-function shape over an isothermal interior; a wall without fixed
/// temperature has none.
double with_boundary_layers(const HeatOperator& heat, const InitialSettings& s, int row) {
  const Geometry& g = heat.geometry();
  const double height = g.cell_radius(row) - g.inner_radius();
  double t = s.interior;
  if (const auto wall = fixed_value(heat.walls().inner.thermal))
    t += (*wall - s.interior) * std::erfc(height / s.layer_thickness);
  if (const auto wall = fixed_value(heat.walls().outer.thermal))
    t += (*wall - s.interior) * std::erfc((1 - height) / s.layer_thickness);
  return t;
}

double mode_value(const Geometry& g, const TemperatureMode& m, Cell c) {
  const double begin = g.face_lateral(0), length = g.face_lateral(g.lateral_cells()) - begin;
  const double turns = g.periodic() ? 2 * pi : pi;
  return m.amplitude * std::sin(m.radial * pi * (g.cell_radius(c.i) - g.inner_radius())) *
         std::cos(m.lateral * turns * (g.cell_lateral(c.j) - begin) / length);
}

/// Uniform in [-1, 1], a function of the seed and the cell's number only (SplitMix64: Steele, Lea &
/// Flood 2014, OOPSLA), so that the field does not depend on the ranks.
double white_noise(std::uint64_t seed, std::uint64_t cell) {
  std::uint64_t z = seed * 0xD1342543DE82EF95ULL + (cell + 1) * 0x9E3779B97F4A7C15ULL;
  z = (z ^ (z >> 30)) * 0xBF58476D1CE4E5B9ULL;
  z = (z ^ (z >> 27)) * 0x94D049BB133111EBULL;
  z ^= z >> 31;
  return static_cast<double>(z >> 11) * 0x1p-52 - 1;
}

/// Bilinear in (radius, lateral) between cell middles, constant beyond the outermost ones.
class Interpolation {
 public:
  explicit Interpolation(const StoredTemperature& s) : stored_(s) {
    for (std::size_t i = 0; i + 1 < s.face_radius.size(); ++i)
      radius_.push_back((s.face_radius[i] + s.face_radius[i + 1]) / 2);
    for (std::size_t j = 0; j + 1 < s.face_lateral.size(); ++j)
      lateral_.push_back((s.face_lateral[j] + s.face_lateral[j + 1]) / 2);
  }
  double operator()(double radius, double lateral, bool periodic) const {
    const auto [i, x] = bracket(radius_, radius);
    std::size_t j = 0, right = 0;
    double y = 0;
    if (periodic && (lateral < lateral_.front() || lateral >= lateral_.back())) {
      const double period = stored_.face_lateral.back() - stored_.face_lateral.front();
      const double gap = lateral_.front() + period - lateral_.back();
      j = lateral_.size() - 1;
      y = (lateral < lateral_.front() ? lateral + period - lateral_.back()
                                      : lateral - lateral_.back()) /
          gap;
    } else {
      std::tie(j, y) = bracket(lateral_, lateral);
      right = j + 1;
    }
    return (1 - y) * ((1 - x) * at(i, j) + x * at(i + 1, j)) +
           y * ((1 - x) * at(i, right) + x * at(i + 1, right));
  }

 private:
  static std::pair<std::size_t, double> bracket(const std::vector<double>& places, double x) {
    const auto after = std::upper_bound(places.begin() + 1, places.end() - 1, x);
    const auto n = static_cast<std::size_t>(after - places.begin()) - 1;
    return {n, std::clamp((x - places[n]) / (places[n + 1] - places[n]), 0.0, 1.0)};
  }
  double at(std::size_t i, std::size_t j) const { return stored_.values[j * radius_.size() + i]; }

  const StoredTemperature& stored_;
  std::vector<double> radius_, lateral_;
};

void check_region(const Geometry& g, const StoredTemperature& s) {
  const auto near = [](double a, double b) { return std::abs(a - b) < 1e-9; };
  if (s.shell.shape == g.shell().shape && near(s.face_radius.front(), g.inner_radius()) &&
      near(s.face_radius.back(), g.outer_radius()) &&
      near(s.face_lateral.front(), g.face_lateral(0)) &&
      near(s.face_lateral.back(), g.face_lateral(g.lateral_cells())))
    return;
  throw std::invalid_argument(
      "initial.from: the stored temperature covers another region than this case's shell");
}

bool same_mesh(const Geometry& g, const StoredTemperature& s) {
  bool same = static_cast<int>(s.face_radius.size()) == g.radial_cells() + 1 &&
              static_cast<int>(s.face_lateral.size()) == g.lateral_cells() + 1;
  for (int i = 0; same && i <= g.radial_cells(); ++i)
    same = s.face_radius[static_cast<std::size_t>(i)] == g.face_radius(i);
  for (int j = 0; same && j <= g.lateral_cells(); ++j)
    same = s.face_lateral[static_cast<std::size_t>(j)] == g.face_lateral(j);
  return same;
}

void fill_from_stored(const StoredTemperature& s, CellField& t) {
  const Geometry& g = t.decomposition().geometry();
  check_region(g, s);
  const bool copy = same_mesh(g, s);
  const Interpolation interpolate(s);
  for (int j = t.owned().begin; j < t.owned().end; ++j)
    for (int i = 0; i < t.rows(); ++i)
      t[{i, j}] = copy ? s.values[static_cast<std::size_t>(j) * static_cast<std::size_t>(t.rows()) +
                                  static_cast<std::size_t>(i)]
                       : interpolate(g.cell_radius(i), g.cell_lateral(j), g.periodic());
}

}  // namespace

/// One column of the discrete conduction operator, elimination from the inner wall outwards: with
/// the conductance c between two rows, (pivot) T(i) = right + c T(i + 1).
std::vector<double> conductive_profile(const HeatOperator& heat) {
  const Geometry& g = heat.geometry();
  const int rows = g.radial_cells();
  std::vector<double> t(static_cast<std::size_t>(rows)), share(t.size());
  const auto conductance = [&](int face) { return heat.conductance(RadialFace{face, 0}); };
  const auto fixed_flow = [&](const ThermalWall& wall, int face) {
    return g.area(RadialFace{face, 0}) * std::get<FixedHeatFlux>(wall).outward;
  };
  double pivot = 0, right = 0;  // of what lies below, eliminated
  const ThermalWall &inner = heat.walls().inner.thermal, &outer = heat.walls().outer.thermal;
  if (const auto wall = fixed_value(inner)) {
    pivot = conductance(0);
    right = pivot * *wall;
  } else {
    right = fixed_flow(inner, 0);
  }
  for (int i = 0; i < rows; ++i) {
    const auto k = static_cast<std::size_t>(i);
    const bool last = i + 1 == rows;
    const double above = last && !fixed_value(outer) ? 0 : conductance(i + 1);
    right += g.volume({i, 0}) * heat.source(i);
    if (last) right += fixed_value(outer) ? above * *fixed_value(outer) : -fixed_flow(outer, rows);
    share[k] = above / (pivot + above);
    t[k] = right / (pivot + above);
    right = above * t[k];
    pivot = above * (1 - share[k]);
  }
  for (std::size_t k = t.size() - 1; k-- > 0;) t[k] += share[k] * t[k + 1];
  return t;
}

CellField initial_temperature(const HeatOperator& heat, const InitialSettings& s,
                              const StoredTemperature& stored) {
  CellField t(heat.decomposition_pointer());
  const Geometry& g = heat.geometry();
  if (!stored.values.empty()) {
    fill_from_stored(stored, t);
  } else {
    const std::vector<double> conductive =
        s.base == InitialBase::Conductive ? conductive_profile(heat) : std::vector<double>{};
    for (int j = t.owned().begin; j < t.owned().end; ++j)
      for (int i = 0; i < t.rows(); ++i)
        t[{i, j}] = conductive.empty() ? with_boundary_layers(heat, s, i)
                                       : conductive[static_cast<std::size_t>(i)];
  }
  for (int j = t.owned().begin; j < t.owned().end; ++j)
    for (int i = 0; i < t.rows(); ++i) {
      for (const TemperatureMode& m : s.modes) t[{i, j}] += mode_value(g, m, {i, j});
      const auto number = static_cast<std::uint64_t>(j) * static_cast<std::uint64_t>(t.rows()) +
                          static_cast<std::uint64_t>(i);
      if (s.noise != 0) t[{i, j}] += s.noise * white_noise(s.seed, number);
    }
  t.exchange();
  return t;
}

}  // namespace lidwright
