#include "io/plain_text.hpp"

#include <charconv>

namespace lidwright {

std::string replaced(std::string text, std::string_view what, std::string_view by) {
  for (std::size_t at = 0; (at = text.find(what, at)) != std::string::npos; at += by.size())
    text.replace(at, what.size(), by);
  return text;
}

std::optional<double> number_of(std::string_view text) {
  double value = 0;
  const char* end = text.data() + text.size();
  const auto [read, error] = std::from_chars(text.data(), end, value);
  if (error != std::errc() || read != end) return std::nullopt;
  return value;
}

}  // namespace lidwright
