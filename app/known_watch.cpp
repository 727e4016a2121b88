#include "app/known_watch.hpp"

#include <algorithm>

#include "app/run_statistics.hpp"
#include "io/atomic_file.hpp"
#include "io/case_file.hpp"
#include "io/collective.hpp"
#include "io/history.hpp"

namespace lidwright {
namespace {

constexpr long first_judgement = 100;
long judgement_after(long rows) { return rows + std::max(20L, rows / 10); }

std::size_t place_of(const std::string& name) {
  const auto columns = history_columns();
  return static_cast<std::size_t>(std::find_if(columns.begin(), columns.end(),
                                               [&](const Column& c) { return c.name == name; }) -
                                  columns.begin());
}

}  // namespace

KnownWatch::KnownWatch(MPI_Comm comm, const MarchSettings& m)
    : comm_(comm),
      settings_(m),
      names_(names_in(m.known_quantities)),
      next_(first_judgement),
      records_(names_.size()) {}

void KnownWatch::add(const std::vector<double>& numbers) {
  time_.push_back(numbers[place_of("time")]);
  velocity_.push_back(numbers[place_of("velocity_rms")]);
  for (std::size_t k = 0; k < names_.size(); ++k)
    records_[k].push_back(numbers[place_of(names_[k])]);
}

bool KnownWatch::take_up(const std::string& history_path) {
  if (settings_.until != MarchUntil::Known) return false;
  on_first_rank<InputError>(comm_, [&] {
    const HistoryTable t = parse_history(read_whole_file(history_path), history_path);
    time_ = column_of(t, "time", history_path);
    velocity_ = column_of(t, "velocity_rms", history_path);
    for (std::size_t k = 0; k < names_.size(); ++k)
      records_[k] = column_of(t, names_[k], history_path);
    rows_ = static_cast<long>(t.rows());
  });
  MPI_Bcast(&rows_, 1, MPI_LONG, 0, comm_);
  while (next_ < rows_) next_ = judgement_after(next_);
  if (next_ > rows_) return false;
  next_ = judgement_after(rows_);
  return judge();
}

bool KnownWatch::judge() const {
  int rank = 0, all = 0;
  MPI_Comm_rank(comm_, &rank);
  if (rank == 0) {
    const StatisticsSettings settings = settings_for(time_, velocity_, settings_);
    all = std::all_of(records_.begin(), records_.end(), [&](const std::vector<double>& record) {
      return why_not_known(summarise(time_, record, settings), settings_.known_error).empty();
    });
  }
  MPI_Bcast(&all, 1, MPI_INT, 0, comm_);
  return all != 0;
}

bool KnownWatch::known_after(const HistoryRow& row) {
  if (settings_.until != MarchUntil::Known) return false;
  int rank = 0;
  MPI_Comm_rank(comm_, &rank);
  if (rank == 0) add(history_numbers(row));
  if (++rows_ < next_) return false;
  next_ = judgement_after(rows_);
  return judge();
}

}  // namespace lidwright
