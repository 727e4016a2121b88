#pragma once

#include <Eigen/Core>
#include <vector>

#include "solver/power.hpp"

/// The unknowns of the steady equations of a whole mesh, numbered: the stream function at free
/// corners in natural order (radial index fastest), then its common value on the outer wall if
/// there is one, then the temperature of all cells in natural order.
namespace lidwright {

class Unknowns {
 public:
  /// `serial`: the functional of the whole mesh, on one rank.
  explicit Unknowns(const Power& serial);

  long flow() const { return flow_; }
  long cells() const { return static_cast<long>(rows_) * columns_; }
  long size() const { return flow_ + cells(); }

  /// Number among the flow's unknowns, -1 where psi is fixed. Columns may run past a period.
  long of(Corner) const;
  /// Number among the temperature's unknowns.
  long of(Cell c) const { return static_cast<long>(wrapped(c.j, columns_)) * rows_ + c.i; }

  Eigen::VectorXd flow_vector(const CornerField& psi) const;
  /// Sums what belongs to the common value.
  Eigen::VectorXd flow_force(const CornerField& force) const;
  void set_flow(const Eigen::Ref<const Eigen::VectorXd>&, CornerField& psi) const;
  Eigen::VectorXd temperature_vector(const CellField&) const;
  void set_temperature(const Eigen::Ref<const Eigen::VectorXd>&, CellField&) const;

 private:
  static int wrapped(int j, int n) { return (j % n + n) % n; }
  int rows_, columns_, corner_columns_;
  bool periodic_;
  int common_row_;
  long flow_ = 0;
  std::vector<long> number_;
};

}  // namespace lidwright
