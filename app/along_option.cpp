#include "app/along_option.hpp"

#include <fmt/format.h>

#include <charconv>
#include <cmath>

namespace lidwright {
namespace {

constexpr int most_values = 10000;

[[noreturn]] void refuse(const std::string& text, const std::string& complaint) {
  throw InputError(fmt::format("--along {}: {}", text, complaint));
}

[[noreturn]] void refuse_form(const std::string& text) {
  refuse(text,
         "must be KEY=FROM:TO:COUNT, two numbers and a whole number of values, such as "
         "numbers.rayleigh=1e4:1e6:9");
}

/// Cuts what stands before `end` off `rest`.
std::string_view part_before(char end, std::string_view& rest, const std::string& text) {
  const std::size_t at = rest.find(end);
  if (at == std::string_view::npos) refuse_form(text);
  const std::string_view part = rest.substr(0, at);
  rest.remove_prefix(at + 1);
  return part;
}

template <class Number>
Number read(std::string_view part, const std::string& text) {
  Number number{};
  const char* end = part.data() + part.size();
  const auto [stop, error] = std::from_chars(part.data(), end, number);
  if (part.empty() || error != std::errc{} || stop != end) refuse_form(text);
  return number;
}

bool far_apart(double from, double to) {
  return from * to > 0 && std::abs(std::log10(to / from)) > 1 - 1e-12;
}

std::vector<double> values_between(double from, double to, int count, bool logarithmic) {
  std::vector<double> values;
  for (int k = 0; k + 1 < count; ++k) {
    const double share = static_cast<double>(k) / (count - 1);
    values.push_back(logarithmic ? from * std::pow(to / from, share) : from + share * (to - from));
  }
  values.push_back(to);
  return values;
}

/// What the steady equations depend on.
std::string equations(Case c) {
  Case plain;
  plain.model = std::move(c.model);
  plain.settle.flux = c.settle.flux;
  return write_case(plain);
}

}  // namespace

Along read_along(const std::string& text) {
  std::string_view rest = text;
  Along along;
  const std::string key(part_before('=', rest, text));
  const double from = read<double>(part_before(':', rest, text), text);
  const double to = read<double>(part_before(':', rest, text), text);
  const int count = read<int>(rest, text);
  if (!std::isfinite(from) || !std::isfinite(to)) refuse(text, "FROM and TO must be finite");
  if (count < 2 || count > most_values)
    refuse(text,
           fmt::format("COUNT is {}, but must be at least 2 and at most {}", count, most_values));
  if (from == to)
    refuse(text, "FROM and TO are the same; for one value use --set instead of --along");
  along.key = number_key(key);
  along.logarithmic = far_apart(from, to);
  along.values = values_between(from, to, count, along.logarithmic);
  return along;
}

std::string CaseAlong::text_of(double value) const {
  return fmt::format("{} = {}", along_.key.path, value);
}

Case CaseAlong::at(double value) const {
  return parse_case(text_, name_, settings_, fmt::format("{}={}", along_.key.path, value));
}

void CaseAlong::refuse_bad_values() const {
  for (const double value : along_.values) at(value);
  const std::string first = equations(at(along_.values.front()));
  if (first == equations(at(along_.values.back())))
    throw InputError(fmt::format(
        "--along: {} does not change the steady state; give a key of the physical problem",
        along_.key.path));
}

}  // namespace lidwright
