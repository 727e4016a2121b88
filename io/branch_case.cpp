#include "io/branch_case.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <array>

#include "io/case_entries.hpp"
#include "io/case_units.hpp"

namespace lidwright {
namespace {

/// Keys of a body without which temperatures, heat fluxes, heat sources and the shell are made
/// dimensionless: with another value of one of these they stay as they are written.
constexpr std::array<std::string_view, 5> apart{"gravity", "density", "expansivity",
                                                "heat_capacity", "reference_viscosity"};

[[noreturn]] void refuse_state(const std::string& path, const std::string& key) {
  throw InputError(
      fmt::format("{}: is of the first state of the branch, and what it is of another one along {} "
                  "cannot be told from it; settle at that value alone, with --set",
                  path, key));
}

/// A folder's case is dimensionless, and its body stands apart.
std::string key_in_folder(const Case& first, const std::string& path, const std::string& key) {
  const std::string table = "body.";
  if (!first.body || !key.starts_with(table)) return key;
  const std::string name = key.substr(table.size());
  if (std::find(apart.begin(), apart.end(), name) == apart.end()) refuse_state(path, key);
  return "body_used." + name;
}

double value_in_folder(const Case& first, const std::string& path, const std::string& key,
                       double value) {
  const auto quantity = case_text::key_named(key, path).quantity;
  return case_text::conversion(quantity, first.body).stored(value);
}

}  // namespace

Case case_along(const std::string& text, const std::string& path, const std::string& key,
                double value) {
  const Case first = parse_case(text, path);
  const std::string there = key_in_folder(first, path, key);
  const std::string setting = fmt::format("{}={}", there, value_in_folder(first, path, key, value));
  try {
    return parse_case(text, path, {}, setting);
  } catch (const InputError&) {
    refuse_state(path, key);
  }
}

}  // namespace lidwright
