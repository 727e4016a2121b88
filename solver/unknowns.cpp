#include "solver/unknowns.hpp"

namespace lidwright {

Unknowns::Unknowns(const Power& serial)
    : rows_(serial.geometry().radial_cells()),
      columns_(serial.geometry().lateral_cells()),
      corner_columns_(serial.geometry().corner_columns()),
      periodic_(serial.geometry().periodic()),
      common_row_(serial.through_flow() ? rows_ : -1) {
  for (int j = 0; j < corner_columns_; ++j)
    for (int i = 0; i <= rows_; ++i)
      number_.push_back(serial.fixed({i, j}) || serial.common({i, j}) ? -1 : flow_++);
  if (common_row_ >= 0) ++flow_;
}

long Unknowns::of(Corner k) const {
  if (k.i == common_row_) return flow_ - 1;
  const int j = periodic_ ? wrapped(k.j, corner_columns_) : k.j;
  return number_[static_cast<std::size_t>(j) * static_cast<std::size_t>(rows_ + 1) +
                 static_cast<std::size_t>(k.i)];
}

Eigen::VectorXd Unknowns::flow_vector(const CornerField& psi) const {
  Eigen::VectorXd x = Eigen::VectorXd::Zero(flow_);
  for (int j = 0; j < corner_columns_; ++j)
    for (int i = 0; i <= rows_; ++i)
      if (const long n = of(Corner{i, j}); n >= 0) x[n] = psi[{i, j}];
  return x;
}

Eigen::VectorXd Unknowns::flow_force(const CornerField& force) const {
  Eigen::VectorXd x = Eigen::VectorXd::Zero(flow_);
  for (int j = 0; j < corner_columns_; ++j)
    for (int i = 0; i <= rows_; ++i)
      if (const long n = of(Corner{i, j}); n >= 0) x[n] += force[{i, j}];
  return x;
}

void Unknowns::set_flow(const Eigen::Ref<const Eigen::VectorXd>& x, CornerField& psi) const {
  for (int j = 0; j < corner_columns_; ++j)
    for (int i = 0; i <= rows_; ++i) {
      const long n = of(Corner{i, j});
      psi[{i, j}] = n >= 0 ? x[n] : 0;
    }
  psi.exchange();
}

Eigen::VectorXd Unknowns::temperature_vector(const CellField& t) const {
  return Eigen::Map<const Eigen::VectorXd>(t.owned_data(), cells());
}

void Unknowns::set_temperature(const Eigen::Ref<const Eigen::VectorXd>& x, CellField& t) const {
  Eigen::Map<Eigen::VectorXd>(t.owned_data(), cells()) = x;
  t.exchange();
}

}  // namespace lidwright
