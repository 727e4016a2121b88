#pragma once

#include <span>
#include <string>
#include <string_view>
#include <vector>

/// Tables as CSV: `#` lines that say what each column is, then the line of names, then rows.
namespace lidwright {

struct Column {
  std::string_view name;
  std::string_view unit;     ///< "1" for plain numbers
  std::string_view meaning;  ///< definition and sign
};

/// The symbols of units in all tables.
inline constexpr std::string_view units_note =
    "Units: d thickness of the shell, kappa diffusivity, DeltaT temperature scale, k conductivity, "
    "eta reference "
    "viscosity; n = 2 (per unit depth) in box and annulus, n = 3 in the axisymmetric shell and "
    "(per radian across its "
    "plane) in the spherical annulus";

/// "# title", "# note on units", one
/// "# name [unit]: meaning" a column, and the line of names.
std::string table_head(std::string_view title, std::span<const Column> columns);

/// One row; numbers in the shortest form that reads back to the same double.
std::string table_row(std::span<const double> numbers);

/// A whole table of equally long columns.
std::string table(std::string_view title, std::span<const Column> columns,
                  std::span<const std::vector<double>> numbers);

}  // namespace lidwright
