#pragma once

#include <CLI/CLI.hpp>
#include <memory>

#include "app/check_verb.hpp"
#include "app/completions.hpp"
#include "app/figure_verb.hpp"
#include "app/march_verb.hpp"
#include "app/onset_verb.hpp"
#include "app/regime_verb.hpp"
#include "app/report_verb.hpp"
#include "app/settle_verb.hpp"
#include "app/verb_list.hpp"
#include "app/verify_verb.hpp"

/// The verbs and their options: the one list from which the command line is read and help,
/// completions and manual pages are made. Include it in few files: the library is slow to compile.
namespace lidwright {

/// What the command line asks of each verb.
struct Requests {
  MarchRequest march;
  SettleRequest settle;
  OnsetRequest onset;
  RegimeRequest regime;
  FigureRequest figure;
  ReportRequest report;
  CheckRequest check;
  VerifyRequest verify;
  bool markdown = false;  ///< keys
  std::string shell;      ///< completions
  std::string manual_of;  ///< a verb; empty: the program
};

/// All verbs; what is read goes into `requests`, which must outlive the result.
std::unique_ptr<CLI::App> command_line(Requests& requests);

/// The same as text, for help, completions and manual pages.
ProgramEntry program_entry(CLI::App&);

}  // namespace lidwright
