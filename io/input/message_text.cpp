// SPDX-License-Identifier: MIT
#include "io/input/message_text.hpp"

#include <fmt/format.h>

#include <cctype>

#include "core/base/text.hpp"

namespace bandwright {

std::string in_quotes(std::string_view text) {
    constexpr std::size_t longest = 60;
    std::string shown(text.substr(0, longest));
    if (text.size() > longest) {
        // A character of several bytes is not cut in two.
        while (!shown.empty() && (static_cast<unsigned char>(text[shown.size()]) & 0xc0) == 0x80)
            shown.pop_back();
        shown += "…";
    }
    for (char& c : shown)
        if (static_cast<unsigned char>(c) < 0x20 || c == 0x7f) c = ' ';
    return fmt::format("\"{}\"", shown);
}

std::string unknown_name(std::string_view noun, std::string_view found, const std::vector<std::string>& known,
                         std::string_view introduction) {
    std::string text = fmt::format("there is no {} {}; ", noun, in_quotes(found));
    std::string list = fmt::format("{}: {}", introduction, joined(known));
    const std::string near = nearest_name(found, known);
    if (!near.empty())
        text += fmt::format("did you mean \"{}\"? ", near);
    else
        list[0] = static_cast<char>(std::tolower(static_cast<unsigned char>(list[0])));
    return text + list;
}

}  // namespace bandwright
