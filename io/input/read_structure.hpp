// Reads a structure file: JSON text to Structure, with every complaint about it at once.
// Not for: what the values do (core) or where the file name comes from (apps).
// SPDX-License-Identifier: MIT
#pragma once

#include <filesystem>
#include <string>
#include <vector>

#include "core/device/structure.hpp"

namespace bandwright {

/// What was read.
struct ReadResult {
    Structure structure;
    /// The bytes of the file as they are.
    std::string bytes;
    /// The document as JSON text after the overrides, without comments.
    std::string used;
};

/// Reads a structure file. overrides: "POINTER=VALUE" texts as in apply_override, applied in this order.
/// Errors: InputError with all complaints, file = the path as given; FileError when a file cannot be read.
ReadResult read_structure(const std::filesystem::path& file, const std::vector<std::string>& overrides = {});

/// Reads a structure from its bytes. shown_name: how messages call it, and the title when the text has none
/// (without folder and extension); folder: where measured profiles are looked for. Errors: as read_structure.
ReadResult read_structure_text(std::string bytes, const std::string& shown_name,
                               const std::filesystem::path& folder,
                               const std::vector<std::string>& overrides = {});

}  // namespace bandwright
