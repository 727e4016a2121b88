#pragma once

#include <cstdint>
#include <functional>
#include <limits>
#include <optional>
#include <string>
#include <string_view>
#include <variant>
#include <vector>

#include "io/case_draft.hpp"
#include "io/case_units.hpp"

/// The keys of a case file, each described once: reading, checking, writing and the reference page
/// are all made from the one list `all_keys()`.
namespace lidwright::case_text {

/// One of a list of words, bound to an enumeration: the n-th word is the n-th enumerator.
struct Choice {
  std::function<std::optional<int>()> get;
  std::function<void(int)> set;
};

/// An array of tables; the keys of its items are listed right behind it as "path[].name".
struct List {
  std::function<std::size_t()> size;
  std::function<void(std::size_t)> resize;
};

/// Where a key's value lives. The alternative fixes the type in the file.
using Target = std::variant<double*, std::optional<double>*, int*, long*, std::uint64_t*, bool*,
                            std::optional<bool>*, std::string*, Choice, List>;
/// Item: number of the list's item, from 0; ignored by keys outside lists.
using Access = std::function<Target(Draft&, std::size_t item)>;

/// Values allowed, in stored (dimensionless) terms.
struct Range {
  double low = -std::numeric_limits<double>::infinity();
  double high = std::numeric_limits<double>::infinity();
  bool low_open = false, high_open = false;
  bool contains(double x) const {
    return (low_open ? x > low : x >= low) && (high_open ? x < high : x <= high);
  }
};

/// When a key may be given; `when` ends the sentence "applies only ...".
struct Condition {
  std::string_view when;
  bool (*holds)(const Draft&);
};

enum class Need { Required, Default };

struct Key {
  std::string path;
  Access access;
  Need need = Need::Default;
  std::string_view default_text = {};  ///< instead of the default's value
  Quantity quantity = Quantity::Number;
  std::string_view unit = {};  ///< of a number that is the same with and without a body
  Range range = {};
  std::vector<std::string_view> words = {};  ///< of a Choice
  Condition only = {"", [](const Draft&) { return true; }};
  std::string_view help;

  Units units() const { return unit.empty() ? units_of(quantity) : Units{unit, unit}; }
  /// Table ("walls.inner", "" at the top) and name of the key.
  std::string table() const;
  std::string name() const;
  bool in_list() const { return path.find("[].") != std::string::npos; }
};

/// In the order of the reference page. A key comes after those its condition asks, where these are
/// neither words of a list nor true or false: such choices are read first.
const std::vector<Key>& all_keys();
/// Keys of the items of a list.
std::vector<const Key*> item_keys(const Key& list);
/// All defaults, and one item in every list, so that every key's place exists.
Draft draft_of_defaults();
/// "whole number", "one of "box", "annulus"", ...
std::string type_text(const Key&);

}  // namespace lidwright::case_text
