// Sentences that messages share: quoting what was found and answering an unknown name with the known ones.
// Not for: deciding what is wrong (cursor.hpp, read_*.cpp).
// SPDX-License-Identifier: MIT
#pragma once

#include <string>
#include <string_view>
#include <vector>

namespace bandwright {

/// Text in quotation marks; a long one is cut with an ellipsis, a control character becomes a blank.
std::string in_quotes(std::string_view text);

/// "there is no layer "epy"; did you mean "epi"? Layers: cap, epi" (the list introduced by `introduction`).
std::string unknown_name(std::string_view noun, std::string_view found, const std::vector<std::string>& known,
                         std::string_view introduction = "There are");

}  // namespace bandwright
