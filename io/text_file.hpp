#pragma once

#include <cstddef>
#include <functional>
#include <string>

/// Short text files that people write.
namespace lidwright {

/// Most bytes of such a file; a longer one is something else.
inline constexpr std::size_t longest_text = 1 << 20;

/// Told what is wrong with a file; throws.
using Complain = std::function<void(const std::string& complaint)>;

/// The whole file, or the beginning of one that is longer than `longest_text` by at least a byte.
std::string read_text_file(const std::string& path, const Complain&);

}  // namespace lidwright
