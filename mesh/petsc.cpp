#include "mesh/petsc.hpp"

#include <stdexcept>
#include <string>

namespace lidwright {

void check(PetscErrorCode code, std::source_location where) {
  if (code == 0) return;
  const char* text = nullptr;
  PetscErrorMessage(code, &text, nullptr);
  throw std::runtime_error(std::string("PETSc: ") + (text ? text : "unknown error") + " (" +
                           where.file_name() + ":" + std::to_string(where.line()) + ")");
}

}  // namespace lidwright
