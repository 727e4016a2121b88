#pragma once

#include <string>
#include <vector>

#include "app/exit_code.hpp"
#include "app/progress.hpp"
#include "mesh/session.hpp"

/// `lidwright figure`: what a run folder holds, drawn for a paper or for slides.
namespace lidwright {

struct FigureRequest {
  std::string run;                 ///< run folder
  std::vector<std::string> kinds;  ///< what to draw; empty: all that the run has
  std::string format = "png";      ///< png, svg or pdf
  std::string size;                ///< empty: one-column, a film slide
  std::string at;  ///< time, or "snapshot:N"; of profiles a list, or "all"; empty: the last
  std::vector<std::string> with;     ///< over fields: flow-lines, arrows, lid, isotherms
  std::vector<std::string> columns;  ///< of the history; empty: heat flow and velocity
  std::string range;                 ///< colours of a field, "LOW:HIGH"; empty: the extremes
  bool logarithmic = false;          ///< value axis of a history
  bool film = false;                 ///< every snapshot, with one range of colours
  std::string into;                  ///< folder; empty: RUN/figures
  bool overwrite = false;
  ProgressMode progress = ProgressMode::Automatic;
};

/// Throws InputError and OutputError.
ExitCode figure(const Session&, const FigureRequest&);

}  // namespace lidwright
