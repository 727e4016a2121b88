#pragma once

/// What the program's exit code says; the table in docs/exit_codes.md is this one.
namespace lidwright {

enum class ExitCode : int {
  Done = 0,
  Fault = 1,        ///< a fault of the program itself
  BadInput = 2,     ///< command line, case file, checkpoint: nothing was computed or written
  NotSolved = 3,    ///< the numerics failed; the last checkpoint stands
  NotWritten = 4,   ///< a result could not be written
  Interrupted = 5,  ///< stopped by a signal or the wall-clock limit; a checkpoint was written
  Disagrees = 6,    ///< verify: a value of ours differs from a published one, or is unresolved
};

}  // namespace lidwright
