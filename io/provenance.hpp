#pragma once

#include <mpi.h>

#include <string>
#include <utility>
#include <variant>
#include <vector>

/// Where a run comes from (provenance.toml) and what came out (summary.toml).
namespace lidwright {

/// Version of the program, and the commit it was built from ("+" at the end: with changes), or
/// "unknown".
std::string program_version();
std::string program_commit();

/// Name and version of every library in use, on the machine where this is called.
std::vector<std::pair<std::string, std::string>> library_versions();

/// The time now in UTC, as in 2031-04-05T06:07:08Z.
std::string utc_now();

/// The record of one run: a table of every session (start or resumption) with program, machine and
/// times. A session without `ended` is going on or was killed. All collective; throw OutputError on
/// all ranks.
class Provenance {
 public:
  /// Adds a session to the file, or starts it; `first_step` is where it takes the run up.
  Provenance(MPI_Comm, std::string path, long first_step);

  /// Notes that the session ended now, at `last_step`, and why ("end time reached", "interrupted").
  void end_session(long last_step, const std::string& reason);

 private:
  void write(const std::string& ending);

  MPI_Comm comm_;
  std::string path_, earlier_, session_;
};

/// One line of the summary.
struct SummaryEntry {
  std::string name;  ///< a bare TOML key
  std::variant<double, long, std::string> value;
  std::string unit;  ///< empty: none
  std::string meaning;
};

/// The text of summary.toml. Pure.
std::string summary_text(const std::vector<SummaryEntry>&);

/// Writes it. Collective; throws OutputError on all ranks.
void write_summary(MPI_Comm, const std::string& path, const std::vector<SummaryEntry>&);

/// A TOML string with quotes and escapes. Pure.
std::string toml_string(const std::string&);

}  // namespace lidwright
