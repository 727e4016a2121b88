#include "solver/mantle.hpp"

#include <array>
#include <cmath>

namespace lidwright {
namespace {

/// Gauss-Legendre rule of five points on [from, to]: exact for polynomials of degree 9.
template <class Function>
double integral(Function&& f, double from, double to) {
  constexpr std::array<double, 5> place{0, -0.5384693101056831, 0.5384693101056831,
                                        -0.9061798459386640, 0.9061798459386640};
  constexpr std::array<double, 5> weight{0.5688888888888889, 0.4786286704993665, 0.4786286704993665,
                                         0.2369268850561891, 0.2369268850561891};
  const double middle = (from + to) / 2, half = (to - from) / 2;
  double sum = 0;
  for (std::size_t k = 0; k < place.size(); ++k) sum += weight[k] * f(middle + half * place[k]);
  return sum * half;
}

/// Of conductors in series: the exact one of unit conductivity times mean resistances.
double conductive_flow(const Geometry& g, const RadialProfile& conductivity) {
  if (conductivity.constant()) return g.conductive_heat_flow();
  const int power = g.box() ? 0 : (g.shell().shape == Shape::Annulus ? 1 : 2);
  double with = 0, without = 0;
  for (int i = 0; i < g.radial_cells(); ++i) {
    const auto per_area = [&](double r) { return std::pow(r, -power); };
    const auto resistance = [&](double r) {
      return per_area(r) / conductivity(g.outer_radius() - r, g.outer_radius());
    };
    with += integral(resistance, g.face_radius(i), g.face_radius(i + 1));
    without += integral(per_area, g.face_radius(i), g.face_radius(i + 1));
  }
  return g.conductive_heat_flow() * without / with;
}

}  // namespace

std::shared_ptr<const Geometry> make_geometry(const Model& model) {
  const RadialProfile& density = model.reference.density;
  if (density.constant()) return std::make_shared<Geometry>(model.shell, model.grid);
  const double outer = model.shell.inner_radius + 1;
  return std::make_shared<Geometry>(model.shell, model.grid,
                                    [&](double depth) { return density(depth, outer); });
}

std::shared_ptr<const Decomposition> decompose(const Model& model, MPI_Comm comm) {
  return std::make_shared<Decomposition>(make_geometry(model), comm);
}

std::vector<double> lithostatic_pressure(const Geometry& g, const ReferenceProfiles& profiles) {
  const double outer = g.outer_radius();
  const auto weight = [&](double r) {
    return profiles.density(outer - r, outer) * profiles.gravity(outer - r, outer);
  };
  std::vector<double> pressure(static_cast<std::size_t>(g.radial_cells()));
  double above = outer, sum = 0;
  for (int i = g.radial_cells() - 1; i >= 0; --i) {
    sum += integral(weight, g.cell_radius(i), above);
    above = g.cell_radius(i);
    pressure[static_cast<std::size_t>(i)] = sum;
  }
  return pressure;
}

MantleRows::MantleRows(const Geometry& g, const ReferenceProfiles& profiles)
    : dissipation_number(profiles.dissipation_number),
      surface_temperature(profiles.surface_temperature),
      uniform_heat_capacity(profiles.heat_capacity.constant()),
      conductive_heat_flow(conductive_flow(g, profiles.conductivity)) {
  const double outer = g.outer_radius();
  const auto at = [&](const RadialProfile& p, double r) { return p(outer - r, outer); };
  for (int i = 0; i <= g.radial_cells(); ++i) {
    const double r = g.face_radius(i);
    buoyancy.push_back(at(profiles.expansivity, r) * at(profiles.gravity, r));
    face_conductivity.push_back(at(profiles.conductivity, r));
  }
  const auto gradient = [&](double r) {
    return dissipation_number * at(profiles.expansivity, r) * at(profiles.gravity, r) /
           at(profiles.heat_capacity, r);
  };
  adiabatic_rise.resize(static_cast<std::size_t>(g.radial_cells()));
  double logarithm = 0, above = outer;
  for (int i = g.radial_cells() - 1; i >= 0; --i) {
    logarithm += integral(gradient, g.cell_radius(i), above);
    above = g.cell_radius(i);
    adiabatic_rise[static_cast<std::size_t>(i)] = std::exp(logarithm);
  }
  for (int i = 0; i < g.radial_cells(); ++i) {
    cell_conductivity.push_back(at(profiles.conductivity, g.cell_radius(i)));
    heat_capacity.push_back(at(profiles.heat_capacity, g.cell_radius(i)));
  }
}

}  // namespace lidwright
