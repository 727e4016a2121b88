#pragma once

#include <optional>
#include <string>

#include "physics/scales.hpp"

/// Numbers and units as a page says them. Pure, plain UTF-8.
namespace lidwright::page {

/// A number to as many digits as its error leaves: "12.34" and "0.05"; to four digits and an empty
/// error when the error is not known (nan); an error of 0 stands for an exact number. "not defined"
/// for what is not finite.
struct Stated {
  std::string value, error;
};
Stated stated(double value, double error);

/// Four digits, with a true minus sign and powers of ten: "1.234 × 10⁻⁵".
std::string digits(double value, int count = 4);

/// The same to at most `count` digits, without noughts at the end: "10000", "10⁻⁹".
std::string compact(double value, int count = 6);

/// The same with a unit as `unit` gives it, which may be none.
std::string with_unit(double value, const std::string& written);

/// "d^2/kappa" as "d²/κ"; "1" as nothing.
std::string unit(const std::string& of_a_table);

/// (value of the program) * scale + offset in the body's units.
struct InBody {
  double scale = 1, offset = 0;
  std::string unit;
};
/// For a unit of the tables, that of a body; none where the page gives the program's only.
/// `absolute`: of a temperature above the surface's, not a difference of two.
std::optional<InBody> in_body(const std::string& of_a_table, const Body&, bool absolute = false);

/// "time 0.25 d²/κ", with a body "time 0.25 d²/κ, 1200 Myr".
std::string time_words(double time, const std::optional<Body>&);

}  // namespace lidwright::page
