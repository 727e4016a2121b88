#include <fmt/format.h>

#include "io/case_file.hpp"
#include "io/case_values.hpp"
#include "io/wrapped.hpp"

namespace lidwright {
namespace {

using namespace case_text;

constexpr const char* introduction =
    "A case is one TOML file. It is dimensionless with [numbers], or in SI units with [body]; one "
    "of the two "
    "must be there. Without a body, lengths are in shell thicknesses d, times in d^2/kappa, "
    "temperatures in "
    "units of the temperature drop DeltaT above the surface temperature. With a body, every number "
    "is in the "
    "unit given second and is converted on reading; defaults stay what they are in dimensionless "
    "terms. "
    "Factors of the viscosity that are present multiply; the rates of the two creeps add; the "
    "cut-offs come last (docs/rheology.md). Keys of a list "
    "are written "
    "list[].key. On the command line, --set table.key=value replaces what the file says.";

constexpr const char* body_used_note =
    "The keys of [body] once more. The program writes this table when it stores a case that was "
    "read with "
    "[body]: all other numbers are then dimensionless, exactly as the run used them, and the body "
    "is kept "
    "beside them.";

std::string default_of(const Key& key) {
  if (!key.default_text.empty()) return std::string(key.default_text);
  if (key.need == Need::Required) return "required";
  Draft draft = draft_of_defaults();
  const std::string value = written_value(key, draft);
  return value.empty() ? "none" : value;
}

/// "d | km", or one unit where both are the same.
std::string unit_of(const Key& key, const char* between) {
  const Units units = key.units();
  if (units.dimensionless == units.si) return std::string(units.si);
  return fmt::format("{}{}{}", units.dimensionless, between, units.si);
}

std::string allowed_of(const Key& key) {
  const std::string allowed = allowed_text(key, Conversion{}, "");
  if (!allowed.empty() && key.quantity == Quantity::Kilometres) return "greater than 0";
  return allowed;
}

std::string only_of(const Key& key) {
  const bool plain =
      key.only.when.empty() || key.only.when == fmt::format("with [{}]", key.table());
  return plain ? "" : fmt::format("Only {}.", key.only.when);
}

/// Calls head(table) at each new table and body(key) for each key, without the copies in
/// [body_used].
template <class Head, class Entry>
void for_each_key(const Head& head, const Entry& entry) {
  std::string table = "no table yet";
  for (const Key& key : all_keys()) {
    const bool copy = key.table() == "body_used";
    if (key.table() != table) head(key.table());
    table = key.table();
    if (!copy) entry(key);
  }
}

/// Path below the table: "layers[].below".
std::string name_in_table(const Key& key) {
  return key.table().empty() ? key.path : key.path.substr(key.table().size() + 1);
}

std::string text_of(const Key& key) {
  std::string facts =
      fmt::format("{}; {}", type_text(key), key.need == Need::Required ? "" : "default ") +
      default_of(key);
  if (const std::string unit = unit_of(key, " | "); !unit.empty()) facts += "; unit " + unit;
  if (const std::string allowed = allowed_of(key); !allowed.empty()) facts += "; " + allowed;
  return fmt::format("  {}\n{}{}{}", name_in_table(key), wrapped(std::string(key.help), 6),
                     wrapped(facts, 6), wrapped(only_of(key), 6));
}

std::string cell(std::string text) {
  for (std::size_t at = 0; (at = text.find('|', at)) != std::string::npos; at += 2)
    text.insert(at, 1, '\\');
  return text;
}

std::string markdown_of(const Key& key) {
  const std::string only = only_of(key);
  const std::string help = std::string(key.help) + (only.empty() ? "." : ". " + only);
  return fmt::format("| `{}` | {} | {} | {} | {} | {} |\n", name_in_table(key),
                     cell(type_text(key)), cell(default_of(key)), cell(unit_of(key, "; ")),
                     cell(allowed_of(key)), cell(help));
}

}  // namespace

std::string keys_as_text() {
  std::string text = "Keys of a case file\n\n" + wrapped(introduction, 0);
  const auto head = [&](const std::string& table) {
    text += table.empty() ? "\ntop of the file\n" : fmt::format("\n[{}]\n", table);
    if (table == "body_used") text += wrapped(body_used_note, 2);
  };
  for_each_key(head, [&](const Key& key) { text += text_of(key); });
  return text;
}

std::string keys_as_markdown() {
  std::string text = fmt::format(
      "# Keys of a case file\n\nMade by `lidwright keys --markdown`; change io/case_*keys.cpp, not "
      "this page.\n\n{}\n",
      introduction);
  const auto head = [&](const std::string& table) {
    text += table.empty() ? "\n## Top of the file\n\n" : fmt::format("\n## [{}]\n\n", table);
    if (table == "body_used")
      text += fmt::format("{}\n", body_used_note);
    else
      text +=
          "| key | type | default | unit (with [numbers]; with [body]) | allowed | meaning |\n"
          "|---|---|---|---|---|---|\n";
  };
  for_each_key(head, [&](const Key& key) { text += markdown_of(key); });
  return text;
}

}  // namespace lidwright
