#pragma once

#include <string>
#include <string_view>

/// What every page is made of, kept in the program itself: io/page/ and the chart library dygraphs
/// of Debian's libjs-dygraphs (MIT licence; its notice goes into every page).
namespace lidwright::page {

std::string_view skeleton();       ///< io/page/page.html
std::string_view style();          ///< io/page/page.css
std::string script();              ///< the scripts of io/page/, in the order they need
std::string charts_style();        ///< without the name of its map, which no page has
std::string charts_script();       ///< the same
std::string_view charts_notice();  ///< copyright and licence

}  // namespace lidwright::page
