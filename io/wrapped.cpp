#include "io/wrapped.hpp"

#include <sstream>

namespace lidwright {

std::string wrapped(const std::string& text, std::size_t indent) {
  const std::string margin(indent, ' ');
  std::istringstream words(text);
  std::string out, line = margin;
  for (std::string word; words >> word;) {
    if (line.size() > indent && line.size() + 1 + word.size() > terminal_columns) {
      out += line + '\n';
      line = margin;
    }
    if (line.size() > indent) line += ' ';
    line += word;
  }
  return line.size() > indent ? out + line + '\n' : out;
}

}  // namespace lidwright
