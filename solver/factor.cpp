#include "solver/factor.hpp"

#include <cblas.h>
#include <cholmod.h>
#include <omp.h>

#include <new>
#include <string>

#include "mesh/gather.hpp"
#include "solver/first_rank.hpp"
#include "solver/solve_error.hpp"
#include "solver/stencil_matrix.hpp"
#include "solver/supernodal.hpp"

namespace lidwright {
namespace {

/// Adds the wall time of its life to a sum.
class Stopwatch {
 public:
  explicit Stopwatch(double& sum) : sum_(sum), start_(MPI_Wtime()) {}
  ~Stopwatch() { sum_ += MPI_Wtime() - start_; }
  Stopwatch(const Stopwatch&) = delete;
  Stopwatch& operator=(const Stopwatch&) = delete;

 private:
  double& sum_;
  double start_;
};

constexpr const char* no_memory =
    "not enough memory for the flow's factor; use fewer cells, or a larger machine";

/// Throws what a factorisation complains of, if anything.
void refuse(const std::string& complaint) {
  if (!complaint.empty()) throw SolveError(complaint);
}

/// One thread, for BLAS and for CHOLMOD's own loops: its blocks are too small to share out, and the
/// four threads it asks for, whatever OMP_NUM_THREADS says, double the time of a factorisation on
/// two cores (docs/performance.md).
void use_one_thread() {
  openblas_set_num_threads(1);
  omp_set_max_active_levels(0);
}

}  // namespace

struct Factor::Impl {
  explicit Impl(const Power& power)
      : mesh(std::make_shared<Decomposition>(power.decomposition().geometry_pointer(),
                                             MPI_COMM_SELF)),
        serial(mesh, walls_of(power)),
        stencil(serial) {
    use_one_thread();
    cholmod_l_start(&common);
    common.supernodal = CHOLMOD_SUPERNODAL;
    common.nmethods = 1;
    common.method[0].ordering = CHOLMOD_AMD;
    common.print = 0;
    view_matrix();
    factor = cholmod_l_analyze(&matrix, &common);
    if (!factor) throw SolveError(no_memory);
    find_places();
  }
  ~Impl() {
    cholmod_l_free_factor(&factor, &common);
    cholmod_l_finish(&common);
  }
  Impl(const Impl&) = delete;
  Impl& operator=(const Impl&) = delete;

  static Walls walls_of(const Power& power) {
    Walls walls;
    walls.inner.slip = power.inner_slip();
    walls.outer.slip = power.outer_slip();
    return walls;
  }

  void view_matrix() {
    SparseLower& a = const_cast<SparseLower&>(stencil.matrix());  // CHOLMOD's views are not const
    matrix.nrow = matrix.ncol = static_cast<std::size_t>(a.size);
    matrix.nzmax = a.value.size();
    matrix.p = a.column_start.data();
    matrix.i = a.row.data();
    matrix.x = a.value.data();
    matrix.stype = -1;
    matrix.itype = CHOLMOD_LONG;
    matrix.xtype = CHOLMOD_REAL;
    matrix.dtype = CHOLMOD_DOUBLE;
    matrix.sorted = matrix.packed = 1;
  }

  /// Empty when done, else what is wrong and the remedy.
  std::string factorise(const std::vector<std::vector<double>>& viscosity) {
    serial.set_viscosity(scatter_from_first(viscosity, mesh));
    stencil.assemble(serial);
    cholmod_l_factorize(&matrix, factor, &common);
    if (common.status < CHOLMOD_OK) return no_memory;
    if (factor->minor == factor->n) return "";
    return "the flow's matrix is not positive definite to working precision: the viscosity varies "
           "too much for "
           "this mesh. Raise viscosity.lowest or lower viscosity.highest, or refine the mesh";
  }

  /// z = M^-1 r on places in natural order, 0 where psi is fixed. The factor holds its unknowns
  /// permuted.
  void solve(const std::vector<double>& r, std::vector<double>& z) {
    for (std::size_t k = 0; k < place.size(); ++k) permuted[k] = r[place[k]];
    Substitution(supernodes()).solve(permuted.data());
    z.assign(stencil.unknown_of_place().size(), 0.0);
    for (std::size_t k = 0; k < place.size(); ++k) z[place[k]] = permuted[k];
  }

  Supernodes supernodes() const {
    const auto longs = [](const void* list) { return static_cast<const long*>(list); };
    return {factor->nsuper,    longs(factor->super), longs(factor->pi),
            longs(factor->px), longs(factor->s),     static_cast<const double*>(factor->x)};
  }

  /// Place in natural order of each of the factor's unknowns.
  void find_places() {
    const std::vector<long>& unknown = stencil.unknown_of_place();
    std::vector<std::size_t> of_unknown(static_cast<std::size_t>(stencil.unknowns()));
    for (std::size_t p = 0; p < unknown.size(); ++p)
      if (unknown[p] >= 0) of_unknown[static_cast<std::size_t>(unknown[p])] = p;
    const long* permutation = static_cast<const long*>(factor->Perm);
    for (std::size_t k = 0; k < of_unknown.size(); ++k)
      place.push_back(of_unknown[static_cast<std::size_t>(permutation[k])]);
    permuted.resize(place.size());
  }

  std::shared_ptr<const Decomposition> mesh;
  Power serial;
  StencilMatrix stencil;
  cholmod_common common{};
  cholmod_sparse matrix{};
  cholmod_factor* factor = nullptr;
  std::vector<std::size_t> place;
  std::vector<double> permuted;
};

Factor::Factor(const Power& shape) : decomposition_(shape.decomposition_pointer()) {
  on_first_rank_or_throw(decomposition_->comm(), no_memory,
                         [&] { impl_ = std::make_unique<Impl>(shape); });
}

Factor::~Factor() = default;

double Factor::stored_bytes() const {
  return impl_ ? 8.0 * static_cast<double>(impl_->factor->xsize) : 0;
}

void Factor::factorise(const Power& power) {
  const Stopwatch watch(seconds_factorising_);
  const std::vector<std::vector<double>> viscosity = gather_to_first(power.viscosity_field());
  on_first_rank_or_throw(decomposition_->comm(), no_memory,
                         [&] { refuse(impl_->factorise(viscosity)); });
  viscosity_ = power.viscosity_field();
}

void Factor::apply(Vec r, Vec z) {
  const Stopwatch watch(seconds_applying_);
  const double* from = nullptr;
  double* to = nullptr;
  PetscInt size = 0;
  check(VecGetLocalSize(r, &size));
  check(VecGetArrayRead(r, &from));
  const std::vector<double> whole =
      gather_to_first(*decomposition_, from, static_cast<std::size_t>(size));
  check(VecRestoreArrayRead(r, &from));
  std::vector<double> solved;
  if (impl_) impl_->solve(whole, solved);
  check(VecGetArrayWrite(z, &to));
  scatter_from_first(*decomposition_, solved, to, static_cast<std::size_t>(size));
  check(VecRestoreArrayWrite(z, &to));
}

}  // namespace lidwright
