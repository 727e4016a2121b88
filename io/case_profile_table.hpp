#pragma once

#include "io/case_entries.hpp"

/// The table of reference profiles beside a case, a CSV file of our own layout:
///
///     depth [km],density [kg/m^3],gravity [m/s^2]
///     # a comment
///     0,3400,9.1
///     2900,5500,10.2
///
/// Its columns are the keys of reference.levels, in any order, each with its unit: SI in a case
/// with [body], else [d] for the depth and [1] for the rest.
namespace lidwright::case_text {

/// The rows of reference.table, if one is named, become the draft's levels; their places are noted.
/// `case_file`: where relative paths start. Throws InputError.
void read_profile_table(Draft&, Entries&, const std::string& case_file);

}  // namespace lidwright::case_text
