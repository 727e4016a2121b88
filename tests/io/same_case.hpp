#pragma once

#include <gtest/gtest.h>

#include <optional>
#include <string>
#include <tuple>
#include <vector>

#include "io/case_file.hpp"

/// Whether two cases are the same to the last bit, and whether a case is what it is written as.
/// Member by member, so that a key that is not written cannot hide.
namespace lidwright::test {

inline auto parts(const Grading& g) { return std::tie(g.first, g.last); }
inline auto parts(const Shell& s) {
  return std::tie(s.shape, s.inner_radius, s.lateral_begin, s.lateral_end, s.sides);
}
inline auto parts(const Wall& w) {
  const auto* fixed = std::get_if<FixedTemperature>(&w.thermal);
  const double number = fixed ? fixed->value : std::get<FixedHeatFlux>(w.thermal).outward;
  return std::tuple(w.thermal.index(), number, w.slip);
}
inline auto parts(const ExponentialViscosity& e) {
  return std::tie(e.thermal_contrast, e.depth_contrast, e.unity_at);
}
inline auto parts(const ArrheniusViscosity& a) {
  return std::tie(a.energy, a.volume, a.offset, a.unity_at, a.unity_at_depth);
}
inline auto parts(const ViscosityLayer& l) { return std::tie(l.below, l.factor); }
inline auto parts(const RadialProfile& p) {
  return std::tie(p.rise, p.radius_power, p.depths, p.values);
}
inline auto parts(const HeatLayer& l) { return std::tie(l.below, l.source); }
inline auto parts(const TemperatureMode& m) { return std::tie(m.lateral, m.radial, m.amplitude); }
inline auto parts(const FlowSettings& f) {
  return std::tie(f.tolerance, f.most_iterations, f.memory, f.refactor_cost, f.most_newton_steps);
}
inline auto parts(const HeatSettings& h) {
  return std::tie(h.flux, h.courant, h.accuracy, h.first_step, h.largest_step, h.growth);
}
inline auto parts(const MarchSettings& m) {
  return std::tie(m.end_time, m.most_steps, m.wall_clock, m.steady, m.until, m.known_quantities,
                  m.known_error);
}
inline auto parts(const SettleSettings& s) {
  return std::tie(s.tolerance, s.most_steps, s.most_time, s.flux, s.coarsest, s.linear);
}
inline auto parts(const OutputSettings& o) {
  return std::tie(o.history_every, o.snapshot_every, o.checkpoint_every, o.checkpoints_kept,
                  o.normal_stress, o.pictures, o.report);
}
inline auto parts(const Body& b) {
  return std::tie(b.radius, b.core_radius, b.gravity, b.density, b.expansivity, b.conductivity,
                  b.heat_capacity, b.surface_temperature, b.temperature_drop,
                  b.reference_viscosity);
}

inline auto parts(const Yielding& y) {
  return std::tie(y.law, y.cohesion, y.friction, y.lithostatic, y.ceiling, y.floor);
}
inline auto parts(const DislocationCreep& d) {
  return std::tie(d.exponent, d.reference_stress, d.alone);
}

template <class T>
inline void expect_same(const std::vector<T>& a, const std::vector<T>& b) {
  ASSERT_EQ(a.size(), b.size());
  for (std::size_t k = 0; k < a.size(); ++k) EXPECT_TRUE(parts(a[k]) == parts(b[k]));
}
template <class T>
inline void expect_same(const std::optional<T>& a, const std::optional<T>& b) {
  ASSERT_EQ(a.has_value(), b.has_value());
  if (a) {
    EXPECT_TRUE(parts(*a) == parts(*b));
  }
}

inline void expect_same(const ReferenceProfiles& a, const ReferenceProfiles& b) {
  EXPECT_EQ(a.dissipation_number, b.dissipation_number);
  EXPECT_EQ(a.surface_temperature, b.surface_temperature);
  EXPECT_TRUE(parts(a.density) == parts(b.density));
  EXPECT_TRUE(parts(a.expansivity) == parts(b.expansivity));
  EXPECT_TRUE(parts(a.gravity) == parts(b.gravity));
  EXPECT_TRUE(parts(a.conductivity) == parts(b.conductivity));
  EXPECT_TRUE(parts(a.heat_capacity) == parts(b.heat_capacity));
}

inline void expect_same(const ViscosityLaw& a, const ViscosityLaw& b) {
  EXPECT_EQ(a.constant, b.constant);
  EXPECT_EQ(a.lowest, b.lowest);
  EXPECT_EQ(a.highest, b.highest);
  expect_same(a.exponential, b.exponential);
  expect_same(a.arrhenius, b.arrhenius);
  expect_same(a.layered.layers, b.layered.layers);
}

inline void expect_same(const Model& a, const Model& b) {
  EXPECT_TRUE(parts(a.shell) == parts(b.shell));
  EXPECT_EQ(a.grid.radial, b.grid.radial);
  EXPECT_EQ(a.grid.lateral, b.grid.lateral);
  EXPECT_TRUE(parts(a.grid.radial_grading) == parts(b.grid.radial_grading));
  EXPECT_TRUE(parts(a.grid.lateral_grading) == parts(b.grid.lateral_grading));
  EXPECT_TRUE(parts(a.walls.inner) == parts(b.walls.inner));
  EXPECT_TRUE(parts(a.walls.outer) == parts(b.walls.outer));
  EXPECT_EQ(a.rayleigh, b.rayleigh);
  expect_same(a.viscosity, b.viscosity);
  expect_same(a.dislocation, b.dislocation);
  if (a.dislocation && b.dislocation)
    expect_same(a.dislocation->viscosity, b.dislocation->viscosity);
  expect_same(a.yielding, b.yielding);
  EXPECT_EQ(a.heat.uniform, b.heat.uniform);
  expect_same(a.heat.layers, b.heat.layers);
  expect_same(a.reference, b.reference);
}

inline void expect_same(const Case& a, const Case& b) {
  EXPECT_EQ(a.title, b.title);
  expect_same(a.model, b.model);
  EXPECT_EQ(std::tie(a.initial.base, a.initial.noise, a.initial.seed, a.initial.from),
            std::tie(b.initial.base, b.initial.noise, b.initial.seed, b.initial.from));
  if (a.initial.base == InitialBase::BoundaryLayers) {
    EXPECT_EQ(std::tie(a.initial.interior, a.initial.layer_thickness),
              std::tie(b.initial.interior, b.initial.layer_thickness));
  }
  expect_same(a.initial.modes, b.initial.modes);
  EXPECT_TRUE(parts(a.flow) == parts(b.flow));
  EXPECT_TRUE(parts(a.heat) == parts(b.heat));
  EXPECT_TRUE(parts(a.march) == parts(b.march));
  EXPECT_TRUE(parts(a.settle) == parts(b.settle));
  EXPECT_TRUE(parts(a.output) == parts(b.output));
  expect_same(a.body, b.body);
}

inline void expect_round_trip(const Case& made) {
  const std::string written = write_case(made);
  SCOPED_TRACE(written);
  const Case again = parse_case(written, "written.toml");
  expect_same(made, again);
  EXPECT_EQ(write_case(again), written);
}

}  // namespace lidwright::test
