#include "app/progress.hpp"

#include <fmt/format.h>
#include <unistd.h>

#include <cmath>
#include <cstdio>

namespace lidwright {

WorkLine::WorkLine(ProgressMode mode)
    : terminal_(isatty(STDERR_FILENO) != 0),
      on_(mode == ProgressMode::Always || (mode == ProgressMode::Automatic && terminal_)) {}

void WorkLine::show(const std::string& text) {
  const auto pause = std::chrono::milliseconds(terminal_ ? 200 : 5000);
  if (Clock::now() - shown_ >= pause) show_always(text);
}

void WorkLine::show_always(const std::string& text) {
  if (!on_) return;
  shown_ = Clock::now();
  fmt::print(stderr, "{}{}{}", terminal_ ? "\r\033[K" : "", text, terminal_ ? "" : "\n");
  std::fflush(stderr);
  open_line_ = terminal_;
}

void WorkLine::clear() {
  if (open_line_) fmt::print(stderr, "\r\033[K");
  open_line_ = false;
}

Progress::Progress(ProgressMode mode, bool first_rank)
    : on_(first_rank && (mode == ProgressMode::Always ||
                         (mode == ProgressMode::Automatic && isatty(STDERR_FILENO)))),
      terminal_(isatty(STDERR_FILENO) != 0),
      start_(Clock::now()),
      shown_(start_ - std::chrono::hours(1)) {}

void Progress::show(const HistoryRow& row, double share) {
  if (!on_) return;
  const auto now = Clock::now();
  if (first_share_ < 0) first_share_ = share;
  if (std::chrono::duration<double>(now - shown_).count() < (terminal_ ? 0.2 : 5.0)) return;
  shown_ = now;
  const double elapsed = std::chrono::duration<double>(now - start_).count();
  const double gained = share - first_share_;
  const std::string end = gained > 1e-6 ? duration_text(elapsed * (1 - share) / gained) : "?";
  const std::string line = fmt::format(
      "{:3.0f} %  step {}  time {:.5g}  Nu {:.4g} outer, {:.4g} inner  v_rms {:.4g}  ends in {}",
      std::floor(100 * share), row.step, row.time, row.nusselt_outer, row.nusselt_inner,
      row.velocity_rms, end);
  fmt::print(stderr, "{}{}{}", terminal_ ? "\r\033[K" : "", line, terminal_ ? "" : "\n");
  std::fflush(stderr);
  open_line_ = terminal_;
}

void Progress::finish() {
  if (open_line_) fmt::print(stderr, "\r\033[K");
  open_line_ = false;
}

}  // namespace lidwright
