// Plain words for a place where text stops being JSON: line, column and what is missing there.
// Not for: parsing (json_value.hpp) or what a document means (cursor.hpp).
// SPDX-License-Identifier: MIT
#pragma once

#include <cstddef>
#include <string>
#include <string_view>
#include <vector>

#include "core/base/error.hpp"

namespace bandwright {

/// An object or list that is still open, outermost first.
struct OpenContainer {
    bool is_object = true;
    std::string path;
};

/// Complaint about text that is not JSON. position: bytes read when the parser gave up; reason: the parser's
/// own words, looked at only to tell what kind of token is at fault. Errors: none.
Complaint syntax_trouble(std::string_view text, std::size_t position, std::string_view reason,
                         const std::vector<OpenContainer>& open);

/// Complaint about a number that does not fit; arguments as in syntax_trouble.
Complaint number_trouble(std::string_view text, std::size_t position);

}  // namespace bandwright
