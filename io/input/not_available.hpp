// The one sentence for what the file format knows and this version of the program does not do yet.
// Not for: misspelt names (message_text.hpp).
// SPDX-License-Identifier: MIT
#pragma once

#include <fmt/format.h>

#include <string>
#include <string_view>

namespace bandwright {

/// "implant is not available yet in this version; describe the profile with gaussian or measured".
inline std::string not_available_yet(std::string_view what, std::string_view instead) {
    return fmt::format("{} is not available yet in this version; {}", what, instead);
}

}  // namespace bandwright
