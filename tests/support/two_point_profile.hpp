#pragma once

#include <Eigen/Dense>
#include <array>
#include <vector>

/// Exact solution of a linear two-point problem, for analytic flows:
///     y' = A y + C s,  s' = F s,  two of the four y zero at either end,
/// with A constant in each layer. By matrix exponentials from node to node (multiple shooting), in
/// long double, so that growing and decaying parts do not spoil each other.
namespace lidwright {

class TwoPointProfile {
 public:
  using Real = long double;
  using Matrix4 = Eigen::Matrix<Real, 4, 4>;
  using Matrix = Eigen::Matrix<Real, Eigen::Dynamic, Eigen::Dynamic>;
  using Vector = Eigen::Matrix<Real, Eigen::Dynamic, 1>;

  struct Layer {
    Real end;  ///< a layer begins where the one before ends
    Matrix4 a;
  };
  struct Forcing {
    Matrix c;      ///< 4 x m
    Matrix f;      ///< m x m
    Vector start;  ///< s at the beginning
  };
  /// `zero_at_begin`, `zero_at_end`: the places in y that vanish there.
  TwoPointProfile(Real begin, const std::vector<Layer>&, const Forcing&,
                  std::array<int, 2> zero_at_begin, std::array<int, 2> zero_at_end);

  /// y at x; at a layer's end the limit from the layer before.
  std::array<double, 4> operator()(double x) const;

 private:
  struct Piece {
    Real begin;
    Matrix system;  ///< of (y, s) together
    Vector start;   ///< (y, s) at its beginning
  };
  std::vector<Piece> pieces_;
};

}  // namespace lidwright
