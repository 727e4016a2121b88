#include "app/figure_verb.hpp"

#include "io/case_file.hpp"

namespace lidwright {

ExitCode figure(const Session&, const FigureRequest&) { throw InputError("figure: not built yet"); }

}  // namespace lidwright
