#pragma once

#include <petscvec.h>

#include <algorithm>
#include <memory>
#include <vector>

#include "mesh/decomposition.hpp"

/// Numbers at one location of the mesh: a rank's own columns and two of its neighbours' on either
/// side.
namespace lidwright {

template <At at>
class Field {
  static_assert(at != At::LateralFace, "what is there follows from the corners");

 public:
  Field() = default;
  explicit Field(std::shared_ptr<const Decomposition> d, double value = 0)
      : decomposition_(std::move(d)),
        owned_(decomposition_->owned(at)),
        held_(decomposition_->held(at)),
        rows_(decomposition_->rows(at)),
        values_(static_cast<std::size_t>(rows_) * static_cast<std::size_t>(held_.size()), value) {}

  double operator[](Index<at> p) const { return values_[place(p)]; }
  double& operator[](Index<at> p) { return values_[place(p)]; }

  const Decomposition& decomposition() const { return *decomposition_; }
  std::shared_ptr<const Decomposition> decomposition_pointer() const { return decomposition_; }
  Range owned() const { return owned_; }
  Range held() const { return held_; }
  int rows() const { return rows_; }
  bool empty() const { return values_.empty(); }
  /// All numbers held, column by column, radial index fastest.
  const std::vector<double>& values() const { return values_; }
  std::vector<double>& values() { return values_; }
  /// One held column, radial index fastest.
  const double* column(int j) const { return values_.data() + place({0, j}); }
  double* column(int j) { return values_.data() + place({0, j}); }
  /// First owned number and how many there are: contiguous.
  double* owned_data() {
    return values_.data() + static_cast<std::size_t>(owned_.begin - held_.begin) * rows_;
  }
  const double* owned_data() const {
    return values_.data() + static_cast<std::size_t>(owned_.begin - held_.begin) * rows_;
  }
  std::size_t owned_size() const {
    return static_cast<std::size_t>(rows_) * static_cast<std::size_t>(owned_.size());
  }

  /// Brings the neighbours' columns up to date. Collective.
  void exchange() requires(at != At::RadialFace) {
    Handle<Vec, VecDestroy> local;
    check(VecCreateSeqWithArray(PETSC_COMM_SELF, 1, static_cast<PetscInt>(values_.size()),
                                values_.data(), local.put()));
    check(DMLocalToLocalBegin(decomposition_->dm(at), local, INSERT_VALUES, local));
    check(DMLocalToLocalEnd(decomposition_->dm(at), local, INSERT_VALUES, local));
  }

  /// Copies owned numbers to and from one of PETSc's global vectors; `from_global` also exchanges.
  /// Collective.
  void to_global(Vec global) const {
    double* raw = nullptr;
    check(VecGetArrayWrite(global, &raw));
    std::copy_n(owned_data(), owned_size(), raw);
    check(VecRestoreArrayWrite(global, &raw));
  }
  void from_global(Vec global) {
    const double* raw = nullptr;
    check(VecGetArrayRead(global, &raw));
    std::copy_n(raw, owned_size(), owned_data());
    check(VecRestoreArrayRead(global, &raw));
    exchange();
  }

 private:
  std::size_t place(Index<at> p) const {
    return static_cast<std::size_t>((p.j - held_.begin) * rows_ + p.i);
  }

  std::shared_ptr<const Decomposition> decomposition_;
  Range owned_{0, 0}, held_{0, 0};
  int rows_ = 0;
  std::vector<double> values_;
};

using CellField = Field<At::Cell>;
using CornerField = Field<At::Corner>;
/// Without exchange: whoever makes it fills the neighbours' columns too.
using RadialFaceField = Field<At::RadialFace>;

/// value(face) on all faces held.
template <class Value>
RadialFaceField on_radial_faces(std::shared_ptr<const Decomposition> d, Value&& value) {
  RadialFaceField f(std::move(d));
  for (int j = f.held().begin; j < f.held().end; ++j)
    for (int i = 0; i < f.rows(); ++i) f[{i, j}] = value(RadialFace{i, j});
  return f;
}

}  // namespace lidwright
