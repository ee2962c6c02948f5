// The materials of a structure file: built-in ones, built-in ones with values replaced, and whole ones.
// Not for: the built-in numbers (material_database.hpp).
// SPDX-License-Identifier: MIT
#pragma once

#include <map>
#include <optional>
#include <string>
#include <vector>

#include "core/device/material.hpp"
#include "io/input/cursor.hpp"

namespace bandwright {

/// The entries under /materials by name; an entry with complaints is there too, so that layers that name it
/// are not complained about as well.
std::map<std::string, Material, std::less<>> read_own_materials(const Cursor& place);

}  // namespace bandwright
