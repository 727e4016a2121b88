#pragma once

#include <cstdint>
#include <string>
#include <string_view>

/// A checkpoint's first 512 bytes (HDF5's user block: general tools skip it): what the file is, how
/// long, and a checksum, so that a damaged file is known before it is parsed.
namespace lidwright {

/// CRC-32 of ISO 3309 (as in PNG and zip files).
std::uint32_t crc32(std::string_view);

/// Version of the checkpoint's layout, docs/run_folder.md.
inline constexpr int checkpoint_format = 1;

/// The file: seal and contents.
std::string seal(const std::string& contents);

/// The contents. Throws std::runtime_error saying what is wrong: no checkpoint, another format,
/// truncated or damaged.
std::string open_seal(const std::string& file);

}  // namespace lidwright
