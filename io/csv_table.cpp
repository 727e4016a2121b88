#include "io/csv_table.hpp"

#include <fmt/format.h>
#include <fmt/ranges.h>

#include <algorithm>
#include <sstream>

#include "io/case_entries.hpp"

namespace lidwright {
namespace {

using case_text::nearest;
using case_text::refuse;
using Fields = std::vector<std::string>;

bool among(const std::string& name, const Fields& names) {
  return std::find(names.begin(), names.end(), name) != names.end();
}

void check_columns(const Fields& columns, const std::string& place, const Fields& required,
                   const Fields& optional) {
  Fields known = required;
  known.insert(known.end(), optional.begin(), optional.end());
  for (const std::string& c : columns)
    if (!among(c, known))
      refuse(place, fmt::format("unknown column '{}'{}; the columns are {}", c, nearest(c, known),
                                fmt::join(known, ", ")));
  for (const std::string& c : required)
    if (!among(c, columns)) refuse(place, fmt::format("the column '{}' is missing", c));
}

TextRow row_of(const Fields& columns, const Fields& fields, const std::string& place,
               const Fields& optional) {
  if (fields.size() != columns.size())
    refuse(place, fmt::format("has {} fields where the head has {}; put a field with a comma in "
                              "quotes",
                              fields.size(), columns.size()));
  TextRow row;
  row.place = place;
  for (const std::string& c : optional) row.fields[c];
  for (std::size_t k = 0; k < columns.size(); ++k) row.fields[columns[k]] = fields[k];
  return row;
}

}  // namespace

std::vector<std::string> text_fields(const std::string& line, const std::string& place) {
  Fields fields(1);
  bool quoted = false;
  for (std::size_t k = 0; k < line.size(); ++k) {
    const char c = line[k];
    if (c == '"' && quoted && k + 1 < line.size() && line[k + 1] == '"')
      fields.back() += line[++k];
    else if (c == '"')
      quoted = !quoted;
    else if (c == ',' && !quoted)
      fields.emplace_back();
    else if (c != '\r')
      fields.back() += c;
  }
  if (quoted) refuse(place, "a quote is opened and not closed; write a quote inside as \"\"");
  return fields;
}

std::vector<TextRow> parse_text_table(const std::string& text, const std::string& name,
                                      const std::vector<std::string>& required,
                                      const std::vector<std::string>& optional) {
  std::istringstream in(text);
  Fields columns;
  std::vector<TextRow> rows;
  std::size_t number = 0;
  for (std::string line; std::getline(in, line);) {
    const std::string place = fmt::format("{}:{}", name, ++number);
    if (line.empty() || line == "\r" || line.front() == '#') continue;
    const Fields fields = text_fields(line, place);
    if (columns.empty())
      check_columns(columns = fields, place, required, optional);
    else
      rows.push_back(row_of(columns, fields, place, optional));
  }
  if (rows.empty())
    refuse(name, "holds no values; give at least one row below the names of the columns");
  return rows;
}

std::string text_line(const std::vector<std::string>& fields) {
  std::string line, comma;
  for (std::string field : fields) {
    if (field.find_first_of(",\"\n") != std::string::npos) {
      for (std::size_t at = 0; (at = field.find('"', at)) != std::string::npos; at += 2)
        field.insert(at, 1, '"');
      field = '"' + field + '"';
    }
    line += comma + field;
    comma = ",";
  }
  return line + "\n";
}

}  // namespace lidwright
