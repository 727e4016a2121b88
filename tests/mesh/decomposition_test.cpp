#include "mesh/decomposition.hpp"

#include <gtest/gtest.h>

#include <stdexcept>

#include "mesh/gather.hpp"
#include "tests/support/shells.hpp"

namespace lidwright {
namespace {

class ParallelDecomposition : public testing::TestWithParam<NamedShell> {
 protected:
  std::shared_ptr<const Decomposition> d =
      decompose(GetParam().shell, GetParam().grid, PETSC_COMM_WORLD);
  const Geometry& g = d->geometry();

  int columns(At at) const { return at == At::Cell ? g.lateral_cells() : g.corner_columns(); }
};

template <At at>
double number(Index<at> p) {
  return 100.0 * p.j + p.i;
}

TEST_P(ParallelDecomposition, RanksShareTheColumnsInOrder) {
  for (const At at : {At::Cell, At::Corner}) {
    const Range owned = d->owned(at);
    EXPECT_GE(owned.size(), Decomposition::least_columns);
    EXPECT_EQ(d->sum(owned.size()), columns(at));
    double before = 0;
    const double mine = owned.size();
    MPI_Exscan(&mine, &before, 1, MPI_DOUBLE, MPI_SUM, d->comm());
    EXPECT_EQ(owned.begin, d->rank() == 0 ? 0 : before);
  }
}

template <At at>
void expect_gathered_in_natural_order(std::shared_ptr<const Decomposition> d, int columns) {
  Field<at> f(d);
  for_each_owned<at>(*d, [&](Index<at> p) { f[p] = number(p); });
  const std::vector<double> whole = gather_to_first(f);
  if (d->rank() == 0) {
    std::size_t n = 0;
    for (int j = 0; j < columns; ++j)
      for (int i = 0; i < d->rows(at); ++i, ++n) ASSERT_EQ(whole.at(n), number(Index<at>{i, j}));
    EXPECT_EQ(whole.size(), n);
  }
  Field<at> back(d);
  scatter_from_first(whole, back);
  for_each_owned<at>(*d, [&](Index<at> p) { ASSERT_EQ(back[p], number(p)); });
}

TEST_P(ParallelDecomposition, GatherAndScatterKeepTheNaturalOrder) {
  expect_gathered_in_natural_order<At::Cell>(d, columns(At::Cell));
  expect_gathered_in_natural_order<At::Corner>(d, columns(At::Corner));
}

template <At at>
void expect_ghosts(std::shared_ptr<const Decomposition> d, bool periodic, int columns) {
  Field<at> f(d, -1);
  for_each_owned<at>(*d, [&](Index<at> p) { f[p] = number(p); });
  f.exchange();
  EXPECT_EQ(f.held().begin, periodic ? f.owned().begin - 2 : std::max(0, f.owned().begin - 2));
  EXPECT_EQ(f.held().end, periodic ? f.owned().end + 2 : std::min(columns, f.owned().end + 2));
  for (int j = f.held().begin; j < f.held().end; ++j)
    for (int i = 0; i < f.rows(); ++i) {
      const int source = (j + columns) % columns;
      ASSERT_EQ(f[(Index<at>{i, j})], number(Index<at>{i, source}));
    }
}

TEST_P(ParallelDecomposition, GhostsAreTheNeighboursColumns) {
  expect_ghosts<At::Cell>(d, g.periodic(), columns(At::Cell));
  expect_ghosts<At::Corner>(d, g.periodic(), columns(At::Corner));
}

TEST_P(ParallelDecomposition, GlobalVectorsCarryTheNumbers) {
  Handle<Vec, VecDestroy> v;
  check(DMCreateGlobalVector(d->dm(At::Corner), v.put()));
  CornerField f(d), back(d);
  for_each_owned<At::Corner>(*d, [&](Corner p) { f[p] = number(p); });
  f.exchange();
  f.to_global(v);
  back.from_global(v);
  EXPECT_EQ(f.values(), back.values());
}

TEST_P(ParallelDecomposition, ReductionsAreTheSameOnAllRanks) {
  const double rank = d->rank(), last = d->ranks() - 1;
  EXPECT_EQ(d->sum(rank), last * (last + 1) / 2);
  EXPECT_EQ(d->max(rank), last);
  EXPECT_EQ(d->min(rank), 0);
  std::vector<double> two{1, rank};
  d->sum_in_place(two);
  EXPECT_EQ(two, (std::vector<double>{last + 1, last * (last + 1) / 2}));
}

INSTANTIATE_TEST_SUITE_P(All, ParallelDecomposition, testing::ValuesIn(all_shells(5, 14)),
                         shell_name);

TEST(ParallelTooFewColumns, AreRefusedOnAllRanks) {
  int ranks = 1;
  MPI_Comm_size(PETSC_COMM_WORLD, &ranks);
  const Shell circle{Shape::Annulus, 1, 0, 6, Sides::Periodic};
  EXPECT_THROW(decompose(circle, {4, 4 * ranks - 1, {}, {}}, PETSC_COMM_WORLD),
               std::invalid_argument);
  EXPECT_NO_THROW(decompose(circle, {4, 4 * ranks, {}, {}}, PETSC_COMM_WORLD));
}

}  // namespace
}  // namespace lidwright
