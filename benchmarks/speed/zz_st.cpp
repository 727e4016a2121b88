#include "solver/settle.hpp"
#include "io/case_file.hpp"
#include "mesh/session.hpp"
#include <cstdio>
#include <ctime>
#include <petscsys.h>
using namespace lidwright;
int main(int c, char** v) {
  Session s(c, v);
  std::vector<std::string> set(v+3, v+c);
  Case cs = read_case(v[1], set);
  double t0 = MPI_Wtime();
  auto r = settle(cs.model, cs.initial, {}, cs.settle, atoi(v[2]), PETSC_COMM_WORLD, [&](const NewtonStep& n){ printf("%6.2f %4dx%-4d %3d res %.3e dt %.2e lin %d\n", MPI_Wtime()-t0, n.grid.radial, n.grid.lateral, n.step, n.residual, n.pseudo_time, n.linear_iterations); fflush(stdout); return true; });
  for (auto& x : r) printf("%d x %d %s res %.2e Nu %.10g %.10g v %.10g T %.10g budget %.1e %s\n", x.grid.radial, x.grid.lateral, x.converged?"ok":"NO", x.residual, x.row.nusselt_outer, x.row.nusselt_inner, x.row.velocity_rms, x.row.temperature_mean, x.row.heat_budget_residual, x.remark.c_str());
  printf("total %.2f\n", MPI_Wtime()-t0);
}
