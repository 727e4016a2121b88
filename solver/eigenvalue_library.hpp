#pragma once

#include <slepceps.h>

#include "mesh/petsc.hpp"

namespace lidwright {

/// SLEPc, while it is needed. On as many ranks as use it: it communicates on none.
class EigenvalueLibrary {
 public:
  EigenvalueLibrary() { check(SlepcInitializeNoArguments()); }
  ~EigenvalueLibrary() { SlepcFinalize(); }
  EigenvalueLibrary(const EigenvalueLibrary&) = delete;
  EigenvalueLibrary& operator=(const EigenvalueLibrary&) = delete;
};

}  // namespace lidwright
