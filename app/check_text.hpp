#pragma once

#include <string>

#include "app/check_findings.hpp"
#include "study/short_number.hpp"

/// The words of `lidwright check`, 80 columns wide.
namespace lidwright {

std::string check_for_people(const CheckFindings&);

// Its parts, each ends with a line feed.
std::string defaults_text(const CheckFindings&);
std::string numbers_text(const CheckFindings&);
std::string layers_text(const CheckFindings&);
std::string laws_text(const CheckFindings&);
std::string cost_text(const CheckFindings&);

/// A line "  name                  text", what does not fit goes on below; columns of the name.
std::string check_line(const std::string& name, const std::string& text, std::size_t columns = 22);

/// "4.2 s", "13 min 20 s".
std::string cost_duration(double seconds);

/// What the run writes, and what that takes on a common machine (docs/check.md says how it was
/// measured).
OutputPlan output_plan(const Case&);
/// Memory of pictures, snapshots' files and the history's table, bytes.
double writers_memory(const Case&, const Forecast&);

}  // namespace lidwright
