/// How Newton's method does on a lid that yields: spherical annulus, exponential viscosity,
/// contrast 1e6, Ra 1e7 at the bottom viscosity, a thick cold lid on eight plumes, yielding by the
/// smaller viscosity with a floor of 1e-4 of the surface viscosity, and a harder one of 5e-6. From
/// cold to 1e-8, then a march at 1e-6 against the same march without yielding. One JSON line a
/// measurement on standard output; every ratio compares numbers of this one run on this one
/// machine. docs/performance.md says what was found.
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

constexpr double no_yielding = 0, usual_floor = 100, hard_floor = 5;

Model shell(int radial, double floor) {
  Model m;
  m.shell = {Shape::SphericalAnnulus, 0.55 / 0.45, 0, 2 * std::numbers::pi, Sides::Periodic};
  m.grid.radial = radial;
  m.grid.lateral = 6 * radial;
  m.rayleigh = 1e7;
  m.viscosity.exponential = ExponentialViscosity{1e6, 1, 1};
  if (floor > 0) {
    m.yielding = Yielding{};
    m.yielding->cohesion = 3e3;
    m.yielding->floor = floor;
  }
  return m;
}

InitialSettings eight_plumes() {
  InitialSettings s;
  s.base = InitialBase::BoundaryLayers;
  s.interior = 0.9;
  s.layer_thickness = 0.25;
  s.noise = 0.05;
  s.modes.push_back({8, 1, 0.05});
  return s;
}

/// What every line says first.
std::string head(const char* measurement, int radial, double floor) {
  return fmt::format("\"measurement\": \"{}\", \"floor\": {}, \"grid\": \"{}x{}\", ", measurement,
                     floor, radial, 6 * radial);
}

void from_cold(int radial, double floor) {
  FlowSettings strict;
  strict.tolerance = 1e-8;
  const double start = now();
  const March march(shell(radial, floor), eight_plumes(), {}, strict, {}, MPI_COMM_SELF);
  const FlowReport& r = march.flow().last_report();
  line(head("from cold", radial, floor) +
       fmt::format("\"newton_steps\": {}, \"fixed_point_steps\": {}, \"iterations\": {}, "
                   "\"error\": {:.2e}, \"yielding_share\": {:.3f}, \"factorisations\": {}, "
                   "\"seconds\": {:.3g}",
                   r.newton_steps, r.fixed_point_steps, r.iterations, r.error, r.yielding_share,
                   march.flow().factorisations(), now() - start));
}

double median(std::vector<double> x) {
  std::nth_element(x.begin(), x.begin() + static_cast<long>(x.size() / 2), x.end());
  return x[x.size() / 2];
}

/// Mean seconds of a step.
double steps(int radial, double floor, int count) {
  March march(shell(radial, floor), eight_plumes(), {}, {}, {}, MPI_COMM_SELF);
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
  line(head("march", radial, floor) +
       fmt::format("\"steps\": {}, \"median_newton_steps\": {}, \"most_newton_steps\": {}, "
                   "\"fixed_point_steps\": {}, \"least_yielding_share\": {:.3f}, "
                   "\"applications_a_step\": {:.3g}, \"factorisations_a_step\": {:.3g}, "
                   "\"median_seconds_a_step\": {:.3g}, \"mean_seconds_a_step\": {:.3g}",
                   count, median(newton), *std::max_element(newton.begin(), newton.end()),
                   march.flow().fixed_point_steps(),
                   *std::min_element(shares.begin(), shares.end()),
                   static_cast<double>(march.flow().applications()) / count,
                   static_cast<double>(march.flow().factorisations()) / count, median(seconds),
                   total / count));
  return total / count;
}

}  // namespace
}  // namespace lidwright

int main(int argc, char** argv) {
  using namespace lidwright;
  const Session session(argc, argv);
  const int radial = argc > 1 ? std::atoi(argv[1]) : 128;
  const int count = argc > 2 ? std::atoi(argv[2]) : 200;
  const double linear = steps(radial, no_yielding, count);
  for (const double floor : {usual_floor, hard_floor}) {
    from_cold(radial, floor);
    const double yielding = steps(radial, floor, count);
    line(head("yielding against linear", radial, floor) +
         fmt::format("\"ratio_of_seconds_a_step\": {:.3g}", yielding / linear));
  }
}
