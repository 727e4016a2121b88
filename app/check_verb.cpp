#include "app/check_verb.hpp"

#include "io/case_file.hpp"

namespace lidwright {

ExitCode check(const Session&, const CheckRequest&) { throw InputError("check: not built yet"); }

}  // namespace lidwright
