#include "solver/neutral_modes.hpp"

#include <Eigen/SparseCholesky>
#include <algorithm>
#include <cmath>

#include "solver/eigenvalue_library.hpp"
#include "solver/solve_error.hpp"

namespace lidwright {
namespace {

using Vector = Eigen::VectorXd;

/// As shares of the eigenvalue of largest modulus: below `noise`, eigenvalues are not told from 0,
/// where those of a stable state crowd; a first look has a `coarse_error`, results `fine_error`.
constexpr double noise = 1e-7, coarse_error = 2e-8, fine_error = 1e-11;
constexpr int most_restarts = 2000;

/// B, applied by substitution.
class RestResponse {
 public:
  explicit RestResponse(const RestBlocks& blocks) : blocks_(blocks) {
    flow_.compute(blocks.flow_by_psi);
    heat_.compute(blocks.heat_by_temperature);
    if (flow_.info() != Eigen::Success || heat_.info() != Eigen::Success)
      throw SolveError(
          "the matrix of a disturbance of the conductive state is not positive definite to working "
          "precision: narrow the viscosity with viscosity.lowest and viscosity.highest, or refine "
          "the grid");
  }
  Vector temperature(const Vector& psi) const { return -heat_.solve(blocks_.heat_by_psi * psi); }
  Vector operator()(const Vector& psi) const {
    return -flow_.solve(blocks_.flow_by_temperature * temperature(psi));
  }
  PetscInt size() const { return static_cast<PetscInt>(blocks_.flow_by_psi.rows()); }

 private:
  const RestBlocks& blocks_;
  Eigen::SimplicialLDLT<SparseBlock> flow_, heat_;
};

Vector copied(Vec from) {
  const double* values = nullptr;
  PetscInt size = 0;
  check(VecGetLocalSize(from, &size));
  check(VecGetArrayRead(from, &values));
  Vector to = Eigen::Map<const Vector>(values, size);
  check(VecRestoreArrayRead(from, &values));
  return to;
}

void copy(const Vector& from, Vec to) {
  double* values = nullptr;
  check(VecGetArrayWrite(to, &values));
  std::copy_n(from.data(), from.size(), values);
  check(VecRestoreArrayWrite(to, &values));
}

PetscErrorCode apply_response(Mat matrix, Vec x, Vec y) {
  void* context = nullptr;
  check(MatShellGetContext(matrix, &context));
  copy((*static_cast<const RestResponse*>(context))(copied(x)), y);
  return 0;
}

/// Eigenvalues of B of largest real part, in falling order.
class Spectrum {
 public:
  explicit Spectrum(RestResponse& response) : response_(response) {
    const PetscInt n = response.size();
    check(MatCreateShell(PETSC_COMM_SELF, n, n, n, n, &response, matrix_.put()));
    check(MatShellSetOperation(matrix_, MATOP_MULT, reinterpret_cast<void (*)()>(&apply_response)));
    check(MatCreateVecs(matrix_, real_.put(), imaginary_.put()));
    check(EPSCreate(PETSC_COMM_SELF, solver_.put()));
    check(EPSSetOperators(solver_, matrix_, nullptr));
    check(EPSSetProblemType(solver_, EPS_NHEP));
    check(EPSSetWhichEigenpairs(solver_, EPS_LARGEST_REAL));
    check(EPSSetConvergenceTest(solver_, EPS_CONV_ABS));
  }

  /// Finds at least `count` eigenvalues, each to an absolute error; returns how many.
  PetscInt solve(PetscInt count, double error) {
    count = std::min(count, response_.size());
    const PetscInt space = std::min(response_.size(), std::max<PetscInt>(2 * count + 20, 24));
    check(EPSSetDimensions(solver_, count, space, PETSC_DEFAULT));
    check(EPSSetTolerances(solver_, error, most_restarts));
    start_smoothly();
    check(EPSSolve(solver_));
    PetscInt found = 0;
    check(EPSGetConverged(solver_, &found));
    if (found < count)
      throw SolveError(
          "the eigenvalues of the disturbances did not converge; refine the grid, or narrow the "
          "viscosity with viscosity.lowest and viscosity.highest");
    return found;
  }

  /// Real and imaginary part.
  std::pair<double, double> value(PetscInt k) const {
    double real = 0, imaginary = 0;
    check(EPSGetEigenvalue(solver_, k, &real, &imaginary));
    return {real, imaginary};
  }
  Vector vector(PetscInt k) const {
    check(EPSGetEigenvector(solver_, k, real_, imaginary_));
    return copied(real_);
  }

 private:
  /// The same start everywhere, so that results do not depend on a random one; it is rich in all
  /// modes.
  void start_smoothly() {
    Vector start(response_.size());
    for (Eigen::Index k = 0; k < start.size(); ++k)
      start[k] = 1 + 0.5 * std::cos(1.7 * static_cast<double>(k * k));
    copy(response_(start), real_);
    Vec raw = real_;
    check(EPSSetInitialSpace(solver_, 1, &raw));
  }

  RestResponse& response_;
  Handle<Mat, MatDestroy> matrix_;
  Handle<Vec, VecDestroy> real_, imaginary_;
  Handle<EPS, EPSDestroy> solver_;
};

std::vector<double> as_list(const Vector& v) { return {v.data(), v.data() + v.size()}; }

NeutralMode mode_of(const RestResponse& response, double eigenvalue, const Vector& psi) {
  // Scaled so that the temperature is of order 1.
  const Vector temperature = response.temperature(psi);
  const double scale = 1 / temperature.cwiseAbs().maxCoeff();
  return {1 / eigenvalue, as_list(scale * psi), as_list(scale * temperature)};
}

/// Roughly the size of the largest eigenvalue (0 when B is 0), and the share of it that rounding
/// leaves uncertain: applications of B to multiples of one vector differ by as much.
struct Scale {
  double size = 0, rounding = 0;
};

Scale scale_of(const RestResponse& response) {
  Vector x = Vector::Ones(response.size()), next = response(x);
  for (int power = 0; power < 8 && next.norm() > 0; ++power) {
    x = next / next.norm();
    next = response(x);
  }
  if (!(next.norm() > 0)) return {};
  return {next.norm(), (3 * response(x / 3) - next).norm() / next.norm()};
}

}  // namespace

std::vector<NeutralMode> neutral_modes(const RestBlocks& blocks, int count) {
  RestResponse response(blocks);
  std::vector<NeutralMode> modes;
  const auto [size, rounding] = scale_of(response);
  if (!(size > 0)) return modes;
  const EigenvalueLibrary library;
  Spectrum spectrum(response);
  spectrum.solve(1, coarse_error * size);
  if (spectrum.value(0).first < noise * size) return modes;
  const PetscInt found = spectrum.solve(count, std::max(fine_error, 100 * rounding) * size);
  for (PetscInt k = 0; k < found && static_cast<int>(modes.size()) < count; ++k) {
    const auto [real, imaginary] = spectrum.value(k);
    if (real > noise * size && std::abs(imaginary) < noise * size)
      modes.push_back(mode_of(response, real, spectrum.vector(k)));
  }
  return modes;
}

}  // namespace lidwright
