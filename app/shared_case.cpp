#include "app/shared_case.hpp"

#include "io/collective.hpp"

namespace lidwright {

Case shared_case(MPI_Comm comm, const std::string& path, const std::vector<std::string>& settings) {
  std::string text;
  on_first_rank<InputError>(comm, [&] { text = write_case(read_case(path, settings)); });
  broadcast(comm, text);
  return parse_case(text, path);
}

}  // namespace lidwright
