#include "solver/stability.hpp"

#include <algorithm>
#include <cmath>
#include <complex>
#include <exception>

#include "mesh/gather.hpp"
#include "solver/eigenvalue_library.hpp"
#include "solver/first_rank.hpp"
#include "solver/steady_equations.hpp"

namespace lidwright {
namespace {

/// theta -> y of  (J + s B) (psi, y) = (0, M theta)  with B = diag(0, M): y = theta / (s - growth)
/// for an eigenvector of growth M theta = -(heat residual's change).
class ShiftInvert {
 public:
  ShiftInvert(const SteadyEquations& equations, const Linearised& jacobian, double shift)
      : unknowns_(equations.unknowns()),
        capacity_(jacobian.capacity),
        solver_(LinearSolver::Automatic) {
    solver_.set_matrix(jacobian, shift);
  }

  void apply(const Eigen::Map<const Eigen::VectorXd>& theta, Eigen::Map<Eigen::VectorXd> y) {
    Eigen::VectorXd right = Eigen::VectorXd::Zero(unknowns_.size()), x;
    right.tail(unknowns_.cells()) = capacity_.cwiseProduct(theta);
    if (solver_.solve(right, 1e-10, x).residual > 1e-7)
      throw SolveError(
          "the growth rates cannot be told: the linearised equations are solved too inaccurately; "
          "narrow the viscosity with viscosity.lowest and viscosity.highest, or refine the grid");
    y = x.tail(unknowns_.cells());
  }
  long size() const { return unknowns_.cells(); }

  static PetscErrorCode callback(Mat a, Vec in, Vec out) {
    ShiftInvert* self = nullptr;
    PetscCall(MatShellGetContext(a, &self));
    const double* x = nullptr;
    double* y = nullptr;
    PetscCall(VecGetArrayRead(in, &x));
    PetscCall(VecGetArray(out, &y));
    // No exception may pass through the library: it waits until the library has returned.
    try {
      if (!self->failure_) self->apply({x, self->size()}, {y, self->size()});
    } catch (...) {
      self->failure_ = std::current_exception();
    }
    PetscCall(VecRestoreArray(out, &y));
    PetscCall(VecRestoreArrayRead(in, &x));
    return self->failure_ ? PETSC_ERR_LIB : 0;
  }
  void rethrow() const {
    if (failure_) std::rethrow_exception(failure_);
  }

 private:
  const Unknowns& unknowns_;
  const Eigen::VectorXd& capacity_;
  CoupledSolver solver_;
  std::exception_ptr failure_;
};

struct Growth {
  std::complex<double> rate;
  bool turning;
};
constexpr int most_restarts = 60;

/// A start with a share in every eigenvector, the same in every run.
void fill_start(Vec v) {
  PetscInt n = 0;
  check(VecGetSize(v, &n));
  double* x = nullptr;
  check(VecGetArrayWrite(v, &x));
  for (PetscInt k = 0; k < n; ++k) x[k] = std::fmod(0.5 + 0.6180339887498949 * k, 1.0) - 0.5;
  check(VecRestoreArrayWrite(v, &x));
}

/// Is a disturbance that of turning, v with v . M v = 1 (empty: nothing can turn), to 90 %?
bool turns(const Eigen::VectorXd& v, const Eigen::VectorXd& capacity, Vec disturbance) {
  if (v.size() == 0) return false;
  const double* raw = nullptr;
  check(VecGetArrayRead(disturbance, &raw));
  const Eigen::VectorXd x = Eigen::Map<const Eigen::VectorXd>(raw, v.size());
  check(VecRestoreArrayRead(disturbance, &raw));
  const Eigen::VectorXd weighted = capacity.cwiseProduct(x);
  return std::abs(v.dot(weighted)) > 0.9 * std::sqrt(x.dot(weighted));
}

/// The growth rates nearest to a real shift, as far as they converge. All that grow without
/// oscillating more slowly than twice the shift are nearer to it than any that decay.
std::vector<Growth> nearest_to(const SteadyEquations& equations, const Linearised& jacobian,
                               double shift, int count) {
  ShiftInvert inverse(equations, jacobian, shift);
  const auto n = static_cast<PetscInt>(inverse.size());
  Handle<Mat, MatDestroy> op;
  check(MatCreateShell(PETSC_COMM_SELF, n, n, n, n, &inverse, op.put()));
  check(MatShellSetOperation(op, MATOP_MULT, reinterpret_cast<void (*)()>(ShiftInvert::callback)));
  Handle<EPS, EPSDestroy> eps;
  check(EPSCreate(PETSC_COMM_SELF, eps.put()));
  check(EPSSetOperators(eps, op, nullptr));
  check(EPSSetProblemType(eps, EPS_NHEP));
  check(EPSSetWhichEigenpairs(eps, EPS_LARGEST_MAGNITUDE));
  check(EPSSetDimensions(eps, std::min<PetscInt>(count, n / 3), PETSC_DEFAULT, PETSC_DEFAULT));
  check(EPSSetTolerances(eps, 1e-8, most_restarts));
  Handle<Vec, VecDestroy> start;
  check(MatCreateVecs(op, start.put(), nullptr));
  fill_start(start);
  Vec starts[] = {start};
  check(EPSSetInitialSpace(eps, 1, starts));
  check(PetscPushErrorHandler(PetscIgnoreErrorHandler, nullptr));
  const PetscErrorCode solved = EPSSolve(eps);
  check(PetscPopErrorHandler());
  inverse.rethrow();
  check(solved);
  PetscInt found = 0;
  check(EPSGetConverged(eps, &found));
  std::vector<Growth> rates;
  for (PetscInt k = 0; k < found; ++k) {
    double re = 0, im = 0;
    check(EPSGetEigenpair(eps, k, &re, &im, start, nullptr));
    rates.push_back({shift - 1.0 / std::complex<double>(re, im),
                     turns(equations.turning(), jacobian.capacity, start)});
  }
  return rates;
}

/// One of each conjugate pair and of what both shifts found, fastest growing first.
std::vector<GrowthRate> leading(const std::vector<Growth>& all, int count) {
  std::vector<GrowthRate> rates;
  for (const Growth& g : all) {
    const double size = 1 + std::abs(g.rate);
    // Equal eigenvalues come out as a pair, by round-off.
    const double frequency = std::abs(g.rate.imag()) < 1e-5 * size ? 0 : std::abs(g.rate.imag());
    const auto same = [&](const GrowthRate& r) {
      return std::hypot(r.growth - g.rate.real(), r.frequency - frequency) < 1e-5 * size &&
             r.turning == g.turning;
    };
    if (std::none_of(rates.begin(), rates.end(), same))
      rates.push_back({g.rate.real(), frequency, g.turning});
  }
  std::sort(rates.begin(), rates.end(),
            [](const GrowthRate& a, const GrowthRate& b) { return a.growth > b.growth; });
  rates.resize(std::min(rates.size(), static_cast<std::size_t>(count)));
  return rates;
}

/// Half of what a layer of the least viscosity may grow by at most: Ra/(4 pi^2) in the unit box
/// (linear theory of the free layer).
double half_the_fastest(const SteadyEquations& equations) {
  const StateView view = equations.view();
  const auto& eta = view.power.viscosity().values();
  const auto& b = view.heat.mantle().buoyancy;
  return view.rayleigh * *std::max_element(b.begin(), b.end()) /
         (8 * 9.8696 * *std::min_element(eta.begin(), eta.end()));
}

std::vector<GrowthRate> on_one_rank(const Model& model, HeatFlux flux,
                                    const std::vector<double>& temperature, int count) {
  const EigenvalueLibrary library;
  SteadyEquations equations(model, flux);
  CellField t(equations.decomposition());
  scatter_from_first(temperature, t);
  equations.set_temperature(t);
  const Linearised jacobian = equations.linearise();
  const double overturning = measure(equations.view()).velocity_rms;
  std::vector<Growth> all;
  for (const double shift :
       {0.5 * equations.heat_rate(), overturning, half_the_fastest(equations)}) {
    if (shift <= 0) continue;
    const std::vector<Growth> some = nearest_to(equations, jacobian, shift, count + 4);
    all.insert(all.end(), some.begin(), some.end());
  }
  if (all.empty())
    throw SolveError("the growth rates of the steady state did not converge; refine the grid");
  return leading(all, count);
}

}  // namespace

std::vector<GrowthRate> growth_rates(const Model& model, HeatFlux flux,
                                     const CellField& temperature, int count) {
  const MPI_Comm comm = temperature.decomposition().comm();
  const std::vector<double> whole = gather_to_first(temperature);
  std::vector<GrowthRate> rates;
  on_first_rank_or_throw(comm, "not enough memory for the growth rates; use fewer cells",
                         [&] { rates = on_one_rank(model, flux, whole, count); });
  auto found = static_cast<int>(rates.size());
  MPI_Bcast(&found, 1, MPI_INT, 0, comm);
  rates.resize(static_cast<std::size_t>(found));
  MPI_Bcast(rates.data(), found * static_cast<int>(sizeof(GrowthRate)), MPI_BYTE, 0, comm);
  return rates;
}

}  // namespace lidwright
