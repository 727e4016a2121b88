#include "solver/pressure.hpp"

namespace lidwright {
namespace {

/// dJ/d(face velocity) on this rank's columns: radial faces of owned cells, lateral faces on their
/// left.
class FaceResidual {
 public:
  FaceResidual(const Power& power, const CornerField& psi, const RadialFaceField& b)
      : rows_(power.geometry().radial_cells()), columns_(power.decomposition().owned(At::Cell)) {
    radial_.assign(static_cast<std::size_t>((rows_ + 1) * columns_.size()), 0.0);
    lateral_.assign(static_cast<std::size_t>(rows_ * columns_.size()), 0.0);
    add_normal_stress(power, psi);
    add_shear_stress(power, psi);
    const Geometry& g = power.geometry();
    for (int j = columns_.begin; j < columns_.end; ++j)
      for (int i = 0; i <= rows_; ++i)
        add(RadialFace{i, j},
            -g.area(RadialFace{i, j}) * g.face_density(i) * g.radial_distance(i) * b[{i, j}]);
  }

  double operator[](RadialFace f) const { return radial_[place(f)]; }
  double operator[](LateralFace f) const { return lateral_[place(f)]; }

 private:
  std::size_t place(RadialFace f) const {
    return static_cast<std::size_t>((f.j - columns_.begin) * (rows_ + 1) + f.i);
  }
  std::size_t place(LateralFace f) const {
    return static_cast<std::size_t>((f.j - columns_.begin) * rows_ + f.i);
  }
  bool mine(int j) const { return j >= columns_.begin && j < columns_.end; }
  void add(RadialFace f, double x) {
    if (mine(f.j)) radial_[place(f)] += x;
  }
  void add(LateralFace f, double x) {
    if (mine(f.j)) lateral_[place(f)] += x;
  }

  void add_normal_stress(const Power& power, const CornerField& psi) {
    const Geometry& g = power.geometry();
    const Range held = power.decomposition().held(At::Cell);
    for (int j = std::max(columns_.begin - 1, held.begin); j < columns_.end; ++j)
      for (int i = 0; i < rows_; ++i) {
        const Cell c{i, j};
        const double w = power.cell_weight(c);
        const Normal e = deviatoric_strain(g, face_velocities(g, psi, c), c);
        const OnFaces f = forces(g, {w * e.rr, w * e.tt, w * e.pp}, c);
        add(inner(c), f.inner);
        add(outer(c), f.outer);
        add(left(c), f.left);
        add(right(c), f.right);
      }
  }

  void add_shear_stress(const Power& power, const CornerField& psi) {
    const Range columns = power.shear_columns();
    for (int j = std::max(columns.begin, columns_.begin);
         j < std::min(columns.end, columns_.end + 1); ++j)
      for (int i = 0; i <= rows_; ++i) {
        if (!power.has_shear({i, j})) continue;
        const ShearRow row = power.shear_row({i, j});
        const double stress = power.corner_weight({i, j}) * shear(power.geometry(), psi, row);
        // Not the row's own weights: those leave out what a gripping wall bears of the half cell's
        // shear.
        const double lateral = lateral_shear_weight(power.geometry(), {i, j});
        add(row.before, -lateral * stress);
        add(row.behind, lateral * stress);
        add(row.near, row.near_weight * stress);
        add(row.far, row.far_weight * stress);
      }
  }

  int rows_;
  Range columns_;
  std::vector<double> radial_, lateral_;
};

/// Pressure over density of each column from 0 in its innermost cell.
void integrate_columns(const Geometry& g, const FaceResidual& residual, CellField& p) {
  for (int j = p.owned().begin; j < p.owned().end; ++j)
    for (int i = 1; i < p.rows(); ++i) {
      const RadialFace f{i, j};
      p[{i, j}] = p[{i - 1, j}] - residual[f] * g.velocity_per_flow(f);
    }
}

/// Adds to each column what ties it to the one on its left.
void tie_columns(const Geometry& g, const FaceResidual& residual, CellField& p) {
  p.exchange();
  std::vector<double> step;
  for (int j = p.owned().begin; j < p.owned().end; ++j) {
    double mean = 0;
    if (j > 0)
      for (int i = 0; i < p.rows(); ++i) {
        const LateralFace f{i, j};
        mean += (p[left(f)] - p[right(f)] - residual[f] * g.velocity_per_flow(f)) / p.rows();
      }
    step.push_back((step.empty() ? 0 : step.back()) + mean);
  }
  double before = 0;
  MPI_Exscan(&step.back(), &before, 1, MPI_DOUBLE, MPI_SUM, p.decomposition().comm());
  if (p.decomposition().rank() == 0) before = 0;
  for (int j = p.owned().begin; j < p.owned().end; ++j)
    for (int i = 0; i < p.rows(); ++i)
      p[{i, j}] += before + step[static_cast<std::size_t>(j - p.owned().begin)];
}

/// A constant added to p/rho changes no force: the one for which the pressure has no mean.
void remove_volume_mean(const Geometry& g, CellField& p) {
  std::vector<double> sums(2, 0.0);
  for (int j = p.owned().begin; j < p.owned().end; ++j)
    for (int i = 0; i < p.rows(); ++i) {
      const double mass = g.volume({i, j}) * g.cell_density(i);
      sums[0] += mass * p[{i, j}];
      sums[1] += mass;
    }
  p.decomposition().sum_in_place(sums);
  for (double& x : p.values()) x -= sums[0] / sums[1];
}

void multiply_by_density(const Geometry& g, CellField& p) {
  for (int j = p.held().begin; j < p.held().end; ++j)
    for (int i = 0; i < p.rows(); ++i) p[{i, j}] *= g.cell_density(i);
}

void remove_wall_mean(const Power& power, int face, std::vector<double>& stress) {
  const Geometry& g = power.geometry();
  const Range columns = power.decomposition().owned(At::Cell);
  double sum = 0;
  for (int j = columns.begin; j < columns.end; ++j)
    sum += g.area(RadialFace{face, j}) * stress[static_cast<std::size_t>(j - columns.begin)];
  const double mean = power.decomposition().sum(sum) / g.wall_area(face);
  for (double& s : stress) s -= mean;
}

}  // namespace

Stresses stresses(const Power& power, const CornerField& psi, const RadialFaceField& b) {
  const Geometry& g = power.geometry();
  const FaceResidual residual(power, psi, b);
  Stresses s;
  s.pressure = CellField(power.decomposition_pointer());
  integrate_columns(g, residual, s.pressure);
  tie_columns(g, residual, s.pressure);
  remove_volume_mean(g, s.pressure);
  s.pressure.exchange();
  const int last = g.radial_cells();
  for (int j = s.pressure.owned().begin; j < s.pressure.owned().end; ++j) {
    const RadialFace in{0, j}, out{last, j};
    s.inner_normal.push_back(-residual[in] * g.inverse_area(in) -
                             g.face_density(0) * s.pressure[outside(in)]);
    s.outer_normal.push_back(residual[out] * g.inverse_area(out) -
                             g.face_density(last) * s.pressure[inside(out)]);
  }
  multiply_by_density(g, s.pressure);
  remove_wall_mean(power, 0, s.inner_normal);
  remove_wall_mean(power, last, s.outer_normal);
  return s;
}

}  // namespace lidwright
