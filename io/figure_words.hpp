#pragma once

#include <string>

#include "io/case_file.hpp"
#include "io/picture.hpp"

/// Quantities of the tables as figures name and measure them. Texts are Pango markup. Pure.
namespace lidwright {

/// "nusselt_outer" as "Nusselt number, outer wall".
std::string column_words(const std::string& column);

/// A unit of the tables, "kappa/d", with its symbols in italics; "d^(n-2)" as it is in this shape.
std::string unit_markup(const std::string& of_a_table, Shape);

/// How the values of a column are shown: in the body's units where the case has a body and they
/// are in use, else in the program's.
Shown shown_column(const std::string& column, const std::string& unit, const Case&);

/// How times up to the longest are shown: long ones of a body in Gyr.
Shown shown_time(double longest, const Case&);

/// "4.81 \u00b1 0.02", to as many digits as the error leaves.
std::string with_error(double value, double error);

}  // namespace lidwright
