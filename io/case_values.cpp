#include "io/case_values.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <limits>
#include <utility>

namespace lidwright::case_text {
namespace {

/// What a message about a value needs.
struct Given {
  const Key& key;
  std::string path;  ///< with the number of the list's item
  const toml::node& value;
  std::string place;
  Conversion conversion;
  std::string_view unit;

  [[noreturn]] void refuse_as(const std::string& complaint) const {
    refuse(place, fmt::format("{} = {}: {}", path, value_text(value), complaint));
  }
  [[noreturn]] void must_be(const std::string& what) const {
    refuse_as(fmt::format("must be {} ({})", what, key.help));
  }
};

std::string join_bounds(const std::string& low, const std::string& high) {
  return low.empty() || high.empty() ? low + high : low + " and " + high;
}

std::string with_unit(std::string text, std::string_view unit) {
  return unit.empty() || unit == "1" || text.empty() ? text : fmt::format("{} {}", text, unit);
}

std::string number_kind(const Given& given, const char* kind) {
  const std::string allowed = allowed_text(given.key, given.conversion, given.unit);
  return allowed.empty() ? kind : fmt::format("{}, {}", kind, allowed);
}

double read_number(const Given& given) {
  const auto number = given.value.value<double>();
  if (!number || !given.value.is_number()) given.must_be(number_kind(given, "a number"));
  if (!std::isfinite(*number)) given.must_be(number_kind(given, "a finite number"));
  if (given.key.quantity == Quantity::Temperature && given.unit == "K" && *number < 0)
    given.must_be("at least 0 K, it is absolute");
  const double stored = given.conversion.stored(*number);
  if (!std::isfinite(stored)) given.must_be("a number that does not overflow");
  if (!given.key.range.contains(stored))
    given.must_be(allowed_text(given.key, given.conversion, given.unit));
  return stored;
}

template <class Whole>
Whole read_whole(const Given& given) {
  if (!given.value.is_integer()) given.must_be(number_kind(given, "a whole number"));
  const std::int64_t number = *given.value.value<std::int64_t>();
  const bool fits = std::in_range<Whole>(number);
  if (!fits || !given.key.range.contains(static_cast<double>(number)))
    given.must_be(number_kind(given, "a whole number"));
  return static_cast<Whole>(number);
}

bool read_flag(const Given& given) {
  if (!given.value.is_boolean()) given.must_be("true or false");
  return *given.value.value<bool>();
}

std::string read_text(const Given& given) {
  if (!given.value.is_string()) given.must_be("text in quotes");
  return *given.value.value<std::string>();
}

int read_word(const Given& given) {
  const auto& words = given.key.words;
  if (!given.value.is_string()) given.must_be(type_text(given.key));
  const std::string word = *given.value.value<std::string>();
  const auto found = std::find(words.begin(), words.end(), word);
  if (found == words.end())
    given.refuse_as(fmt::format("must be {}{}", type_text(given.key),
                                nearest(word, {words.begin(), words.end()})));
  return static_cast<int>(found - words.begin());
}

/// Stores a value that is not a list.
struct Store {
  const Given& given;
  void operator()(double* x) const { *x = read_number(given); }
  void operator()(std::optional<double>* x) const { *x = read_number(given); }
  void operator()(int* n) const { *n = read_whole<int>(given); }
  void operator()(long* n) const { *n = read_whole<long>(given); }
  void operator()(std::uint64_t* n) const { *n = read_whole<std::uint64_t>(given); }
  void operator()(bool* flag) const { *flag = read_flag(given); }
  void operator()(std::optional<bool>* flag) const { *flag = read_flag(given); }
  void operator()(std::string* text) const { *text = read_text(given); }
  void operator()(const Choice& choice) const { choice.set(read_word(given)); }
  void operator()(const List&) const { given.must_be("a value, not a list"); }
};

Given given_of(const Key& key, const std::string& path, const Entry& entry, const Draft& draft) {
  return {key,
          path,
          *entry.value,
          entry.place,
          conversion(key.quantity, draft.units()),
          unit_in_file(key, draft)};
}

[[noreturn]] void refuse_missing(const Key& key, const std::string& path,
                                 const std::string& place) {
  refuse(place, fmt::format("{} is missing and has no default; give {} ({})", path, type_text(key),
                            key.help));
}

void read_item(const Key& list_key, const std::string& path, const toml::node& node, std::size_t k,
               const std::string& list_place, Draft& draft, Entries& entries) {
  const bool in_file = list_place.starts_with(entries.file());
  const auto place_of = [&](const toml::source_region& source) {
    return in_file ? entries.place_in_file(source) : list_place;
  };
  const toml::table* table = node.as_table();
  if (!table)
    refuse(place_of(node.source()), fmt::format("{} = {}: must be a table {{ ... }} ({})", path,
                                                value_text(node), list_key.help));
  check_item_keys(list_key, *table, path, entries, list_place);
  entries.note_place(path, place_of(table->source()));
  for (const Key* key : item_keys(list_key)) {
    const std::string full = path + "." + key->name();
    const auto found = table->find(key->name());
    if (found == table->end()) {
      if (key->need == Need::Required) refuse_missing(*key, full, place_of(table->source()));
      continue;
    }
    const std::string place = place_of(found->first.source());
    entries.note_place(full, place);
    read_value(*key, full, {&found->second, place}, draft, k);
  }
}

void read_list(const Key& key, const List& items, const Entry& entry, Draft& draft,
               Entries& entries) {
  const toml::array* array = entry.value->as_array();
  if (!array)
    refuse(entry.place, fmt::format("{} = {}: must be a list of tables, [ {{ ... }}, ... ] ({})",
                                    key.path, value_text(*entry.value), key.help));
  items.resize(array->size());
  for (std::size_t k = 0; k < array->size(); ++k)
    read_item(key, fmt::format("{}[{}]", key.path, k + 1), (*array)[k], k, entry.place, draft,
              entries);
}

void read_key(const Key& key, Draft& draft, Entries& entries) {
  const Entry* entry = entries.find(key.path);
  const bool applies = key.only.holds(draft);
  if (!entry && applies && key.need == Need::Required)
    refuse_missing(key, key.path, entries.place(key.path));
  if (!entry) return;
  if (!applies)
    refuse(entry->place, fmt::format("{} = {}: applies only {}; remove it", key.path,
                                     value_text(*entry->value), key.only.when));
  const Target target = key.access(draft, 0);
  if (const auto* list = std::get_if<List>(&target))
    return read_list(key, *list, *entry, draft, entries);
  read_value(key, key.path, *entry, draft);
}

bool is_body_key(const Key& key) { return key.table().starts_with("body"); }

/// One of a list of words, or true or false.
bool is_choice(const Key& key, Draft& draft) {
  return !key.words.empty() || std::holds_alternative<bool*>(key.access(draft, 0));
}

/// Value as TOML; "" for what is not there.
struct Write {
  const Key& key;
  const Conversion& conversion;
  std::string operator()(double* x) const { return number_text(conversion.written(*x)); }
  std::string operator()(std::optional<double>* x) const { return *x ? (*this)(&**x) : ""; }
  std::string operator()(int* n) const { return std::to_string(*n); }
  std::string operator()(long* n) const { return std::to_string(*n); }
  std::string operator()(std::uint64_t* n) const { return std::to_string(*n); }
  std::string operator()(bool* flag) const { return *flag ? "true" : "false"; }
  std::string operator()(std::optional<bool>* flag) const { return *flag ? (*this)(&**flag) : ""; }
  std::string operator()(std::string* text) const;
  std::string operator()(const Choice& choice) const {
    const auto k = choice.get();
    return k ? fmt::format("\"{}\"", key.words[static_cast<std::size_t>(*k)]) : "";
  }
  std::string operator()(const List&) const { return ""; }
};

std::string Write::operator()(std::string* text) const {
  std::string quoted = "\"";
  for (const char c : *text) {
    const auto byte = static_cast<unsigned char>(c);
    if (c == '"' || c == '\\') quoted += '\\';
    if (byte < 0x20 || byte == 0x7F)
      quoted += fmt::format("\\u{:04X}", byte);
    else
      quoted += c;
  }
  return quoted + '"';
}

}  // namespace

void read_body_keys(Draft& draft, Entries& entries) {
  for (const Key& key : all_keys())
    if (is_body_key(key)) read_key(key, draft, entries);
}

void read_other_keys(Draft& draft, Entries& entries) {
  for (const bool choices : {true, false})  // conditions ask choices further down the list
    for (const Key& key : all_keys())
      if (!is_body_key(key) && !key.in_list() && choices == is_choice(key, draft))
        read_key(key, draft, entries);
}

void read_value(const Key& key, const std::string& name, const Entry& entry, Draft& draft,
                std::size_t item) {
  const Given given = given_of(key, name, entry, draft);
  std::visit(Store{given}, key.access(draft, item));
}

std::string_view unit_in_file(const Key& key, const Draft& draft) {
  return draft.si ? key.units().si : key.units().dimensionless;
}

std::string written_value(const Key& key, Draft& draft, std::size_t item) {
  const Conversion there = conversion(key.quantity, draft.units());
  return std::visit(Write{key, there}, key.access(draft, item));
}

std::string number_text(double x) {
  std::string text = fmt::format("{}", x);
  if (std::isfinite(x) && text.find_first_of(".e") == std::string::npos) text += ".0";
  return text;
}

std::string allowed_text(const Key& key, const Conversion& there, std::string_view unit) {
  const Range& range = key.range;
  const auto bound = [&](const char* words, double x) {
    return fmt::format("{} {:.10g}", words, there.written(x));
  };
  std::string low, high;
  if (std::isfinite(range.low))
    low = bound(range.low_open ? "greater than" : "at least", range.low);
  if (std::isfinite(range.high))
    high = bound(range.high_open ? "less than" : "at most", range.high);
  return with_unit(join_bounds(low, high), unit);
}

}  // namespace lidwright::case_text
