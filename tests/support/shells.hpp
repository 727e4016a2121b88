#pragma once

#include <gtest/gtest.h>

#include <cmath>
#include <functional>
#include <memory>
#include <numbers>
#include <ostream>
#include <string>

#include "mesh/field.hpp"

/// Small regions of every geometry that the tests share: curved, not of unit size, and graded.
namespace lidwright {

struct NamedShell {
  std::string name;
  Shell shell;
  Grid grid;
  double density_rise = 1;  ///< density at the inner wall over that at the outer, exponential
};
inline void PrintTo(const NamedShell& s, std::ostream* out) { *out << s.name; }

/// Names a parameterised test after its shell.
inline std::string shell_name(const testing::TestParamInfo<NamedShell>& info) {
  return info.param.name;
}

inline NamedShell with_cells(NamedShell s, int radial, int lateral) {
  s.grid.radial = radial;
  s.grid.lateral = lateral;
  return s;
}

/// All kinds of region, graded towards both walls (the box along x too).
inline std::vector<NamedShell> all_shells(int radial, int lateral) {
  using std::numbers::pi;
  const Grid graded{radial, lateral, {3, 2}, {}};
  const Grid graded_both_ways{radial, lateral, {3, 2}, {2, 2.5}};
  return {
      {"Box", {Shape::Box, 0, 0, 1.7, Sides::Reflecting}, graded_both_ways},
      {"PeriodicBox", {Shape::Box, 0, 0, 2.3, Sides::Periodic}, graded},
      {"AnnulusCircle", {Shape::Annulus, 1.22, 0, 2 * pi, Sides::Periodic}, graded},
      {"AnnulusSector", {Shape::Annulus, 0.6, 0.3, 2.1, Sides::Reflecting}, graded},
      {"SphericalAnnulusCircle",
       {Shape::SphericalAnnulus, 1.22, 0, 2 * pi, Sides::Periodic},
       graded},
      {"SphericalAnnulusSector", {Shape::SphericalAnnulus, 0.8, 0, 1.1, Sides::Reflecting}, graded},
      {"PoleToPole", {Shape::AxisymmetricShell, 1.22, 0, pi, Sides::Reflecting}, graded},
      {"Hemisphere", {Shape::AxisymmetricShell, 0.7, 0, pi / 2, Sides::Reflecting}, graded},
  };
}

inline std::shared_ptr<const Decomposition> decompose(const Shell& shell, const Grid& grid,
                                                      MPI_Comm comm = PETSC_COMM_SELF) {
  return std::make_shared<Decomposition>(std::make_shared<Geometry>(shell, grid), comm);
}

inline std::shared_ptr<const Decomposition> decompose(const NamedShell& s) {
  const auto density = [&](double depth) { return std::pow(s.density_rise, depth); };
  return std::make_shared<Decomposition>(std::make_shared<Geometry>(s.shell, s.grid, density),
                                         PETSC_COMM_SELF);
}

/// The same shells, three times as dense at the inner wall as at the outer.
inline std::vector<NamedShell> compressed(std::vector<NamedShell> shells) {
  for (NamedShell& s : shells) {
    s.name = "Compressed" + s.name;
    s.density_rise = 3;
  }
  return shells;
}

/// Sets every number held, ghosts included.
inline void fill(CellField& f, const std::function<double(Cell)>& value) {
  for (int j = f.held().begin; j < f.held().end; ++j)
    for (int i = 0; i < f.rows(); ++i) f[{i, j}] = value({i, j});
}

/// Calls `body(place)` for the numbers a rank owns.
template <At at, class Body>
void for_each_owned(const Decomposition& d, Body&& body) {
  const Range columns = d.owned(at);
  for (int j = columns.begin; j < columns.end; ++j)
    for (int i = 0; i < d.rows(at); ++i) body(Index<at>{i, j});
}

}  // namespace lidwright
