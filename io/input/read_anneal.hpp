// A list of anneal steps. Not for: what they do (core/device/processing.hpp).
// SPDX-License-Identifier: MIT
#pragma once

#include <vector>

#include "core/process/anneal.hpp"
#include "io/input/cursor.hpp"

namespace bandwright {

/// Reads `"anneal": [ { "temperature", "time", "ramp" } ]`. Errors: complaints.
std::vector<AnnealStep> read_anneal(const Cursor& place);

}  // namespace bandwright
