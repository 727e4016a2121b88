#include "solver/former_flows.hpp"

#include <petscvec.h>

#include <Eigen/Dense>

namespace lidwright {
namespace {

double owned_dot(const CornerField& a, const double* b) {
  double s = 0;
  for (std::size_t k = 0; k < a.owned_size(); ++k) s += a.owned_data()[k] * b[k];
  return s;
}

/// Newest flow and its successive differences, which extrapolation in time would combine by fixed
/// weights.
std::vector<CornerField> differences(const std::deque<CornerField>& flows) {
  std::vector<CornerField> basis(flows.begin(), flows.end());
  for (std::size_t order = 1; order < basis.size(); ++order)
    for (std::size_t n = basis.size() - 1; n >= order; --n)
      for (std::size_t k = 0; k < basis[n].values().size(); ++k)
        basis[n].values()[k] = basis[n - 1].values()[k] - basis[n].values()[k];
  return basis;
}

/// Minimises x . gram x / 2 - right . x, scaled to unit diagonal; directions that former flows do
/// not resolve are left out.
Eigen::VectorXd least_power(const Eigen::MatrixXd& gram, const Eigen::VectorXd& right) {
  const Eigen::VectorXd scale = gram.diagonal().cwiseMax(0).cwiseSqrt().unaryExpr(
      [](double x) { return x > 0 ? 1 / x : 0.0; });
  const Eigen::MatrixXd scaled = scale.asDiagonal() * gram * scale.asDiagonal();
  Eigen::CompleteOrthogonalDecomposition<Eigen::MatrixXd> solver;
  solver.setThreshold(1e-8);
  solver.compute(scaled);
  return scale.asDiagonal() * Eigen::VectorXd(solver.solve(scale.asDiagonal() * right));
}

}  // namespace

CornerField FormerFlows::combine(const Product& product, Vec f) const {
  const auto count = static_cast<Eigen::Index>(flows_.size());
  CornerField psi(decomposition_), force(decomposition_);
  if (count == 0) return psi;
  const std::vector<CornerField> basis = differences(flows_);
  std::vector<double> products;
  const double* f_raw = nullptr;
  check(VecGetArrayRead(f, &f_raw));
  for (std::size_t a = 0; a < basis.size(); ++a) {
    product(basis[a], force);
    for (std::size_t b = 0; b <= a; ++b)
      products.push_back(owned_dot(basis[b], force.owned_data()));
    products.push_back(owned_dot(basis[a], f_raw));
  }
  check(VecRestoreArrayRead(f, &f_raw));
  decomposition_->sum_in_place(products);

  Eigen::MatrixXd gram(count, count);
  Eigen::VectorXd right(count);
  std::size_t next = 0;
  for (Eigen::Index a = 0; a < count; ++a) {
    for (Eigen::Index b = 0; b <= a; ++b) gram(a, b) = gram(b, a) = products[next++];
    right(a) = products[next++];
  }
  const Eigen::VectorXd weight = least_power(gram, right);
  for (std::size_t a = 0; a < basis.size(); ++a)
    for (std::size_t k = 0; k < psi.values().size(); ++k)
      psi.values()[k] += weight(static_cast<Eigen::Index>(a)) * basis[a].values()[k];
  return psi;
}

void FormerFlows::remember(const CornerField& psi) {
  flows_.push_front(psi);
  if (flows_.size() > memory_) flows_.pop_back();
}

void FormerFlows::save(Archive& archive) const {
  archive.numbers["flow.former"] = static_cast<double>(flows_.size());
  for (std::size_t n = 0; n < flows_.size(); ++n)
    archive.corners["flow.former." + std::to_string(n)] = flows_[n];
}

void FormerFlows::restore(const Archive& archive) {
  flows_.clear();
  const auto count = static_cast<std::size_t>(archive.numbers.at("flow.former"));
  for (std::size_t n = 0; n < count; ++n)
    flows_.push_back(archive.corners.at("flow.former." + std::to_string(n)));
}

}  // namespace lidwright
