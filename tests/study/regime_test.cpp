#include "study/regime.hpp"

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <cmath>
#include <functional>
#include <limits>
#include <numbers>

#include "tests/support/records.hpp"

/// Verdicts on records that are made to be of one regime. What a regime is, is a convention: see
/// the sources in `regime_thresholds`.
namespace lidwright {
namespace {

using std::numbers::pi;
using testing::HasSubstr;
using Law = std::function<double(double)>;  ///< of time
constexpr double nan = std::numeric_limits<double>::quiet_NaN();

/// 800 uneven steps over a time of about 0.8, with the same relative noise in all.
RegimeRecords records(const Law& mobility, double velocity, double nusselt, double noise = 0.05) {
  Dice dice(11);
  const Record r = red_noise(dice, 800, 2);
  RegimeRecords made;
  for (std::size_t k = 0; k < r.series.size(); ++k) {
    const double t = r.series.time[k] / 1000, wave = 1 + noise * (r.series.value[k] - 5);
    made.time.push_back(t);
    made.velocity.push_back(velocity * wave);
    made.surface_velocity.push_back(velocity * mobility(t) * wave * wave);
    made.nusselt.push_back(nusselt * wave);
  }
  return made;
}
Law always(double m) {
  return [m](double) { return m; };
}

TEST(Regime, IsToldByMobility) {
  const auto regime = [](double m) { return judge_regime(records(always(m), 300, 8)).regime; };
  EXPECT_EQ(regime(0.003), Regime::Stagnant);
  EXPECT_EQ(regime(0.05), Regime::Stagnant);
  EXPECT_EQ(regime(0.3), Regime::Sluggish);
  EXPECT_EQ(regime(1.1), Regime::Mobile);
}

/// A slow surface over a thin boundary layer is stagnant only if it stays in place while heat
/// crosses the lid: U_0/Nu^2 = 300 0.05/3^2 = 1.7.
TEST(Regime, AStagnantLidStaysWhileHeatCrossesIt) {
  EXPECT_EQ(judge_regime(records(always(0.05), 300, 3)).regime, Regime::Sluggish);
}

TEST(Regime, EpisodicIsBelowAndAbove) {
  const auto overturns = [](double share) {
    return records([share](double t) { return std::fmod(t, 0.05) < 0.05 * share ? 1.2 : 0.01; },
                   300, 8);
  };
  const RegimeVerdict v = judge_regime(overturns(0.2));
  EXPECT_EQ(v.regime, Regime::Episodic) << v.why_undecided;
  EXPECT_THAT(v.evidence.front(), HasSubstr("period of 0.05"));
  // Between the extremes but never near them.
  const RegimeVerdict mild = judge_regime(
      records([](double t) { return 0.4 + 0.2 * std::sin(2 * pi * t / 0.05); }, 300, 8));
  EXPECT_EQ(mild.regime, Regime::Sluggish) << mild.why_undecided;
}

/// Decided without a doubt, but for a threshold that is near.
TEST(Regime, OfASteadyStateIsCertainUnlessNearAThreshold) {
  const RegimeVerdict clear = judge_regime(records(always(0.05), 300, 8, 0));
  EXPECT_EQ(clear.regime, Regime::Stagnant) << clear.why_undecided;
  EXPECT_EQ(clear.probability, 1);
  const RegimeVerdict near = judge_regime(records(always(0.0999), 300, 8, 0));
  EXPECT_EQ(near.regime, Regime::Undecided);
  EXPECT_EQ(near.likeliest, Regime::Stagnant);
  // The chance that a normal variable of deviation 0.02 stays below log(0.1/0.0999).
  const double chance = 0.5 * (1 + std::erf(std::log(0.1 / 0.0999) / 0.02 / std::sqrt(2.0)));
  EXPECT_NEAR(near.probability, chance, 3 * 0.5 / std::sqrt(400.0));
  EXPECT_THAT(near.why_undecided, HasSubstr("only"));
}

TEST(Regime, EvidenceNamesNumbersAndThresholds) {
  const RegimeVerdict v = judge_regime(records(always(0.003), 300, 8));
  EXPECT_THAT(v.evidence.front(), HasSubstr("mobility 0.003"));
  EXPECT_THAT(v.evidence.front(), HasSubstr("below 0.01"));
  RegimeRecords with_lid = records(always(0.003), 300, 8);
  with_lid.lid_thickness.assign(with_lid.time.size(), 0.25);
  with_lid.lid_thickness[10] = nan;
  EXPECT_THAT(judge_regime(with_lid).evidence.back(), HasSubstr("lid 0.25"));
}

// --- shells at rest ---------------------------------------------------------------------------

RegimeRecords dying(double growth, double height, double end = 2) {
  RegimeRecords r;
  for (int k = 0; k <= 300; ++k) {
    r.time.push_back(end * k / 300);
    const double v = height * std::exp(growth * r.time.back());
    r.velocity.push_back(v);
    r.surface_velocity.push_back(0.7 * v);
    r.nusselt.push_back(1 + 1e-3 * v * v);
  }
  return r;
}

TEST(RegimeAtRest, IsNotConvecting) {
  const RegimeVerdict fading = judge_regime(dying(-5, 20));
  EXPECT_EQ(fading.regime, Regime::NotConvecting);
  EXPECT_EQ(fading.probability, 1);
  EXPECT_EQ(judge_regime(dying(0, 0)).regime, Regime::NotConvecting);
  RegimeRecords heated = dying(0, 0.2);  // at rest, Nu of the outer wall by the sources
  heated.sources = true;
  heated.nusselt.assign(heated.time.size(), 3.5);
  EXPECT_EQ(judge_regime(heated).regime, Regime::NotConvecting);
}

TEST(RegimeAtRest, WithoutSourcesTheNusseltNumberTells) {
  RegimeRecords weak = records(always(0.3), 2, 1.002, 1e-4);
  for (double& t : weak.time) t *= 10;
  EXPECT_EQ(judge_regime(weak).regime, Regime::NotConvecting);
  weak.sources = true;
  EXPECT_EQ(judge_regime(weak).regime, Regime::Sluggish);
}

/// A disturbance that grows is slow at first; a short record of slow flow is no rest.
TEST(RegimeAtRest, IsNotTheBeginningOfConvection) {
  EXPECT_EQ(judge_regime(dying(3, 1e-4)).regime, Regime::Undecided);
  EXPECT_EQ(judge_regime(dying(-5, 0.5, 0.01)).regime, Regime::Undecided);
}

// --- undecided --------------------------------------------------------------------------------

TEST(RegimeUndecided, WhenARecordIsTooShort) {
  RegimeRecords r = records(always(0.05), 300, 8);
  for (auto* column : {&r.time, &r.velocity, &r.surface_velocity, &r.nusselt}) column->resize(25);
  const RegimeVerdict v = judge_regime(r);
  EXPECT_EQ(v.regime, Regime::Undecided);
  EXPECT_THAT(v.why_undecided, HasSubstr("too short"));
  EXPECT_EQ(v.likeliest, Regime::Stagnant);
  EXPECT_EQ(judge_regime({}).regime, Regime::Undecided);
}

/// 800 rows, but no time for one journey from wall to wall.
TEST(RegimeUndecided, WhenTheFlowHasGoneNowhere) {
  RegimeRecords r = records(always(0.05), 300, 8);
  for (double& t : r.time) t *= 1e-3;
  EXPECT_THAT(judge_regime(r).why_undecided, HasSubstr("too short"));
}

TEST(RegimeUndecided, WhenMobilityDrifts) {
  const RegimeVerdict v = judge_regime(records([](double t) { return 0.05 + 0.5 * t; }, 300, 8));
  EXPECT_EQ(v.regime, Regime::Undecided);
  EXPECT_THAT(v.why_undecided, HasSubstr("mobility: "));
}

/// But not when it drifts far below any threshold.
TEST(RegimeUndecided, NotByDriftsThatCannotMatter) {
  const RegimeVerdict v = judge_regime(records([](double t) { return 1e-4 * (1 + t); }, 300, 8));
  EXPECT_EQ(v.regime, Regime::Stagnant) << v.why_undecided;
}

TEST(RegimeThresholds, AreAllInTheTable) {
  RegimeThresholds t;
  EXPECT_EQ(regime_thresholds().size() * sizeof(double), sizeof t);
  for (const RegimeThreshold& row : regime_thresholds()) {
    EXPECT_GE(t.*row.value, row.low) << row.name;
    EXPECT_LE(t.*row.value, row.high) << row.name;
    EXPECT_NE(std::string(row.source), "") << row.name;
    t.*row.value = -1;
  }
  for (const RegimeThreshold& row : regime_thresholds()) EXPECT_EQ(t.*row.value, -1) << row.name;
  EXPECT_EQ(judge_regime(records(always(0.3), 300, 8), {.mobile = 0.2}).regime, Regime::Mobile);
}

}  // namespace
}  // namespace lidwright
