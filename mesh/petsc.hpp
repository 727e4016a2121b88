#pragma once

#include <petscsys.h>

#include <source_location>
#include <utility>

/// A foreign handle gets one move-only owner; every PETSc call goes through `check`.
namespace lidwright {

/// Throws std::runtime_error naming the place when a PETSc call failed.
void check(PetscErrorCode, std::source_location = std::source_location::current());

template <class T, PetscErrorCode (*destroy)(T*)>
class Handle {
 public:
  Handle() = default;
  explicit Handle(T raw) : raw_(raw) {}
  Handle(Handle&& other) noexcept : raw_(std::exchange(other.raw_, nullptr)) {}
  Handle& operator=(Handle&& other) noexcept {
    std::swap(raw_, other.raw_);
    return *this;
  }
  ~Handle() {
    if (raw_) destroy(&raw_);
  }
  operator T() const { return raw_; }  // NOLINT: a handle is meant to be passed to PETSc
  T* put() { return &raw_; }           ///< where a PETSc creation call writes

 private:
  T raw_ = nullptr;
};

}  // namespace lidwright
