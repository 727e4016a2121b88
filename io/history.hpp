#pragma once

#include <mpi.h>

#include <span>
#include <string>
#include <vector>

#include "io/atomic_file.hpp"
#include "io/csv.hpp"
#include "solver/diagnostics.hpp"

/// history.csv: one row a step (or every n-th), written as the run goes.
namespace lidwright {

/// The file while a run writes it. The first rank writes; every member is collective and throws
/// OutputError on all ranks. A row is handed to the system at once (it survives the death of the
/// program) and to the disk by `sync`, which goes before every checkpoint, so that no checkpoint is
/// newer than its history.
class History {
 public:
  /// A new file with its head; replaces what is there.
  static History start(MPI_Comm, const std::string& path);

  /// Goes on after `step`: rows of later steps and a torn last row are dropped, atomically. Throws
  /// InputError when the file is missing or has other columns.
  static History resume(MPI_Comm, const std::string& path, long step);

  /// Step of the last row, -1 while there is none. The same on all ranks.
  long last_step() const { return last_step_; }

  void append(const HistoryRow&);
  void sync();

 private:
  History(MPI_Comm, std::string path);
  void open_for_appending();

  MPI_Comm comm_;
  std::string path_;
  Descriptor file_;  ///< first rank only
  long last_step_ = -1;
};

/// What the columns are, and the numbers of one row in their order.
std::span<const Column> history_columns();
std::vector<double> history_numbers(const HistoryRow&);

/// The file's head (what stands before the first row) and one row, as text.
std::string history_head();
std::string history_row(const HistoryRow&);

/// The file's text without rows after `step` and without what follows a row that is not whole.
/// Throws InputError naming `path` when the head is another one.
std::string history_until(const std::string& text, long step, const std::string& path);

}  // namespace lidwright
