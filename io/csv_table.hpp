#pragma once

#include <map>
#include <string>
#include <string_view>
#include <vector>

/// Tables of text as CSV: lines that begin with `#` are remarks, the first other line names the
/// columns; a field with a comma or a quote in it stands in quotes, where "" is a quote.
namespace lidwright {

struct TextRow {
  std::string place;  ///< "expected.csv:12"
  std::map<std::string, std::string> fields;
  const std::string& operator[](const std::string& column) const { return fields.at(column); }
};

/// Every row has every one of `required` and `optional` (empty when the file lacks the column).
/// Throws InputError for a column that is missing or unknown, a row of another length, and a table
/// without rows.
std::vector<TextRow> parse_text_table(const std::string& text, const std::string& name,
                                      const std::vector<std::string>& required,
                                      const std::vector<std::string>& optional);

/// The fields of one line. Throws InputError at `place` for a quote that is not closed.
std::vector<std::string> text_fields(const std::string& line, const std::string& place);

/// One line; fields that need quotes get them.
std::string text_line(const std::vector<std::string>& fields);

}  // namespace lidwright
