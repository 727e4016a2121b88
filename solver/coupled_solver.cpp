#include "solver/coupled_solver.hpp"

#include <unistd.h>

#include <algorithm>
#include <string>
#include <vector>

#include "solver/solve_error.hpp"

namespace lidwright {
namespace {

/// A factor that needs more than this many iterations is replaced before the next solve: a
/// factorisation costs about as much as 30 of its applications.
constexpr int most_iterations_with_old_factor = 15;
constexpr int restart = 200, most_iterations = 400;

/// Bytes that the system says a process may still take.
double available_bytes() {
  return static_cast<double>(sysconf(_SC_AVPHYS_PAGES)) *
         static_cast<double>(sysconf(_SC_PAGESIZE));
}

Handle<Vec, VecDestroy> view(Eigen::VectorXd& x) {
  Handle<Vec, VecDestroy> v;
  check(VecCreateSeqWithArray(PETSC_COMM_SELF, 1, static_cast<PetscInt>(x.size()), x.data(),
                              v.put()));
  return v;
}

/// MUMPS factor of a square matrix; one analysis serves all matrices of one pattern.
class Mumps {
 public:
  /// Analyses the pattern when it is a new one.
  void set(const SparseMatrix& a) {
    const SparseMatrix rows = a.transpose();  // PETSc stores by rows
    const auto n = static_cast<PetscInt>(a.rows());
    values_.assign(rows.valuePtr(), rows.valuePtr() + rows.nonZeros());
    const bool same = std::equal(starts_.begin(), starts_.end(), rows.outerIndexPtr(),
                                 rows.outerIndexPtr() + n + 1) &&
                      std::equal(columns_.begin(), columns_.end(), rows.innerIndexPtr(),
                                 rows.innerIndexPtr() + rows.nonZeros());
    if (same) {
      // Tells PETSc that the values behind its back have changed.
      check(MatAssemblyBegin(matrix_, MAT_FINAL_ASSEMBLY));
      return check(MatAssemblyEnd(matrix_, MAT_FINAL_ASSEMBLY));
    }
    starts_.assign(rows.outerIndexPtr(), rows.outerIndexPtr() + n + 1);
    columns_.assign(rows.innerIndexPtr(), rows.innerIndexPtr() + rows.nonZeros());
    matrix_ = {};
    check(MatCreateSeqAIJWithArrays(PETSC_COMM_SELF, n, n, starts_.data(), columns_.data(),
                                    values_.data(), matrix_.put()));
    analyse();
  }
  double bytes_needed() const {
    PetscInt megabytes = 0;
    check(MatMumpsGetInfog(factor_, 17, &megabytes));
    return 1e6 * static_cast<double>(megabytes);
  }
  /// Throws SolveError.
  void factorise() {
    MatFactorInfo info;
    check(MatFactorInfoInitialize(&info));
    check(MatLUFactorNumeric(factor_, matrix_, &info));
    PetscInt state = 0;
    check(MatMumpsGetInfog(factor_, 1, &state));
    if (state == -9 || state == -13)
      throw SolveError(
          "not enough memory for the factor of the steady equations; use fewer cells, or "
          "settle.linear = \"iterative\"");
    if (state < 0)
      throw SolveError(
          "the steady equations are singular here, at a fold or a bifurcation; change the case a "
          "little");
  }
  void solve(Vec b, Vec x) const { check(MatSolve(factor_, b, x)); }

 private:
  void analyse() {
    factor_ = {};
    check(MatGetFactor(matrix_, MATSOLVERMUMPS, MAT_FACTOR_LU, factor_.put()));
    check(MatMumpsSetIcntl(factor_, 14, 60));  // room for pivoting, percent
    MatFactorInfo info;
    check(MatFactorInfoInitialize(&info));
    check(MatLUFactorSymbolic(factor_, matrix_, nullptr, nullptr, &info));
  }
  std::vector<PetscInt> starts_, columns_;
  std::vector<double> values_;
  Handle<Mat, MatDestroy> matrix_, factor_;
};

}  // namespace

struct CoupledSolver::Preconditioner {
  virtual ~Preconditioner() = default;
  virtual void factorise(const SparseMatrix&) = 0;
  virtual void apply(Vec r, Vec z) = 0;
};

struct CoupledSolver::WholeFactor final : Preconditioner {
  explicit WholeFactor(const SparseMatrix& a) { lu.set(a); }
  void factorise(const SparseMatrix& a) override {
    lu.set(a);
    lu.factorise();
  }
  void apply(Vec r, Vec z) override { lu.solve(r, z); }
  Mumps lu;
};

/// z_T = (A + M/dt)^-1 r_heat,  z_psi = K^-1 (r_flow - F z_T).
struct CoupledSolver::BlockFactors final : Preconditioner {
  explicit BlockFactors(long flow_unknowns) : flow(flow_unknowns) {}

  void factorise(const SparseMatrix& a) override {
    const long cells = a.rows() - flow;
    flow_lu.set(a.block(0, 0, flow, flow));
    flow_lu.factorise();
    heat_lu.set(a.block(flow, flow, cells, cells));
    heat_lu.factorise();
    flow_by_temperature = a.block(0, flow, flow, cells);
  }
  void apply(Vec r, Vec z) override {
    const double* in = nullptr;
    double* out = nullptr;
    check(VecGetArrayRead(r, &in));
    check(VecGetArray(z, &out));
    const long cells = flow_by_temperature.cols();
    Eigen::VectorXd heat = Eigen::Map<const Eigen::VectorXd>(in + flow, cells);
    Eigen::VectorXd temperature(cells), psi(flow);
    heat_lu.solve(view(heat), view(temperature));
    Eigen::VectorXd force =
        Eigen::Map<const Eigen::VectorXd>(in, flow) - flow_by_temperature * temperature;
    flow_lu.solve(view(force), view(psi));
    Eigen::Map<Eigen::VectorXd>(out, flow) = psi;
    Eigen::Map<Eigen::VectorXd>(out + flow, cells) = temperature;
    check(VecRestoreArray(z, &out));
    check(VecRestoreArrayRead(r, &in));
  }

  long flow;
  Mumps flow_lu, heat_lu;
  SparseMatrix flow_by_temperature;
};

CoupledSolver::CoupledSolver(LinearSolver kind) : kind_(kind) {}

CoupledSolver::~CoupledSolver() = default;

PetscErrorCode CoupledSolver::multiply_callback(Mat a, Vec x, Vec y) {
  CoupledSolver* self = nullptr;
  PetscCall(MatShellGetContext(a, &self));
  const double* in = nullptr;
  double* out = nullptr;
  PetscCall(VecGetArrayRead(x, &in));
  PetscCall(VecGetArray(y, &out));
  const long n = self->matrix_.rows();
  Eigen::Map<Eigen::VectorXd>(out, n) = self->multiply(Eigen::Map<const Eigen::VectorXd>(in, n));
  PetscCall(VecRestoreArray(y, &out));
  PetscCall(VecRestoreArrayRead(x, &in));
  return 0;
}

PetscErrorCode CoupledSolver::precondition_callback(PC pc, Vec r, Vec z) {
  CoupledSolver* self = nullptr;
  PetscCall(PCShellGetContext(pc, &self));
  self->factor_->apply(r, z);
  return 0;
}

/// Column by column: first the flow's rows, then those of heat.
void CoupledSolver::set_matrix(const Linearised& j, double shift) {
  flow_ = j.flow_by_psi.rows();
  capacity_ = j.capacity;
  held_.resize(0);
  const long cells = j.capacity.size(), n = flow_ + cells;
  matrix_ = SparseMatrix(n, n);
  matrix_.resizeNonZeros(j.flow_by_psi.nonZeros() + j.flow_by_temperature.nonZeros() +
                         j.heat_by_psi.nonZeros() + j.heat_by_temperature.nonZeros());
  long next = 0;
  const auto put = [&](const SparseMatrix& block, long column, long first_row, double diagonal) {
    for (SparseMatrix::InnerIterator it(block, column); it; ++it, ++next) {
      matrix_.innerIndexPtr()[next] = it.row() + first_row;
      matrix_.valuePtr()[next] = it.value() + (it.row() == column ? diagonal : 0);
    }
  };
  for (long c = 0; c < flow_; ++c) {
    matrix_.outerIndexPtr()[c] = next;
    put(j.flow_by_psi, c, 0, 0);
    put(j.heat_by_psi, c, flow_, 0);
  }
  for (long c = 0; c < cells; ++c) {
    matrix_.outerIndexPtr()[flow_ + c] = next;
    put(j.flow_by_temperature, c, 0, 0);
    put(j.heat_by_temperature, c, flow_, shift * j.capacity[c]);
  }
  matrix_.outerIndexPtr()[n] = next;
}

void CoupledSolver::hold(const Eigen::VectorXd& v, double rate) {
  held_ = v.size() > 0 ? Eigen::VectorXd(capacity_.cwiseProduct(v)) : v;
  hold_rate_ = rate;
}

Eigen::VectorXd CoupledSolver::multiply(const Eigen::VectorXd& x) const {
  Eigen::VectorXd y = matrix_ * x;
  if (held_.size() > 0)
    y.tail(held_.size()) += hold_rate_ * held_.dot(x.tail(held_.size())) * held_;
  return y;
}

void CoupledSolver::choose_preconditioner() {
  if (kind_ != LinearSolver::Iterative) {
    auto whole = std::make_unique<WholeFactor>(matrix_);
    const bool fits = whole->lu.bytes_needed() < 0.8 * available_bytes();
    if (kind_ == LinearSolver::Automatic)
      kind_ = fits ? LinearSolver::Direct : LinearSolver::Iterative;
    if (kind_ == LinearSolver::Direct) factor_ = std::move(whole);
  }
  if (!factor_) factor_ = std::make_unique<BlockFactors>(flow_);
}

void CoupledSolver::factorise() {
  if (!factor_) choose_preconditioner();
  if (held_.size() == 0) {
    factor_->factorise(matrix_);
  } else {
    // A dense row would fill the factor: a little of M everywhere keeps it regular instead.
    SparseMatrix regular = matrix_;
    for (long c = 0; c < capacity_.size(); ++c)
      regular.coeffRef(flow_ + c, flow_ + c) += hold_rate_ * capacity_[c];
    factor_->factorise(regular);
  }
  ready_ = true;
}

int CoupledSolver::iterate(const Eigen::VectorXd& b, double tolerance, Eigen::VectorXd& x) {
  const auto n = static_cast<PetscInt>(matrix_.rows());
  if (!static_cast<KSP>(ksp_)) {
    check(MatCreateShell(PETSC_COMM_SELF, n, n, n, n, this, operator_.put()));
    check(MatShellSetOperation(operator_, MATOP_MULT,
                               reinterpret_cast<void (*)()>(multiply_callback)));
    check(KSPCreate(PETSC_COMM_SELF, ksp_.put()));
    check(KSPSetOperators(ksp_, operator_, operator_));
    check(KSPSetType(ksp_, KSPGMRES));
    check(KSPGMRESSetRestart(ksp_, restart));
    check(KSPSetPCSide(ksp_, PC_RIGHT));
    PC pc = nullptr;
    check(KSPGetPC(ksp_, &pc));
    check(PCSetType(pc, PCSHELL));
    check(PCShellSetContext(pc, this));
    check(PCShellSetApply(pc, precondition_callback));
  }
  check(KSPSetTolerances(ksp_, tolerance, 0, PETSC_DEFAULT, most_iterations));
  Eigen::VectorXd right = b;
  x = Eigen::VectorXd::Zero(n);
  check(KSPSolve(ksp_, view(right), view(x)));
  PetscInt iterations = 0;
  check(KSPGetIterationNumber(ksp_, &iterations));
  return static_cast<int>(iterations);
}

LinearReport CoupledSolver::solve(const Eigen::VectorXd& b, double tolerance, Eigen::VectorXd& x) {
  LinearReport report;
  const auto attempt = [&] {
    report.iterations = iterate(b, tolerance, x);
    report.residual = b.norm() > 0 ? (b - multiply(x)).norm() / b.norm() : 0;
    return report.residual <= 2 * tolerance;
  };
  if (ready_ && attempt()) {
    ready_ = report.iterations <= most_iterations_with_old_factor;
    return report;
  }
  factorise();
  // What round-off leaves is good enough for an inexact Newton step.
  if (!attempt() && !(report.residual <= 1e-2))
    throw SolveError("the linear equations of a Newton step could not be solved");
  return report;
}

}  // namespace lidwright
