#pragma once

#include <optional>
#include <string>
#include <string_view>

/// What is asked of texts again and again. Pure.
namespace lidwright {

/// With every `what`, which is not empty, replaced once: what is put in is not looked at again.
std::string replaced(std::string text, std::string_view what, std::string_view by);

/// The number that the whole text is, without blanks; "nan" and "inf" are numbers.
std::optional<double> number_of(std::string_view text);

}  // namespace lidwright
