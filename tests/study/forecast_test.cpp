#include "study/forecast.hpp"

#include <gtest/gtest.h>

#include "study/short_number.hpp"
#include "tests/support/mantles.hpp"

namespace lidwright {
namespace {

/// 100 steps of 0.001, each as long as the flow allows, one application each.
Pilot steady_pilot(bool ended) {
  Pilot p;
  p.grid = {16, 16, {}, {}};
  for (int k = 1; k <= 100; ++k) p.steps.push_back({k * 0.001, 0.001, 500, 1, 0});
  p.ended = ended;
  return p;
}

Trial trial(double outflow) {
  Trial t;
  t.setup = 2, t.step = 0.01, t.application = 0.002, t.factorisation = 1, t.applications = 3;
  t.outflow = outflow;
  return t;
}

MarchSettings until(double end) {
  MarchSettings m;
  m.end_time = end;
  return m;
}

TEST(Forecast, StepsGoWithTheFlowThroughCells) {
  // courant 0.5: the pilot's 1/500 a step; twice the outflow on the finer grid: twice the steps.
  const Forecast f = forecast(steady_pilot(true), trial(1000), {}, until(0.1), {}, false);
  EXPECT_NEAR(f.steps, 200, 1e-9);  // snapshots of the start and the end take none
  EXPECT_NEAR(f.step_length, 0.0005, 1e-12);
  EXPECT_EQ(f.bound, StepBound::Flow);
  EXPECT_TRUE(f.covered);
}

TEST(Forecast, SecondsByHand) {
  const OutputPlan plan{1, 0.05, 100, 0.3, 0.1};
  const Forecast f = forecast(steady_pilot(true), trial(500), {}, until(0.1), plan, false);
  EXPECT_NEAR(f.snapshots, 3, 1e-9);
  EXPECT_NEAR(f.steps, 101, 1e-9);      // and one for the snapshot half way
  EXPECT_NEAR(f.checkpoints, 3, 1e-9);  // the first, step 100, the last
  EXPECT_NEAR(f.stepping, 1.01, 1e-9);
  EXPECT_NEAR(f.substitution, 101 * 3 * 0.002, 1e-9);
  EXPECT_NEAR(f.writing, 3 * 0.3 + 3 * 0.1, 1e-9);
  EXPECT_NEAR(f.total(), 2 + 1.01 + 0.606 + 1.2, 1e-9);
}

TEST(Forecast, WhatThePilotDidNotReachIsLikeItsLastHalf) {
  const Forecast f = forecast(steady_pilot(false), trial(500), {}, until(1), {}, false);
  EXPECT_FALSE(f.covered);
  EXPECT_NEAR(f.covered_share, 0.1, 1e-12);
  EXPECT_NEAR(f.steps, 1000, 1e-6);
}

TEST(Forecast, AccuracyDoesNotDependOnTheGrid) {
  // The flow would allow steps of 0.01, the pilot took 0.001: twice the outflow changes nothing.
  Pilot p = steady_pilot(true);
  for (PilotStep& s : p.steps) s.outflow = 50;
  const Forecast f = forecast(p, trial(100), {}, until(0.1), {}, false);
  EXPECT_NEAR(f.steps, 100, 1e-9);
  EXPECT_EQ(f.bound, StepBound::Accuracy);
}

TEST(Forecast, ALimitOfStepsEndsIt) {
  MarchSettings m = until(0.1);
  m.most_steps = 50;
  const Forecast f = forecast(steady_pilot(true), trial(500), {}, m, {}, false);
  EXPECT_NEAR(f.steps, 50, 1e-9);
  EXPECT_NEAR(f.end_time, 0.05, 1e-12);
}

TEST(Forecast, PilotGridKeepsTheShapeOfCells) {
  const Grid coarse = pilot_grid({64, 384, {2, 1}, {}});
  EXPECT_EQ(coarse.radial, 24);
  EXPECT_EQ(coarse.lateral, 144);
  EXPECT_EQ(coarse.radial_grading.first, 2);
  EXPECT_EQ(pilot_grid({20, 40, {}, {}}).radial, 20);
}

TEST(Forecast, ARealPilotAndTrial) {
  MarchInputs in{box_heated_below(), {}, {}, {}, until(0.02)};
  in.initial.modes = {{1, 1, 0.1}};
  const auto silent = [](const std::string&) {};
  const Pilot p = run_pilot(in, {}, 60, silent);
  EXPECT_TRUE(p.ended);
  EXPECT_DOUBLE_EQ(p.steps.back().time, 0.02);
  EXPECT_GT(late_mean(p).nusselt_outer, 0.5);
  const Trial t = run_trial(in, p.last, first_guess_of_step(p, in.model.grid, in.heat), 0.2, false,
                            MPI_COMM_SELF, silent);
  EXPECT_GE(t.steps, 1);
  EXPECT_GT(t.step, 0);
  EXPECT_GT(t.application, 0);
  // Cells of 1/32 against 1/24: the same flow fills them by so much sooner, near enough.
  EXPECT_NEAR(t.outflow / p.steps.back().outflow, 32.0 / 24, 0.3);
}

TEST(ShortNumber, AsPeopleWriteIt) {
  EXPECT_EQ(short_number(0.0421), "0.0421");
  EXPECT_EQ(short_number(1450), "1450");
  EXPECT_EQ(short_number(3.2e6), "3.2e6");
  EXPECT_EQ(short_number(1e-6), "1e-6");
  EXPECT_EQ(short_number(1108639.44, 6), "1.10864e6");
  EXPECT_EQ(short_number(99999.9), "1e5");
  EXPECT_EQ(short_number(12345), "12300");
  EXPECT_EQ(short_number(0), "0");
}

}  // namespace
}  // namespace lidwright
