#pragma once

#include <string>
#include <string_view>

#include "io/case_entries.hpp"
#include "io/case_keys.hpp"

/// One key's value between the file and the draft.
namespace lidwright::case_text {

/// Reads keys into the draft: type, range, presence, and whether each applies. Throws InputError.
/// The body's come first, the others are converted with it.
void read_body_keys(Draft&, Entries&);
void read_other_keys(Draft&, Entries&);

/// One value that is not a list, called `name` in messages, into the draft.
void read_value(const Key&, const std::string& name, const Entry&, Draft&, std::size_t item = 0);
/// Unit of a key's number in the file that is read.
std::string_view unit_in_file(const Key&, const Draft&);

/// The value as TOML in the draft's units; "" when there is none to write. Doubles in the shortest
/// form that reads back to the same bits.
std::string written_value(const Key&, Draft&, std::size_t item = 0);
std::string number_text(double);

/// "greater than 0 and less than 1", bounds in the units of the file; "" when all is allowed.
std::string allowed_text(const Key&, const Conversion&, std::string_view unit);

}  // namespace lidwright::case_text
