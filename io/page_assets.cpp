#include "io/page_assets.hpp"

// The files become a part of this object as they are: no list of numbers for the compiler to read.
// CMakeLists.txt names them as this file's dependencies and says where they stand.
#define LIDWRIGHT_ASSET(name, path)   \
  asm(".section .rodata\n"            \
      ".global lidwright_asset_" name \
      "\n"                            \
      ".hidden lidwright_asset_" name \
      "\n"                            \
      ".global lidwright_end_" name   \
      "\n"                            \
      ".hidden lidwright_end_" name   \
      "\n"                            \
      "lidwright_asset_" name         \
      ":\n"                           \
      ".incbin \"" path               \
      "\"\n"                          \
      "lidwright_end_" name           \
      ":\n"                           \
      ".byte 0\n"                     \
      ".text\n")

LIDWRIGHT_ASSET("html", LIDWRIGHT_PAGE "/page.html");
LIDWRIGHT_ASSET("css", LIDWRIGHT_PAGE "/page.css");
LIDWRIGHT_ASSET("words_js", LIDWRIGHT_PAGE "/words.js");
LIDWRIGHT_ASSET("chart_js", LIDWRIGHT_PAGE "/chart.js");
LIDWRIGHT_ASSET("field_js", LIDWRIGHT_PAGE "/field.js");
LIDWRIGHT_ASSET("history_js", LIDWRIGHT_PAGE "/history.js");
LIDWRIGHT_ASSET("page_js", LIDWRIGHT_PAGE "/page.js");
LIDWRIGHT_ASSET("charts_css", LIDWRIGHT_CHARTS "/dygraph.min.css");
LIDWRIGHT_ASSET("charts_js", LIDWRIGHT_CHARTS "/dygraph.min.js");
LIDWRIGHT_ASSET("charts_notice", LIDWRIGHT_CHARTS_NOTICE);

extern "C" {
extern const char lidwright_asset_html[], lidwright_end_html[];
extern const char lidwright_asset_css[], lidwright_end_css[];
extern const char lidwright_asset_words_js[], lidwright_end_words_js[];
extern const char lidwright_asset_chart_js[], lidwright_end_chart_js[];
extern const char lidwright_asset_field_js[], lidwright_end_field_js[];
extern const char lidwright_asset_history_js[], lidwright_end_history_js[];
extern const char lidwright_asset_page_js[], lidwright_end_page_js[];
extern const char lidwright_asset_charts_css[], lidwright_end_charts_css[];
extern const char lidwright_asset_charts_js[], lidwright_end_charts_js[];
extern const char lidwright_asset_charts_notice[], lidwright_end_charts_notice[];
}

namespace lidwright::page {
namespace {

std::string_view between(const char* begin, const char* end) {
  return {begin, static_cast<std::size_t>(end - begin)};
}

/// A map of the source is a file of its own, which a browser would look for beside the page.
std::string without_map(std::string_view text) {
  std::size_t at = text.rfind("//# sourceMappingURL=");
  if (at == std::string_view::npos) at = text.rfind("/*# sourceMappingURL=");
  return std::string(text.substr(0, at));
}

}  // namespace

std::string_view skeleton() { return between(lidwright_asset_html, lidwright_end_html); }
std::string_view style() { return between(lidwright_asset_css, lidwright_end_css); }
std::string script() {
  std::string all;
  for (const std::string_view part : {between(lidwright_asset_words_js, lidwright_end_words_js),
                                      between(lidwright_asset_chart_js, lidwright_end_chart_js),
                                      between(lidwright_asset_field_js, lidwright_end_field_js),
                                      between(lidwright_asset_history_js, lidwright_end_history_js),
                                      between(lidwright_asset_page_js, lidwright_end_page_js)})
    all += part;
  return all;
}
std::string charts_style() {
  return without_map(between(lidwright_asset_charts_css, lidwright_end_charts_css));
}
std::string charts_script() {
  return without_map(between(lidwright_asset_charts_js, lidwright_end_charts_js));
}
std::string_view charts_notice() {
  return between(lidwright_asset_charts_notice, lidwright_end_charts_notice);
}

}  // namespace lidwright::page
