// One entry of the doping list.
// Not for: which dopants a host knows (core/device/structure.hpp) or values at a depth
// (core/device/doping.hpp).
//
// SPDX-License-Identifier: MIT
#pragma once

#include <filesystem>
#include <optional>
#include <string>
#include <vector>

#include "core/device/doping.hpp"
#include "io/input/cursor.hpp"

namespace bandwright {

/// What an entry may refer to, and what reading it leaves behind.
struct DopingContext {
    std::vector<std::string> layer_names;
    /// Depth of the bottom of the stack [m].
    double total_thickness = 0;
    /// Folder of the structure file; measured profiles are looked for from there.
    std::filesystem::path folder;
    std::vector<std::string> warnings;
    /// Set when a measured profile could not be opened.
    bool file_is_unreadable = false;
};

/// Reads an entry. Errors: complaints; nothing is returned when its kind is not known.
std::optional<DopingEntry> read_doping_entry(const Cursor& place, DopingContext& context);

}  // namespace bandwright
