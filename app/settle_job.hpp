#pragma once

#include <chrono>
#include <optional>

#include "app/along_option.hpp"
#include "app/settle_verb.hpp"
#include "app/settle_watch.hpp"
#include "io/provenance.hpp"
#include "io/run_folder.hpp"

/// What one call of `lidwright settle` works on, and how it ends. Functions are collective.
namespace lidwright {

struct SettleJob {
  using Clock = std::chrono::steady_clock;

  const Session& session;
  const SettleRequest& request;
  Case c;  ///< along a branch, at the first value
  StoredTemperature stored;
  std::optional<CaseAlong> along;
  Clock::time_point start;

  double seconds() const { return std::chrono::duration<double>(Clock::now() - start).count(); }
};

/// Writes a file on the first rank; OutputError on all.
void write_text(MPI_Comm, const std::string& path, const std::string& text);

/// Fields, picture, checkpoint and newton.csv of what was found, steady or not.
void write_found(const SettleJob&, const RunPaths&, const SteadyState&, const SettleWatch&);

/// summary.toml and the summary on standard output, with what else there is to say.
void end_with(const SettleJob&, const RunPaths&, const SteadyState&, const SettleWatch&,
              const std::vector<SummaryEntry>& more, const std::string& text);

/// Throws SolveError when it is not steady, for another reason than being stopped.
ExitCode code_for(const SteadyState&, const RunPaths&);

}  // namespace lidwright
