#include "io/benchmark_file.hpp"

#include <fmt/format.h>
#include <fmt/ranges.h>
#include <toml++/toml.h>

#include <functional>
#include <map>
#include <vector>

#include "io/atomic_file.hpp"
#include "io/case_entries.hpp"
#include "io/case_file.hpp"

namespace lidwright {
namespace {

using case_text::nearest;
using case_text::refuse;

/// Sets a value; what it must be when it does not fit, else "".
using Setter = std::function<std::string(const toml::node&)>;
using Keys = std::map<std::string, Setter, std::less<>>;

Setter text(std::string& target) {
  return [&target](const toml::node& n) {
    if (!n.is_string() || n.value<std::string>()->empty()) return "must be a text, not empty";
    target = *n.value<std::string>();
    return "";
  };
}

Setter truth(bool& target) {
  return [&target](const toml::node& n) {
    if (!n.is_boolean()) return "must be true or false";
    target = *n.value<bool>();
    return "";
  };
}

Setter whole(int& target, int least, int most) {
  return [&target, least, most](const toml::node& n) -> std::string {
    if (!n.is_integer() || *n.value<int64_t>() < least || *n.value<int64_t>() > most)
      return fmt::format("must be a whole number from {} to {}", least, most);
    target = static_cast<int>(*n.value<int64_t>());
    return "";
  };
}

Setter real(double& target, bool positive = false) {
  return [&target, positive](const toml::node& n) {
    if (!n.is_number()) return "must be a number";
    target = *n.value<double>();
    return positive && !(target > 0) ? "must be greater than 0" : "";
  };
}

Setter way(How& target) {
  return [&target](const toml::node& n) {
    static const std::map<std::string, How> ways{{"settle", How::Settle},
                                                 {"relax", How::Relax},
                                                 {"march", How::March},
                                                 {"onset", How::Onset},
                                                 {"flow", How::Flow}};
    const auto found = ways.find(n.value_or(std::string()));
    if (found == ways.end())
      return "must be \"settle\", \"relax\", \"march\", \"onset\" or \"flow\"";
    target = found->second;
    return "";
  };
}

Keys forcing_keys(Forcing& f) {
  return {{"wavenumber", whole(f.wavenumber, 1, 1000)},
          {"power", real(f.power)},
          {"vertical", real(f.vertical)},
          {"horizontal", real(f.horizontal)},
          {"step_viscosity", real(f.step_viscosity, true)},
          {"step_at", real(f.step_at)}};
}

void apply(const Keys& keys, const std::string& name, const toml::node& value,
           const std::string& place) {
  const auto key = keys.find(name);
  if (key == keys.end()) {
    std::vector<std::string> known;
    for (const auto& [k, setter] : keys) known.push_back(k);
    std::string hint = nearest(name, known);
    if (hint.empty()) hint = fmt::format("; the keys are {}", fmt::join(known, ", "));
    refuse(place, fmt::format("unknown key {}{}", name, hint));
  }
  const std::string wrong = key->second(value);
  if (!wrong.empty())
    refuse(place, fmt::format("{} = {}: {}", name, case_text::value_text(value), wrong));
}

std::string place_of(const std::string& path, const toml::source_region& at) {
  return fmt::format("{}:{}:{}", path, at.begin.line, at.begin.column);
}

toml::table parsed(const std::string& path) {
  try {
    return toml::parse(read_whole_file(path), path);
  } catch (const toml::parse_error& e) {
    refuse(place_of(path, e.source()), fmt::format("not valid TOML: {}", e.description()));
  } catch (const std::exception& e) {
    throw InputError(e.what());
  }
}

void apply_all(const toml::table& table, const Keys& keys, const std::string& path) {
  for (const auto& [name, value] : table)
    apply(keys, std::string(name.str()), value, place_of(path, name.source()));
}

}  // namespace

BenchmarkFile read_benchmark_file(const std::string& path) {
  BenchmarkFile file;
  toml::table table = parsed(path);
  for (const char* key : {"title", "reference", "how", "quick"})
    if (!table.contains(key)) refuse(path, fmt::format("the key {} is missing", key));
  if (const toml::table* forcing = table["forcing"].as_table()) {
    apply_all(*forcing, forcing_keys(file.forcing), path);
    table.erase("forcing");
  }
  apply_all(table,
            {{"title", text(file.title)},
             {"reference", text(file.reference)},
             {"how", way(file.how)},
             {"grids", whole(file.grids, 2, 5)},
             {"quick", truth(file.quick)},
             {"cycles", whole(file.cycles, 2, 1000)}},
            path);
  return file;
}

bool set_forcing(Forcing& forcing, const std::string& setting, const std::string& place) {
  constexpr std::string_view table = "forcing.";
  if (!setting.starts_with(table)) return false;
  const std::size_t equals = setting.find('=');
  if (equals == std::string::npos)
    refuse(place, fmt::format("settings: '{}' must be forcing.KEY=VALUE", setting));
  const std::string name = setting.substr(table.size(), equals - table.size());
  const std::string value = setting.substr(equals + 1);
  try {
    const toml::table read = toml::parse("value = " + value);
    apply(forcing_keys(forcing), name, *read.get("value"), place);
  } catch (const toml::parse_error&) {
    refuse(place, fmt::format("settings: {} = {}: must be a number", name, value));
  }
  return true;
}

}  // namespace lidwright
