// The bytes of a file.
// Not for: what they mean.
// SPDX-License-Identifier: MIT
#pragma once

#include <filesystem>
#include <fstream>
#include <iterator>
#include <optional>
#include <string>
#include <system_error>

namespace bandwright {

/// All bytes of a file, or none when it cannot be read (missing, a folder, not permitted).
inline std::optional<std::string> read_file(const std::filesystem::path& path) {
    std::error_code code;
    if (std::filesystem::is_directory(path, code)) return std::nullopt;
    std::ifstream stream(path, std::ios::binary);
    if (!stream) return std::nullopt;
    std::string bytes{std::istreambuf_iterator<char>(stream), std::istreambuf_iterator<char>()};
    if (stream.bad()) return std::nullopt;
    return bytes;
}

}  // namespace bandwright
