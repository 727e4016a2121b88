#pragma once

#include <chrono>
#include <string>

#include "io/duration.hpp"
#include "solver/diagnostics.hpp"

/// Progress of a run on standard error: one line that is rewritten at a terminal, a line now and
/// then elsewhere.
namespace lidwright {

enum class ProgressMode { Automatic, Always, Never };

class Progress {
 public:
  Progress(ProgressMode, bool first_rank);

  /// `share` of the run that is done, in [0, 1], by which the end is foreseen.
  void show(const HistoryRow&, double share);
  /// Ends the rewritten line.
  void finish();

 private:
  using Clock = std::chrono::steady_clock;
  bool on_, terminal_;
  Clock::time_point start_, shown_;
  double first_share_ = -1;
  bool open_line_ = false;
};

/// A line that says what goes on, for work without a foreseen end: rewritten at a terminal, else
/// written now and then. On one rank.
class WorkLine {
 public:
  explicit WorkLine(ProgressMode);
  ~WorkLine() { clear(); }
  WorkLine(const WorkLine&) = delete;
  WorkLine& operator=(const WorkLine&) = delete;
  /// May be left out when one was shown a moment ago.
  void show(const std::string& text);
  /// Is never left out.
  void show_always(const std::string& text);
  void clear();

 private:
  using Clock = std::chrono::steady_clock;
  bool terminal_, on_;
  Clock::time_point shown_{};
  bool open_line_ = false;
};

}  // namespace lidwright
