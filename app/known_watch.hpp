#pragma once

#include <mpi.h>

#include <string>
#include <vector>

#include "solver/diagnostics.hpp"
#include "solver/settings.hpp"
#include "study/statistics.hpp"

/// Whether a march knows the means it was started for (march.until = "known").
namespace lidwright {

/// Grows with the history, row by row, so that a resumed run asks at the same rows as an
/// undisturbed one. The means are judged at every tenth more rows only: all judgements together
/// cost as much as some ten of the last. Members are collective; the first rank holds the records.
class KnownWatch {
 public:
  KnownWatch(MPI_Comm, const MarchSettings&);

  /// Takes the rows that a resumed run finds in its history; were the means known after the last?
  bool take_up(const std::string& history_path);

  /// After a row was written: are the means known now? The same on all ranks.
  bool known_after(const HistoryRow&);

 private:
  void add(const std::vector<double>& numbers);
  bool judge() const;

  MPI_Comm comm_;
  MarchSettings settings_;
  std::vector<std::string> names_;
  long rows_ = 0, next_ = 0;
  std::vector<double> time_, velocity_;       ///< first rank only
  std::vector<std::vector<double>> records_;  ///< of the names; first rank only
};

}  // namespace lidwright
