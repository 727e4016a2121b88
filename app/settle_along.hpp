#pragma once

#include "app/settle_job.hpp"

/// `lidwright settle --along`: a branch of steady states.
namespace lidwright {

/// Collective; throws SolveError and OutputError.
ExitCode settle_along(const SettleJob&, const CaseAlong&, const RunPaths&, SettleWatch&);

}  // namespace lidwright
