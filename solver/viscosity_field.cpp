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

/// Calls visit(field, its name) for all that a viscosity has beside the cells' own.
template <class Viscosity, class Visit>
void for_quarters(Viscosity& eta, Visit&& visit) {
  for (std::size_t q = 0; q < 4; ++q) {
    visit(eta.quarters[q], ".quarter." + std::to_string(q));
    visit(eta.shares[q], ".share." + std::to_string(q));
  }
}

}  // namespace

void store_viscosity(const ViscosityField& eta, const std::string& name, Archive& archive) {
  archive.cells[name] = eta.cells;
  if (eta.uniform_in_cells()) return;
  for_quarters(
      eta, [&](const CellField& f, const std::string& part) { archive.cells[name + part] = f; });
}

ViscosityField restore_viscosity(const std::string& name, const Archive& archive) {
  ViscosityField eta;
  const auto adopt = [&](CellField& f, const std::string& part) {
    if (const auto stored = archive.cells.find(name + part); stored != archive.cells.end())
      f = stored->second;
  };
  adopt(eta.cells, "");
  for_quarters(eta, adopt);
  return eta;
}

std::vector<std::vector<double>> gather_to_first(const ViscosityField& eta) {
  std::vector<std::vector<double>> all{gather_to_first(eta.cells)};
  if (!eta.uniform_in_cells())
    for_quarters(
        eta, [&](const CellField& f, const std::string&) { all.push_back(gather_to_first(f)); });
  return all;
}

ViscosityField scatter_from_first(const std::vector<std::vector<double>>& all,
                                  const std::shared_ptr<const Decomposition>& d) {
  ViscosityField eta;
  std::size_t next = 0;
  const auto scatter = [&](CellField& f, const std::string&) {
    f = CellField(d);
    scatter_from_first(all[next++], f);
  };
  scatter(eta.cells, "");
  if (all.size() > 1) for_quarters(eta, scatter);
  return eta;
}

}  // namespace lidwright
