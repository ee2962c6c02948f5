// The materials that are built in.
// Not for: materials of a structure file (read_materials.hpp) or what their numbers mean
// (core/device/material.hpp).
//
// SPDX-License-Identifier: MIT
#pragma once

#include <optional>
#include <string>
#include <string_view>
#include <vector>

#include "core/device/material.hpp"

namespace bandwright {

/// A built-in material by its name, or none. Errors: ContractError when a built-in material file is broken.
std::optional<Material> find_material(std::string_view name);

/// Names of the built-in materials, in alphabetical order.
std::vector<std::string> material_names();

/// "there is no material "Silicn"; did you mean "Si"? Built in: Si. Of your own: house silicon"; a built-in
/// material is also found by its long name.
std::string unknown_material_text(std::string_view found, const std::vector<std::string>& own_names);

/// Reads the text of one material file. Errors: ContractError with all complaints.
Material read_material_file(std::string_view text);

}  // namespace bandwright
