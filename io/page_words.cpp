#include "io/page_words.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <array>
#include <cmath>
#include <utility>

#include "io/plain_text.hpp"

namespace lidwright::page {
namespace {

constexpr std::array<const char*, 10> raised{"⁰", "¹", "²", "³", "⁴", "⁵", "⁶", "⁷", "⁸", "⁹"};

std::string power(int exponent) {
  std::string text = exponent < 0 ? "⁻" : "";
  for (const char c : fmt::format("{}", std::abs(exponent)))
    text += raised[static_cast<std::size_t>(c - '0')];
  return text;
}

std::string with_minus(std::string text) {
  if (text.starts_with('-')) text.replace(0, 1, "−");
  return text;
}

int decade(double x) { return static_cast<int>(std::floor(std::log10(std::abs(x)))); }

/// Where a plain number with this many decimals stays readable.
bool plain(double value, int decimals) {
  return std::abs(value) < 1e6 && (value == 0 || std::abs(value) >= 1e-3) && decimals >= 0 &&
         decimals <= 7;
}

}  // namespace

std::string digits(double value, int count) {
  if (!std::isfinite(value)) return "not defined";
  if (value == 0) return "0";
  const double rounded = std::stod(fmt::format("{:.{}e}", value, count - 1));
  const int exponent = decade(rounded);
  if (exponent >= -3 && exponent < 6)
    return with_minus(fmt::format("{:.{}f}", rounded, std::max(0, count - 1 - exponent)));
  return with_minus(fmt::format("{:.{}f} × 10{}", rounded / std::pow(10.0, exponent), count - 1,
                                power(exponent)));
}

std::string compact(double value, int count) {
  std::string text = digits(value, count);
  const std::size_t times = std::min(text.find(" ×"), text.size());
  std::string head = text.substr(0, times);
  if (head.find('.') != std::string::npos) {
    head.erase(head.find_last_not_of('0') + 1);
    if (head.ends_with('.')) head.pop_back();
  }
  if (times == text.size()) return head;
  const std::string power_alone = text.substr(times + std::string_view(" × ").size());
  return head == "1" ? power_alone : head + text.substr(times);
}

std::string with_unit(double value, const std::string& written) {
  return compact(value) + (written.empty() ? "" : " " + written);
}

Stated stated(double value, double error) {
  if (!std::isfinite(value)) return {"not defined", ""};
  if (error == 0) return {compact(value), ""};
  if (!(error > 0) || !std::isfinite(error)) return {digits(value), ""};
  // One digit more when the first is a 1, where one alone would be coarse.
  const std::string two = fmt::format("{:.1e}", error);
  const int decimals = -decade(std::stod(two)) + (two.front() < '3' ? 1 : 0);
  if (plain(value, decimals))
    return {with_minus(fmt::format("{:.{}f}", value, decimals)),
            fmt::format("{:.{}f}", error, decimals)};
  const int exponent = value == 0 ? decade(error) : std::max(decade(value), decade(error));
  const double scale = std::pow(10.0, exponent);
  const int places = std::clamp(decimals + exponent, 0, 12);
  const std::string tail = fmt::format(" × 10{}", power(exponent));
  return {with_minus(fmt::format("{:.{}f}", value / scale, places)) + tail,
          fmt::format("{:.{}f}", error / scale, places) + tail};
}

std::string unit(const std::string& of_a_table) {
  if (of_a_table == "1") return "";
  std::string text = of_a_table;
  for (const auto& [what, by] : {std::pair{"^(n-2)", "ⁿ⁻²"},
                                 {"^(n-4)", "ⁿ⁻⁴"},
                                 {"^2", "²"},
                                 {"^3", "³"},
                                 {"kappa", "κ"},
                                 {"DeltaT", "ΔT"},
                                 {"eta", "η"}})
    text = replaced(text, what, by);
  return text;
}

std::optional<InBody> in_body(const std::string& of_a_table, const Body& body, bool absolute) {
  const Scales s = scales_of(body);
  if (of_a_table == "d") return InBody{s.length / 1e3, 0, "km"};
  if (of_a_table == "d^2/kappa") return InBody{s.time / million_years, 0, "Myr"};
  if (of_a_table == "kappa/d") return InBody{s.velocity * 1e3 * year, 0, "mm/yr"};
  if (of_a_table == "DeltaT")
    return InBody{s.temperature, absolute ? body.surface_temperature : 0, "K"};
  if (of_a_table == "k DeltaT/d") return InBody{s.heat_flux * 1e3, 0, "mW/m²"};
  if (of_a_table == "eta") return InBody{s.viscosity, 0, "Pa s"};
  if (of_a_table == "eta kappa/d^2") return InBody{s.stress / 1e6, 0, "MPa"};
  return std::nullopt;
}

std::string time_words(double time, const std::optional<Body>& body) {
  const std::string text = fmt::format("time {} d²/κ", compact(time, 4));
  if (!body) return text;
  const InBody in = *in_body("d^2/kappa", *body);
  return fmt::format("{}, {} {}", text, compact(in.scale * time, 4), in.unit);
}

}  // namespace lidwright::page
