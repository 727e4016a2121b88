#include "io/collective.hpp"

namespace lidwright {
namespace {

void broadcast_from(MPI_Comm comm, int root, std::string& text) {
  unsigned long size = text.size();
  MPI_Bcast(&size, 1, MPI_UNSIGNED_LONG, root, comm);
  text.resize(size);
  MPI_Bcast(text.data(), static_cast<int>(size), MPI_CHAR, root, comm);
}

}  // namespace

std::string agreed_message(MPI_Comm comm, const std::string& mine) {
  int rank = 0, ranks = 1;
  MPI_Comm_rank(comm, &rank);
  MPI_Comm_size(comm, &ranks);
  const int claim = mine.empty() ? ranks : rank;
  int speaker = ranks;
  MPI_Allreduce(&claim, &speaker, 1, MPI_INT, MPI_MIN, comm);
  if (speaker == ranks) return {};
  std::string message = mine;
  broadcast_from(comm, speaker, message);
  return message;
}

void broadcast(MPI_Comm comm, std::string& text) { broadcast_from(comm, 0, text); }

void broadcast(MPI_Comm comm, std::vector<double>& numbers) {
  unsigned long size = numbers.size();
  MPI_Bcast(&size, 1, MPI_UNSIGNED_LONG, 0, comm);
  numbers.resize(size);
  MPI_Bcast(numbers.data(), static_cast<int>(size), MPI_DOUBLE, 0, comm);
}

}  // namespace lidwright
