#include "io/case_profile_table.hpp"

#include <fmt/format.h>
#include <fmt/ranges.h>

#include <algorithm>
#include <charconv>
#include <filesystem>

#include "io/case_values.hpp"
#include "io/text_file.hpp"

namespace lidwright::case_text {
namespace {

constexpr const char* list_path = "reference.levels";
constexpr std::string_view blanks = " \t\r";

struct Cell {
  std::string text;
  std::string place;  ///< "profile.csv:3:7"
};
struct Line {
  std::string place;  ///< "profile.csv:3"
  std::vector<Cell> cells;
};

Cell trimmed(std::string_view text, const std::string& line_place, std::size_t at) {
  const std::size_t begin = std::min(text.find_first_not_of(blanks), text.size());
  text.remove_prefix(begin);
  text = text.substr(0, text.find_last_not_of(blanks) + 1);
  return {std::string(text), fmt::format("{}:{}", line_place, at + begin + 1)};
}

std::vector<Cell> cells_of(std::string_view line, const std::string& place) {
  std::vector<Cell> cells;
  for (std::size_t at = 0; at <= line.size();) {
    const std::size_t comma = std::min(line.find(',', at), line.size());
    cells.push_back(trimmed(line.substr(at, comma - at), place, at));
    at = comma + 1;
  }
  return cells;
}

/// Without comments and blank lines.
std::vector<Line> lines_of(std::string_view text, const std::string& file) {
  constexpr std::string_view byte_order_mark = "\xEF\xBB\xBF";
  if (text.starts_with(byte_order_mark)) text.remove_prefix(byte_order_mark.size());
  std::vector<Line> lines;
  for (std::size_t number = 1; !text.empty(); ++number) {
    const std::size_t end = std::min(text.find('\n'), text.size());
    const std::string_view line = text.substr(0, std::min(text.find('#'), end));
    const std::string place = fmt::format("{}:{}", file, number);
    if (line.find_first_not_of(blanks) != std::string_view::npos)
      lines.push_back({place, cells_of(line, place)});
    text.remove_prefix(std::min(end + 1, text.size()));
  }
  return lines;
}

const std::vector<const Key*>& columns() {
  static const std::vector<const Key*> keys = [] {
    const auto& all = all_keys();
    return item_keys(*std::find_if(all.begin(), all.end(),
                                   [](const Key& key) { return key.path == list_path; }));
  }();
  return keys;
}

/// All columns as they may be written: "depth [km], density [kg/m^3], ...".
std::string known_columns(const Draft& draft) {
  std::string text;
  for (const Key* key : columns())
    text +=
        fmt::format("{}{} [{}]", text.empty() ? "" : ", ", key->name(), unit_in_file(*key, draft));
  return text;
}

const Key& column_named(const std::string& name, const Cell& cell, const Draft& draft) {
  std::vector<std::string> names;
  for (const Key* key : columns()) {
    if (key->name() == name) return *key;
    names.push_back(key->name());
  }
  refuse(cell.place, fmt::format("unknown column '{}'{}; separated by commas, columns may be {}",
                                 cell.text, nearest(name, names), known_columns(draft)));
}

/// Name and unit of "name [unit]".
std::pair<std::string, std::string> parts_of(const std::string& head) {
  const std::size_t open = std::min(head.find('['), head.size());
  std::string name = head.substr(0, open), unit = head.substr(open);
  name.resize(name.find_last_not_of(blanks) + 1);
  return {name, unit};
}

const Key& column_of(const Cell& cell, const Draft& draft) {
  const auto [name, unit] = parts_of(cell.text);
  const Key& key = column_named(name, cell, draft);
  const std::string wanted = fmt::format("[{}]", unit_in_file(key, draft));
  if (unit != wanted)
    refuse(cell.place,
           fmt::format("column '{}' {}: must be in {}, as the case {} [body]; write {} {} and "
                       "convert the numbers",
                       name, unit.empty() ? "has no unit" : "is in " + unit, wanted,
                       draft.si ? "has a" : "has no", name, wanted));
  return key;
}

std::vector<const Key*> read_head(const Line& line, const Draft& draft) {
  std::vector<const Key*> found;
  for (const Cell& cell : line.cells) {
    const Key& key = column_of(cell, draft);
    if (std::find(found.begin(), found.end(), &key) != found.end())
      refuse(cell.place, fmt::format("column '{}' is there twice; remove one", key.name()));
    found.push_back(&key);
  }
  if (std::find(found.begin(), found.end(), columns().front()) == found.end())
    refuse(line.place, fmt::format("column '{}' is missing; columns may be {}",
                                   columns().front()->name(), known_columns(draft)));
  return found;
}

/// A number, or text that will be refused as one.
toml::table value_of(const std::string& text) {
  double number = 0;
  const char* end = text.data() + text.size();
  const auto [stop, error] = std::from_chars(text.data(), end, number);
  if (error == std::errc{} && stop == end) return toml::table{{"value", number}};
  return toml::table{{"value", text}};
}

void read_row(const Line& line, const std::vector<const Key*>& head, std::size_t k, Draft& draft,
              Entries& entries) {
  if (line.cells.size() != head.size())
    refuse(line.place,
           fmt::format("has {} number{}, the first line names {} columns; give one for each column",
                       line.cells.size(), line.cells.size() == 1 ? "" : "s", head.size()));
  const std::string path = fmt::format("{}[{}]", list_path, k + 1);
  entries.note_place(path, line.place);
  for (std::size_t c = 0; c < head.size(); ++c) {
    const toml::table value = value_of(line.cells[c].text);
    const std::string name = fmt::format("column '{}'", head[c]->name());
    read_value(*head[c], name, {value.get("value"), line.cells[c].place}, draft, k);
    entries.note_place(fmt::format("{}.{}", path, head[c]->name()), line.cells[c].place);
  }
}

std::string read_file(const std::string& named, const std::string& path, const Entries& entries) {
  const auto complain = [&](const std::string& complaint) {
    refuse(entries.place("reference.table"),
           fmt::format("reference.table = \"{}\": {} {}; a relative path starts at the case file",
                       named, path, complaint));
  };
  std::string text = read_text_file(path, complain);
  if (text.size() > longest_text) complain("is longer than 1 MiB; take fewer depths");
  return text;
}

}  // namespace

void read_profile_table(Draft& draft, Entries& entries, const std::string& case_file) {
  const std::string& named = draft.reference.table;
  if (named.empty()) return;
  if (!draft.reference.levels.empty())
    refuse(entries.place("reference.table"),
           "reference.table and reference.levels are both given; remove one");
  const std::string path = (std::filesystem::path(case_file).parent_path() / named).string();
  const std::vector<Line> lines = lines_of(read_file(named, path, entries), path);
  if (lines.empty())
    refuse(path, fmt::format("is empty; its first line names the columns, which may be {}",
                             known_columns(draft)));
  const std::vector<const Key*> head = read_head(lines.front(), draft);
  draft.reference.levels.resize(lines.size() - 1);
  entries.note_place(fmt::format("{}[1]", list_path), path);  // should there be no row
  for (std::size_t k = 0; k + 1 < lines.size(); ++k)
    read_row(lines[k + 1], head, k, draft, entries);
}

}  // namespace lidwright::case_text
