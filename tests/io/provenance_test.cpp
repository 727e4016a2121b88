#include "io/provenance.hpp"

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <limits>

#include "io/atomic_file.hpp"
#include "io/run_folder.hpp"
#include "tests/io/scratch.hpp"

namespace lidwright {
namespace {

using testing::AllOf;
using testing::HasSubstr;
using testing::MatchesRegex;

int count(const std::string& text, const std::string& part) {
  int n = 0;
  for (std::size_t at = text.find(part); at != std::string::npos; at = text.find(part, at + 1)) ++n;
  return n;
}

TEST(ParallelProvenance, SessionsAddUp) {
  const test::Scratch scratch;
  const std::string path = scratch / "provenance.toml";
  Provenance(MPI_COMM_WORLD, path, 0).end_session(120, "interrupted");
  Provenance(MPI_COMM_WORLD, path, 120);  // killed
  Provenance(MPI_COMM_WORLD, path, 200).end_session(300, "end time \"reached\"");
  const std::string text = read_whole_file(path);
  EXPECT_TRUE(text.starts_with(provenance_mark));
  EXPECT_EQ(count(text, "[[session]]"), 3);
  EXPECT_EQ(count(text, "\nended = "), 2);
  int ranks = 1;
  MPI_Comm_size(MPI_COMM_WORLD, &ranks);
  EXPECT_THAT(text, AllOf(HasSubstr("ranks = " + std::to_string(ranks)),
                          HasSubstr("library.petsc = \"Petsc"), HasSubstr("library.hdf5 = \"1."),
                          HasSubstr("first_step = 200"), HasSubstr("last_step = 300"),
                          HasSubstr(R"(reason = "end time \"reached\"")")));
}

TEST(Provenance, TimeIsUtcInIso8601) {
  EXPECT_THAT(utc_now(), MatchesRegex("[0-9]{4}-[0-9]{2}-[0-9]{2}T[0-9]{2}:[0-9]{2}:[0-9]{2}Z"));
}

TEST(Provenance, EveryLibraryIsNamedWithAVersion) {
  for (const auto& [name, version] : library_versions()) EXPECT_FALSE(version.empty()) << name;
}

TEST(Summary, ValuesAreToml) {
  const std::string text =
      summary_text({{"nusselt_outer", 3.0, "", "Nusselt number"},
                    {"end_time", 1e-20, "d^2/kappa", "time reached"},
                    {"steps", 12L, "", "steps"},
                    {"change", std::numeric_limits<double>::infinity(), "", "rate"},
                    {"stopped", std::string("C:\\x\n"), "", "why"}});
  EXPECT_THAT(text, AllOf(HasSubstr("\nnusselt_outer = 3.0\n"),
                          HasSubstr("# time reached [d^2/kappa]\nend_time = 1e-20\n"),
                          HasSubstr("\nsteps = 12\n"), HasSubstr("\nchange = inf\n"),
                          HasSubstr("\nstopped = \"C:\\\\x\\u000A\"\n")));
}

}  // namespace
}  // namespace lidwright
