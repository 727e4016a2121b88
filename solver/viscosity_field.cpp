#include "solver/viscosity_field.hpp"

#include "mesh/gather.hpp"

namespace lidwright {

void set_cell_means(ViscosityField& eta) {
  eta.cells = CellField(eta.quarters[0].decomposition_pointer());
  const Geometry& g = eta.cells.decomposition().geometry();
  for (int j = eta.cells.held().begin; j < eta.cells.held().end; ++j)
    for (int i = 0; i < eta.cells.rows(); ++i) {
      double sum = 0;
      for (const bool upper : {false, true})
        for (const bool right : {false, true})
          sum += g.quarter_volume({i, j}, upper, right) *
                 eta.quarters[ViscosityField::quarter(upper, right)][{i, j}];
      eta.cells[{i, j}] = sum * g.inverse_volume({i, j});
    }
}

namespace {
std::string quarter_name(const std::string& name, std::size_t q) {
  return name + ".quarter." + std::to_string(q);
}
}  // namespace

void store_viscosity(const ViscosityField& eta, const std::string& name, Archive& archive) {
  archive.cells[name] = eta.cells;
  if (eta.uniform_in_cells()) return;
  for (std::size_t q = 0; q < 4; ++q) archive.cells[quarter_name(name, q)] = eta.quarters[q];
}

ViscosityField restore_viscosity(const std::string& name, const Archive& archive) {
  ViscosityField eta;
  if (const auto cells = archive.cells.find(name); cells != archive.cells.end())
    eta.cells = cells->second;
  for (std::size_t q = 0; q < 4; ++q)
    if (const auto f = archive.cells.find(quarter_name(name, q)); f != archive.cells.end())
      eta.quarters[q] = f->second;
  return eta;
}

std::vector<std::vector<double>> gather_to_first(const ViscosityField& eta) {
  std::vector<std::vector<double>> all{gather_to_first(eta.cells)};
  if (!eta.uniform_in_cells())
    for (const CellField& q : eta.quarters) all.push_back(gather_to_first(q));
  return all;
}

ViscosityField scatter_from_first(const std::vector<std::vector<double>>& all,
                                  const std::shared_ptr<const Decomposition>& d) {
  ViscosityField eta;
  const auto field = [&](std::size_t n) {
    CellField f(d);
    scatter_from_first(all[n], f);
    return f;
  };
  eta.cells = field(0);
  if (all.size() > 1)
    for (std::size_t q = 0; q < 4; ++q) eta.quarters[q] = field(q + 1);
  return eta;
}

}  // namespace lidwright
