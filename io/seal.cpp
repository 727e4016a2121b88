#include "io/seal.hpp"

#include <fmt/format.h>

#include <array>
#include <cstdio>
#include <stdexcept>

namespace lidwright {
namespace {

constexpr std::size_t block = 512;  // least user block of HDF5
constexpr std::string_view mark = "lidwright checkpoint";

constexpr std::array<std::uint32_t, 256> crc_table() {
  std::array<std::uint32_t, 256> table{};
  for (std::uint32_t n = 0; n < table.size(); ++n) {
    table[n] = n;
    for (int bit = 0; bit < 8; ++bit)
      table[n] = (table[n] >> 1) ^ ((table[n] & 1U) ? 0xEDB88320U : 0U);
  }
  return table;
}

std::string block_for(int format, std::size_t bytes, std::uint32_t checksum) {
  std::string text =
      fmt::format("{}\nformat {}\nbytes {}\ncrc32 {:08x}\n", mark, format, bytes, checksum);
  text.resize(block, '\0');
  return text;
}

}  // namespace

std::uint32_t crc32(std::string_view bytes) {
  static constexpr std::array<std::uint32_t, 256> table = crc_table();
  std::uint32_t crc = 0xFFFFFFFFU;
  for (const char byte : bytes)
    crc = table[(crc ^ static_cast<unsigned char>(byte)) & 0xFFU] ^ (crc >> 8);
  return crc ^ 0xFFFFFFFFU;
}

std::string seal(const std::string& contents) {
  return block_for(checkpoint_format, contents.size(), crc32(contents)) + contents;
}

std::string open_seal(const std::string& file) {
  if (!file.starts_with(mark)) throw std::runtime_error("not a checkpoint of this program");
  if (file.size() < block) throw std::runtime_error("truncated: even its first block is not whole");
  int format = 0;
  std::size_t bytes = 0;
  unsigned checksum = 0;
  const std::string head = file.substr(0, block);
  if (std::sscanf(head.c_str() + mark.size(), " format %d bytes %zu crc32 %x", &format, &bytes,
                  &checksum) != 3)
    throw std::runtime_error("damaged: its first block cannot be read");
  if (format != checkpoint_format)
    throw std::runtime_error(
        fmt::format("of format {}, and this version reads format {}", format, checkpoint_format));
  if (file.size() < block + bytes)
    throw std::runtime_error(fmt::format("truncated: {} bytes of {}", file.size(), block + bytes));
  std::string contents = file.substr(block);
  // The block is compared whole, so that damage between and behind its words is found, too.
  if (head != block_for(format, contents.size(), crc32(contents)))
    throw std::runtime_error("damaged: its checksum does not fit its contents");
  return contents;
}

}  // namespace lidwright
