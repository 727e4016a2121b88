#pragma once

#include <vector>

#include "app/progress.hpp"
#include "solver/settle.hpp"

/// What is seen of a steady state while it is looked for: progress, the record of all steps, and
/// whether someone asked to stop. On the first rank, the others see nothing.
namespace lidwright {

class SettleWatch {
 public:
  explicit SettleWatch(ProgressMode mode) : line_(mode) {}

  /// Refers to this watch.
  SettleObserver observer();
  void say(const std::string& text) { line_.show_always(text); }
  void finish() { line_.clear(); }
  const std::vector<NewtonStep>& steps() const { return steps_; }

 private:
  bool see(const NewtonStep&);

  WorkLine line_;
  std::vector<NewtonStep> steps_;
};

}  // namespace lidwright
