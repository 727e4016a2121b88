#pragma once

#include <gtest/gtest.h>

#include <string>
#include <vector>

#include "io/case_file.hpp"

/// What a case that is wrong in one place is told.
namespace lidwright::test {

/// Line numbers of the messages below count from here.
inline constexpr const char* good_case =
    "title = \"test\"\n"        // 1
    "[numbers]\n"               // 2
    "rayleigh = 1e4\n"          // 3
    "[shell]\n"                 // 4
    "geometry = \"annulus\"\n"  // 5
    "radius_ratio = 0.5\n"      // 6
    "[grid]\n"                  // 7
    "radial = 8\n"              // 8
    "lateral = 32\n"            // 9
    "[walls.inner]\n"           // 10
    "temperature = 1\n"         // 11
    "[walls.outer]\n"           // 12
    "temperature = 0\n"         // 13
    "[march]\n"                 // 14
    "end_time = 0.1\n";         // 15

inline constexpr const char* good_body =
    "[body]\n"                      // 1
    "radius = 2000\n"               // 2
    "core_radius = 1000\n"          // 3
    "gravity = 4\n"                 // 4
    "density = 3000\n"              // 5
    "expansivity = 3e-5\n"          // 6
    "conductivity = 3\n"            // 7
    "heat_capacity = 1000\n"        // 8
    "surface_temperature = 200\n"   // 9
    "temperature_drop = 1000\n"     // 10
    "reference_viscosity = 1e20\n"  // 11
    "[shell]\n"                     // 12
    "geometry = \"annulus\"\n"      // 13
    "[grid]\n"                      // 14
    "radial = 8\n"                  // 15
    "lateral = 32\n"                // 16
    "[walls.inner]\n"               // 17
    "temperature = 1200\n"          // 18
    "[walls.outer]\n"               // 19
    "temperature = 200\n";          // 20

/// `from` is replaced by `to`; empty `from`: `to` goes to the end. The message must begin with
/// `place` and hold `words`.
struct Bad {
  std::string from, to, place, words;
};

inline std::string changed(std::string text, const Bad& bad) {
  if (bad.from.empty()) return text + bad.to;
  const auto at = text.find(bad.from);
  EXPECT_NE(at, std::string::npos) << bad.from;
  return text.replace(at, bad.from.size(), bad.to);
}

inline std::string message_of(const std::string& text,
                              const std::vector<std::string>& settings = {}) {
  try {
    parse_case(text, "c.toml", settings);
  } catch (const InputError& error) {
    return error.what();
  }
  return "accepted";
}

inline void expect_message(const std::string& message, const std::string& place,
                           const std::string& words) {
  EXPECT_TRUE(message.starts_with(place + ": ")) << "wanted " << place << ", got: " << message;
  EXPECT_NE(message.find(words), std::string::npos) << "wanted " << words << ", got: " << message;
}

inline void expect_all(const std::string& good, const std::vector<Bad>& table) {
  EXPECT_EQ(message_of(good), "accepted");
  for (const Bad& bad : table) expect_message(message_of(changed(good, bad)), bad.place, bad.words);
}

using Settings = std::vector<std::string>;

/// Of a liquid mantle with Di = 0.5 and T_surf = 0.1; more is added.
inline Settings liquid(Settings more) {
  more.insert(more.end(), {"reference.approximation=anelastic-liquid", "numbers.dissipation=0.5",
                           "numbers.surface_temperature=0.1"});
  return more;
}

}  // namespace lidwright::test
