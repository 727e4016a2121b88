#include "tests/support/two_point_profile.hpp"

#include <cmath>

namespace lidwright {
namespace {

using Real = TwoPointProfile::Real;
using Matrix = TwoPointProfile::Matrix;
using Vector = TwoPointProfile::Vector;

/// Taylor series of a matrix scaled below 1/2, squared back.
Matrix exponential(const Matrix& a) {
  const Real size = a.cwiseAbs().rowwise().sum().maxCoeff();
  const int squarings =
      size > 0.5L ? static_cast<int>(std::ceil(std::log2(static_cast<double>(size)))) + 1 : 0;
  const Matrix scaled = a / std::pow(2.0L, squarings);
  Matrix sum = Matrix::Identity(a.rows(), a.cols()), term = sum;
  for (int n = 1; n <= 24; ++n) {
    term = (term * scaled / static_cast<Real>(n)).eval();
    sum += term;
  }
  for (int n = 0; n < squarings; ++n) sum = (sum * sum).eval();
  return sum;
}

constexpr int pieces_per_layer = 12;

}  // namespace

TwoPointProfile::TwoPointProfile(Real begin, const std::vector<Layer>& layers,
                                 const Forcing& forcing, std::array<int, 2> zero_at_begin,
                                 std::array<int, 2> zero_at_end) {
  const Eigen::Index m = forcing.f.rows();
  std::vector<Matrix> step;
  for (const Layer& layer : layers) {
    Matrix system = Matrix::Zero(4 + m, 4 + m);
    system << layer.a, forcing.c, Matrix::Zero(m, 4), forcing.f;
    const Real length = (layer.end - begin) / pieces_per_layer;
    for (int n = 0; n < pieces_per_layer; ++n) {
      pieces_.push_back({begin + length * n, system, Vector::Zero(4 + m)});
      step.push_back(exponential(system * length));
    }
    begin = layer.end;
  }
  const auto count = static_cast<Eigen::Index>(pieces_.size());
  Matrix equations = Matrix::Zero(4 * (count + 1), 4 * (count + 1));
  Vector right = Vector::Zero(4 * (count + 1)), s = forcing.start;
  for (Eigen::Index n = 0; n < count; ++n) {  // y(n + 1) - P y(n) = Q s(n)
    const Matrix& p = step[static_cast<std::size_t>(n)];
    equations.block(4 * n, 4 * n + 4, 4, 4) = Matrix::Identity(4, 4);
    equations.block(4 * n, 4 * n, 4, 4) = -p.topLeftCorner(4, 4);
    right.segment(4 * n, 4) = p.topRightCorner(4, m) * s;
    pieces_[static_cast<std::size_t>(n)].start.tail(m) = s;
    s = (p.bottomRightCorner(m, m) * s).eval();
  }
  for (int k = 0; k < 2; ++k) {
    equations(4 * count + k, zero_at_begin[static_cast<std::size_t>(k)]) = 1;
    equations(4 * count + 2 + k, 4 * count + zero_at_end[static_cast<std::size_t>(k)]) = 1;
  }
  const Vector y = equations.fullPivLu().solve(right);
  for (Eigen::Index n = 0; n < count; ++n)
    pieces_[static_cast<std::size_t>(n)].start.head(4) = y.segment(4 * n, 4);
}

std::array<double, 4> TwoPointProfile::operator()(double x) const {
  std::size_t n = 0;
  while (n + 1 < pieces_.size() && pieces_[n + 1].begin < static_cast<Real>(x)) ++n;
  const Piece& piece = pieces_[n];
  const Vector y = exponential(piece.system * (static_cast<Real>(x) - piece.begin)) * piece.start;
  return {static_cast<double>(y(0)), static_cast<double>(y(1)), static_cast<double>(y(2)),
          static_cast<double>(y(3))};
}

}  // namespace lidwright
