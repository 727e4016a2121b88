#pragma once

#include <string>
#include <string_view>
#include <utility>
#include <vector>

/// JSON as text, fit to stand within a script element of a page. Pure.
namespace lidwright::json {

/// A string in quotes. `<`, `>`, `&` and what a script could take for the end of a line are written
/// as numbers, so that no text can leave the element; bytes that are no UTF-8 become U+FFFD.
std::string text(std::string_view);

/// Shortest form that reads back to the same double, or with at most `digits` of them; null for
/// what is not finite, which JSON cannot say.
std::string number(double);
std::string number(double, int digits);
std::string numbers(const std::vector<double>&, int digits);
std::string indices(const std::vector<std::size_t>&);

std::string truth(bool);

/// Of items and members that are JSON already.
std::string list(const std::vector<std::string>& items);
using Members = std::vector<std::pair<std::string_view, std::string>>;
std::string object(const Members&);

/// A list of texts.
std::string texts(const std::vector<std::string>&);

}  // namespace lidwright::json
