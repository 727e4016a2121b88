/// How Newton's method does on a lid that yields: spherical annulus, exponential viscosity,
/// contrast 1e6, Ra 1e7 at the bottom viscosity, yielding by the smaller viscosity. From cold to
/// 1e-8, then a march at 1e-6 against the same march without yielding. One JSON line a measurement
/// on standard output; every ratio compares numbers of this one run on this one machine.
/// docs/performance.md says what was found.
///
///     build/release/speed_yielding_lid [radial cells, 128] [steps, 200]
#include <algorithm>
#include <cstdlib>
#include <numbers>
#include <vector>

#include "benchmarks/speed/measuring.hpp"
#include "mesh/session.hpp"
#include "solver/march.hpp"

namespace lidwright {
namespace {

Model shell(int radial, bool yields) {
  Model m;
  m.shell = {Shape::SphericalAnnulus, 0.55 / 0.45, 0, 2 * std::numbers::pi, Sides::Periodic};
  m.grid.radial = radial;
  m.grid.lateral = 6 * radial;
  m.rayleigh = 1e7;
  m.viscosity.exponential = ExponentialViscosity{1e6, 1, 1};
  if (yields) {
    m.yielding = Yielding{};
    m.yielding->cohesion = 3e3;
    m.yielding->floor = 5;
  }
  return m;
}

InitialSettings eight_plumes() {
  InitialSettings s;
  s.base = InitialBase::BoundaryLayers;
  s.interior = 0.9;
  s.noise = 0.05;
  s.modes.push_back({8, 1, 0.05});
  return s;
}

void from_cold(int radial) {
  FlowSettings strict;
  strict.tolerance = 1e-8;
  const double start = now();
  const March march(shell(radial, true), eight_plumes(), {}, strict, {}, MPI_COMM_SELF);
  const FlowReport& r = march.flow().last_report();
  line(
      fmt::format("\"measurement\": \"from cold\", \"grid\": \"{}x{}\", \"newton_steps\": {}, "
                  "\"fixed_point_steps\": {}, \"iterations\": {}, \"error\": {:.2e}, "
                  "\"yielding_share\": {:.3f}, \"factorisations\": {}, \"seconds\": {:.3g}",
                  radial, 6 * radial, r.newton_steps, r.fixed_point_steps, r.iterations, r.error,
                  r.yielding_share, march.flow().factorisations(), now() - start));
}

double median(std::vector<double> x) {
  std::nth_element(x.begin(), x.begin() + static_cast<long>(x.size() / 2), x.end());
  return x[x.size() / 2];
}

/// Median seconds of a step.
double steps(int radial, bool yields, int count) {
  March march(shell(radial, yields), eight_plumes(), {}, {}, {}, MPI_COMM_SELF);
  std::vector<double> newton, seconds, shares;
  double total = 0;
  for (int n = 0; n < count; ++n) {
    const double start = now();
    march.step(1e9);
    (void)march.row();  // what `march` does with history_every = 1
    seconds.push_back(now() - start);
    total += seconds.back();
    newton.push_back(march.flow().last_report().newton_steps);
    shares.push_back(march.flow().last_report().yielding_share);
  }
  line(fmt::format(
      "\"measurement\": \"march, {}\", \"grid\": \"{}x{}\", \"steps\": {}, "
      "\"median_newton_steps\": {}, \"most_newton_steps\": {}, \"fixed_point_steps\": {}, "
      "\"least_yielding_share\": {:.3f}, \"applications_a_step\": {:.3g}, "
      "\"factorisations_a_step\": {:.3g}, \"median_seconds_a_step\": {:.3g}, "
      "\"mean_seconds_a_step\": {:.3g}",
      yields ? "yielding" : "linear", radial, 6 * radial, count, median(newton),
      *std::max_element(newton.begin(), newton.end()), march.flow().fixed_point_steps(),
      *std::min_element(shares.begin(), shares.end()),
      static_cast<double>(march.flow().applications()) / count,
      static_cast<double>(march.flow().factorisations()) / count, median(seconds), total / count));
  return total / count;
}

}  // namespace
}  // namespace lidwright

int main(int argc, char** argv) {
  using namespace lidwright;
  const Session session(argc, argv);
  const int radial = argc > 1 ? std::atoi(argv[1]) : 128;
  const int count = argc > 2 ? std::atoi(argv[2]) : 200;
  from_cold(radial);
  const double yielding = steps(radial, true, count), linear = steps(radial, false, count);
  line(
      fmt::format("\"measurement\": \"yielding against linear\", \"grid\": \"{}x{}\", "
                  "\"ratio_of_seconds_a_step\": {:.3g}",
                  radial, 6 * radial, yielding / linear));
}
