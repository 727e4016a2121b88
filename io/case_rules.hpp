#pragma once

#include <fmt/format.h>

#include <string>
#include <vector>

#include "io/case_entries.hpp"

/// What must hold between keys. All throw InputError at the place of a key concerned.
namespace lidwright::case_text {

/// Settles [numbers] against [body] and which optional tables are there; before any key is read.
void choose_tables(Draft&, const Entries&);
/// Radii of the body, before anything is converted with them.
void check_body(const Draft&, const Entries&);
/// Approximation, surface temperature and reference profiles; part of `check_together`.
void check_reference(const Draft&, const Entries&);
/// Creeps, yielding and cut-offs; part of `check_together`.
void check_rheology(const Draft&, const Entries&);
/// The rest, when all keys are read.
void check_together(const Draft&, const Entries&);

template <class Layer>
void check_sorted(const std::vector<Layer>& layers, const char* list, const Entries& entries) {
  for (std::size_t k = 1; k < layers.size(); ++k) {
    if (layers[k].below > layers[k - 1].below) continue;
    const std::string path = fmt::format("{}[{}].below", list, k + 1);
    refuse(entries.place(path), fmt::format("{}: must be deeper than the layer before it; sort the "
                                            "layers by depth, shallowest first",
                                            path));
  }
}

}  // namespace lidwright::case_text
