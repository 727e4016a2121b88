#pragma once

#include <string>

#include "io/number_table.hpp"
#include "io/run_reader.hpp"
#include "io/run_statistics.hpp"

/// A run's tables as the page's script reads them; JSON.
namespace lidwright::page {

/// How many points of a column the page draws, by the number of rows.
std::size_t points_to_draw(std::size_t rows);

/// The history, column by column: values at the rows that are drawn (all extremes are), the mean
/// with its error, and until when the start was discarded.
std::string history_json(const SavedRun&, const RunStatistics&);

/// A table of numbers with all its rows.
std::string table_json(const NumberTable&, const std::string& file, const std::string& title,
                       int digits = 7);

/// A table of texts, as CSV with remarks. `title` stands above it.
std::string text_table_json(const std::string& csv, const std::string& file,
                            const std::string& title);

/// Radial profiles of some snapshots.
std::string profiles_json(const SavedRun&, const std::vector<std::size_t>& snapshots);

}  // namespace lidwright::page
