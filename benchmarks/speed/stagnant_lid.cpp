/// How fast a stagnant-lid march is: spherical annulus, exponential viscosity, contrast 1e6, Ra 1e7
/// at the bottom viscosity, tolerance 1e-6, after spin-up. One JSON line a measurement on standard
/// output; every ratio compares numbers of this one run on this one machine. docs/performance.md
/// says what was found.
///
///     build/release/speed_stagnant_lid [steps of the long run, 2000] [finest radial cells, 256]
#include <fmt/format.h>
#include <unistd.h>

#include <algorithm>
#include <cstdio>
#include <cstdlib>
#include <numbers>
#include <vector>

#include "benchmarks/speed/measuring.hpp"
#include "mesh/gather.hpp"
#include "mesh/session.hpp"
#include "solver/march.hpp"

namespace lidwright {
namespace {

Model shell(int radial) {
  Model m;
  m.shell = {Shape::SphericalAnnulus, 0.55 / 0.45, 0, 2 * std::numbers::pi, Sides::Periodic};
  m.grid.radial = radial;
  m.grid.lateral = 6 * radial;
  m.rayleigh = 1e7;
  m.viscosity.exponential = ExponentialViscosity{1e6, 1, 1};
  return m;
}

InitialSettings warm_interior() {
  InitialSettings s;
  s.base = InitialBase::BoundaryLayers;
  s.interior = 0.9;
  s.noise = 0.01;
  return s;
}

/// Bytes a second of a[i] = b[i] + c d[i], two reads and a write, best of five.
double triad_bandwidth() {
  const std::size_t n = 20'000'000;
  std::vector<double> a(n, 1.0), b(n, 2.0), c(n, 3.0);
  double best = 1e30;
  for (int repeat = 0; repeat < 5; ++repeat) {
    const double start = now();
    for (std::size_t i = 0; i < n; ++i) a[i] = b[i] + 0.5 * c[i];
    best = std::min(best, now() - start);
  }
  if (a[n / 2] < 0) std::abort();  // keeps the loop
  return 24.0 * static_cast<double>(n) / best;
}

struct StepCost {
  double seconds, applications, factorisations, in_applications, in_factorisations,
      seconds_an_application;
};

StepCost measure(March& march, int steps) {
  const MantleFlow& flow = march.flow();
  const auto applications = flow.applications();
  const auto factorisations = flow.factorisations();
  const double applying = flow.factor().seconds_applying(),
               factorising = flow.factor().seconds_factorising();
  const double start = now();
  for (int n = 0; n < steps; ++n) {
    march.step(1e9);
    (void)march.row();  // what `march` does with history_every = 1
  }
  const double total = now() - start;
  const double count = static_cast<double>(flow.applications() - applications);
  const double applied = flow.factor().seconds_applying() - applying;
  return {total / steps,
          count / steps,
          static_cast<double>(flow.factorisations() - factorisations) / steps,
          applied / total,
          (flow.factor().seconds_factorising() - factorising) / total,
          applied / count};
}

void print(const char* name, int radial, const StepCost& c) {
  line(
      fmt::format("\"measurement\": \"{}\", \"grid\": \"{}x{}\", \"seconds_a_step\": {:.5g}, "
                  "\"microseconds_a_step_and_cell\": {:.4g}, \"applications_a_step\": {:.3g}, "
                  "\"factorisations_a_step\": {:.3g}, \"share_in_applications\": {:.3g}, "
                  "\"share_in_factorisations\": {:.3g}, \"share_elsewhere\": {:.3g}, "
                  "\"seconds_an_application\": {:.4g}",
                  name, radial, 6 * radial, c.seconds, 1e6 * c.seconds / (6.0 * radial * radial),
                  c.applications, c.factorisations, c.in_applications, c.in_factorisations,
                  1 - c.in_applications - c.in_factorisations, c.seconds_an_application));
}

void print_streaming(int radial, const March& march, const StepCost& c, double bandwidth) {
  const double streaming = 2 * march.flow().factor().stored_bytes() / bandwidth;
  line(fmt::format(
      "\"measurement\": \"application against streaming the factor twice\", \"grid\": \"{}x{}\", "
      "\"triad_GB_a_second\": {:.4g}, \"factor_MB\": {:.4g}, \"ratio\": {:.3g}",
      radial, 6 * radial, 1e-9 * bandwidth, 1e-6 * march.flow().factor().stored_bytes(),
      c.seconds_an_application / streaming));
}

StoredTemperature stored(const March& march) {
  const Geometry& g = march.decomposition()->geometry();
  StoredTemperature s;
  s.shell = g.shell();
  for (int i = 0; i <= g.radial_cells(); ++i) s.face_radius.push_back(g.face_radius(i));
  for (int j = 0; j <= g.lateral_cells(); ++j) s.face_lateral.push_back(g.face_lateral(j));
  s.values = gather_to_first(march.temperature());
  return s;
}

void run(int argc, char** argv) {
  const int long_run = argc > 1 ? std::atoi(argv[1]) : 2000;
  const int finest = argc > 2 ? std::atoi(argv[2]) : 256;
  const double bandwidth = triad_bandwidth();
  char host[256] = "";
  gethostname(host, sizeof host - 1);
  line(fmt::format("\"measurement\": \"machine\", \"host\": \"{}\", \"cores\": {}, \"ranks\": 1",
                   host, sysconf(_SC_NPROCESSORS_ONLN)));

  const double start = now();
  March coarse(shell(64), warm_interior(), {}, {}, {}, MPI_COMM_SELF);
  (void)measure(coarse, long_run / 2);
  const StepCost developed = measure(coarse, long_run - long_run / 2);
  line(
      fmt::format("\"measurement\": \"whole run from the start\", \"grid\": \"64x384\", \"steps\": "
                  "{}, \"seconds\": {:.4g}",
                  long_run, now() - start));
  print("developed march", 64, developed);
  print_streaming(64, coarse, developed, bandwidth);

  for (int radial = 128; radial <= finest; radial *= 2) {
    InitialSettings from;
    March march(shell(radial), from, stored(coarse), {}, {}, MPI_COMM_SELF);
    (void)measure(march, 40);  // the interpolated state's start-up
    const StepCost fine = measure(march, 60);
    print("developed march", radial, fine);
    print_streaming(radial, march, fine, bandwidth);
    const double cells = 6.0 * radial * radial;
    line(fmt::format(
        "\"measurement\": \"against 64x384\", \"grid\": \"{}x{}\", "
        "\"ratio_of_seconds_a_step_and_cell\": {:.3g}, "
        "\"peak_KB_a_cell\": {:.3g}",
        radial, 6 * radial, fine.seconds / cells / (developed.seconds / (6.0 * 64 * 64)),
        peak_memory() / cells / 1024));
  }
}

}  // namespace
}  // namespace lidwright

int main(int argc, char** argv) {
  const lidwright::Session session(argc, argv);
  lidwright::run(argc, argv);
}
