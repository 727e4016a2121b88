#include "app/report_verb.hpp"

#include "io/case_file.hpp"

namespace lidwright {

ExitCode report(const Session&, const ReportRequest&) { throw InputError("report: not built yet"); }

}  // namespace lidwright
