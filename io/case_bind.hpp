#pragma once

#include <utility>

#include "io/case_keys.hpp"

/// How the list of keys says where a key's value lives, and the parts of the list.
namespace lidwright::case_text {

// From a member to its Target.
template <class T>
Target target(T& member) {
  if constexpr (std::is_enum_v<T>)
    return Choice{[&member] { return std::optional(static_cast<int>(member)); },
                  [&member](int k) { member = static_cast<T>(k); }};
  else
    return &member;
}
inline Target target(std::optional<Extent>& extent) {
  return Choice{
      [&extent] { return extent ? std::optional(static_cast<int>(*extent)) : std::nullopt; },
      [&extent](int k) { extent = static_cast<Extent>(k); }};
}

/// The member reached through a chain of members, from the draft or from its case.
template <class... M>
Access said(M... chain) {
  return [=](Draft& d, std::size_t) { return target((d.*....*chain)); };
}
template <class... M>
Access of_case(M... chain) {
  return said(&Draft::made, chain...);
}
template <class... M>
Access of_model(M... chain) {
  return of_case(&Case::model, chain...);
}

/// A list and the members of its items.
template <class... M>
Access list(M... chain) {
  return [=](Draft& d, std::size_t) -> Target {
    auto& items = (d.*....*chain);
    return List{[&items] { return items.size(); }, [&items](std::size_t n) { items.resize(n); }};
  };
}
template <class Member, class... M>
Access item(Member member, M... chain) {
  return [=](Draft& d, std::size_t k) { return target((d.*....*chain).at(k).*member); };
}
template <class Member>
Access heat_layer(Member member) {
  return item(member, &Draft::made, &Case::model, &Model::heat, &HeatSources::layers);
}
template <class Member>
Access reference_level(Member member) {
  return item(member, &Draft::reference, &ReferenceDraft::levels);
}
template <class Member>
Access mode(Member member) {
  return item(member, &Draft::made, &Case::initial, &InitialSettings::modes);
}

inline constexpr Condition numbers = {"with [numbers]", [](const Draft& d) { return !d.si; }};

inline constexpr Range positive = {.low = 0, .low_open = true};
inline constexpr Range not_negative = {.low = 0};
inline constexpr Range ratio = {.low = 1e-6, .high = 1e6};
inline constexpr Range at_least_one = {.low = 1};
inline constexpr Range cells = {.low = 4, .high = 100000};
inline constexpr Range refinement = {.low = 1, .high = 1000};
inline constexpr Range depths = {.low = 0, .high = 1, .high_open = true};
inline constexpr Range share = {.low = 0, .high = 1, .low_open = true};

inline void append(std::vector<Key>& keys, std::vector<Key> more) {
  for (Key& key : more) keys.push_back(std::move(key));
}

std::vector<Key> scale_keys();  ///< title, [numbers], [body]
std::vector<Key> body_used_keys();
std::vector<Key> shell_keys();  ///< [shell], [grid]
std::vector<Key> wall_keys(const std::string& table, WallDraft Draft::*);
std::vector<Key> viscosity_keys();
std::vector<Key> heat_keys();
std::vector<Key> reference_keys();

}  // namespace lidwright::case_text
