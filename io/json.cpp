#include "io/json.hpp"

#include <fmt/format.h>

#include <cmath>
#include <iterator>

namespace lidwright::json {
namespace {

constexpr std::string_view replacement = "\\ufffd";

bool follows(std::string_view s, std::size_t at) {
  return at < s.size() && (static_cast<unsigned char>(s[at]) & 0xC0U) == 0x80;
}

/// Bytes of the character that begins at `at`; 0: it is no UTF-8. Overlong forms, surrogates and
/// what lies beyond U+10FFFF are none (RFC 3629).
std::size_t character_length(std::string_view s, std::size_t at) {
  const auto first = static_cast<unsigned char>(s[at]);
  const auto second = static_cast<unsigned char>(at + 1 < s.size() ? s[at + 1] : 0);
  if (first < 0x80) return 1;
  if (first < 0xC2 || first > 0xF4 || !follows(s, at + 1)) return 0;
  if (first < 0xE0) return 2;
  if ((first == 0xE0 && second < 0xA0) || (first == 0xED && second >= 0xA0)) return 0;
  if (!follows(s, at + 2)) return 0;
  if (first < 0xF0) return 3;
  if ((first == 0xF0 && second < 0x90) || (first == 0xF4 && second >= 0x90)) return 0;
  return follows(s, at + 3) ? 4 : 0;
}

bool must_be_a_number(char c) {
  return static_cast<unsigned char>(c) < 0x20 || c == '<' || c == '>' || c == '&' || c == 0x7f;
}

/// U+2028 and U+2029, which end a line in a script.
bool ends_a_line(std::string_view character) {
  return character == "\xE2\x80\xA8" || character == "\xE2\x80\xA9";
}

std::string escaped(std::string_view character) {
  if (character == "\"" || character == "\\") return "\\" + std::string(character);
  if (ends_a_line(character)) return character.back() == '\xA8' ? "\\u2028" : "\\u2029";
  if (character.size() == 1 && must_be_a_number(character.front()))
    return fmt::format("\\u{:04x}", static_cast<unsigned>(character.front()));
  return std::string(character);
}

template <typename Items, typename Write>
std::string joined(const Items& items, char open, char close, const Write& write) {
  std::string all(1, open);
  for (const auto& item : items) {
    if (all.size() > 1) all += ',';
    all += write(item);
  }
  return all + close;
}

}  // namespace

std::string text(std::string_view plain) {
  std::string quoted = "\"";
  for (std::size_t at = 0; at < plain.size();) {
    const std::size_t length = character_length(plain, at);
    quoted += length == 0 ? std::string(replacement) : escaped(plain.substr(at, length));
    at += length == 0 ? 1 : length;
  }
  return quoted + '"';
}

std::string number(double x) { return std::isfinite(x) ? fmt::format("{}", x) : "null"; }

std::string number(double x, int digits) {
  if (!std::isfinite(x)) return "null";
  const std::string exact = fmt::format("{}", x), rounded = fmt::format("{:.{}g}", x, digits);
  return exact.size() < rounded.size() ? exact : rounded;
}

std::string numbers(const std::vector<double>& all, int digits) {
  return joined(all, '[', ']', [&](double x) { return number(x, digits); });
}

std::string indices(const std::vector<std::size_t>& all) {
  return joined(all, '[', ']', [](std::size_t k) { return fmt::format("{}", k); });
}

std::string truth(bool yes) { return yes ? "true" : "false"; }

std::string list(const std::vector<std::string>& items) {
  return joined(items, '[', ']', [](const std::string& item) { return item; });
}

std::string object(const Members& members) {
  return joined(members, '{', '}', [](const auto& m) { return text(m.first) + ":" + m.second; });
}

std::string texts(const std::vector<std::string>& all) {
  return joined(all, '[', ']', [](const std::string& t) { return text(t); });
}

}  // namespace lidwright::json
