#pragma once

#include "io/case_entries.hpp"

/// What must hold between keys. All throw InputError at the place of a key concerned.
namespace lidwright::case_text {

/// Settles [numbers] against [body] and which optional tables are there; before any key is read.
void choose_tables(Draft&, const Entries&);
/// Radii of the body, before anything is converted with them.
void check_body(const Draft&, const Entries&);
/// Approximation, surface temperature and reference profiles; part of `check_together`.
void check_reference(const Draft&, const Entries&);
/// The rest, when all keys are read.
void check_together(const Draft&, const Entries&);

}  // namespace lidwright::case_text
