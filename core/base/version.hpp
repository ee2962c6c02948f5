// The version of the program. Not for: versions of file formats (io/results).
// SPDX-License-Identifier: MIT
#pragma once

namespace bandwright {

/// Kept equal to the version in CMakeLists.txt by tests/architecture.
inline constexpr const char* version = "0.1.0";

}  // namespace bandwright
