// SPDX-License-Identifier: MIT
#include "io/input/json_trouble.hpp"

#include <fmt/format.h>

#include <algorithm>

#include "io/input/message_text.hpp"

namespace bandwright {

namespace {

bool is_blank(char c) { return c == ' ' || c == '\t' || c == '\n' || c == '\r'; }

/// "line 14, column 5" of a byte offset; lines and columns count from 1.
std::string place(std::string_view text, std::size_t offset) {
    std::size_t line = 1, column = 1;
    const std::string_view mark = "\xef\xbb\xbf";
    for (std::size_t at = text.starts_with(mark) ? mark.size() : 0; at < std::min(offset, text.size());
         ++at) {
        if (text[at] == '\n') {
            ++line;
            column = 1;
        } else if ((static_cast<unsigned char>(text[at]) & 0xc0) != 0x80) {
            ++column;
        }
    }
    return fmt::format("line {}, column {}", line, column);
}

/// What stands before an offset, blanks and comments left out.
struct Before {
    char last = '\0';
    std::size_t offset = 0;
    /// Inside an object: the last thing is a string that no colon followed yet.
    bool is_key = false;
    bool open_comment = false;
};

Before look_back(std::string_view text, std::size_t end) {
    Before before;
    char previous = '\0';
    for (std::size_t at = 0; at < end;) {
        if (is_blank(text[at])) {
            ++at;
        } else if (text.substr(at, 2) == "//") {
            while (at < end && text[at] != '\n') ++at;
        } else if (text.substr(at, 2) == "/*") {
            const std::size_t close = text.find("*/", at + 2);
            if (close == std::string_view::npos || close >= end) {
                before.open_comment = true;
                return before;
            }
            at = close + 2;
        } else {
            previous = before.last;
            before.last = text[at];
            before.offset = at;
            before.is_key = text[at] == '"' && (previous == '{' || previous == ',');
            if (text[at] == '"') {
                ++at;
                while (at < end && text[at] != '"') at += text[at] == '\\' ? 2 : 1;
            }
            ++at;
        }
    }
    return before;
}

std::size_t token_start(std::string_view text, std::size_t position, const std::string& token) {
    position = std::min(position, text.size());
    if (!token.empty() && token.size() <= position &&
        text.substr(position - token.size(), token.size()) == token)
        return position - token.size();
    return position == 0 ? 0 : position - 1;
}

std::string describe(const OpenContainer& container) {
    return fmt::format(
        "the {}{}", container.is_object ? "object" : "list",
        container.path.empty() ? std::string(" that holds everything") : " at " + container.path);
}

}  // namespace

Complaint syntax_trouble(std::string_view text, std::size_t position, const std::string& token,
                         std::string_view reason, const std::vector<OpenContainer>& open) {
    const bool in_object = !open.empty() && open.back().is_object;
    std::size_t content = text.size();
    while (content > 0 && is_blank(text[content - 1])) --content;

    std::size_t start = token_start(text, position, token);
    const char found = start < text.size() ? text[start] : '\0';
    if (reason.find("UTF-8") != std::string_view::npos)
        return {place(text, position == 0 ? 0 : position - 1),
                "the text is not UTF-8 here; save the file as UTF-8"};
    if (found == '"' && token.size() > 0 && (token.size() == 1 || token.back() != '"')) {
        if (reason.find("escape") != std::string_view::npos ||
            reason.find("'\\u'") != std::string_view::npos ||
            reason.find("surrogate") != std::string_view::npos ||
            reason.find("forbidden character") != std::string_view::npos)
            return {place(text, position == 0 ? 0 : position - 1),
                    "the backslash starts nothing that JSON knows; write \\\\ for a backslash"};
        return {place(text, start), "the closing quotation mark of this text is missing"};
    }
    const bool at_end = start >= content || position > text.size();
    if (at_end) start = content;
    const Before before = look_back(text, start);
    const std::string where = place(text, start);
    if (before.open_comment) return {where, "the comment has no end; close it with */"};
    if (content == 0 || (at_end && before.last == '\0'))
        return {where, "the file is empty; it needs an object with format and layers"};
    if (at_end && !open.empty())
        return {where, fmt::format("the text ends before {} is closed; a \"{}\" is missing",
                                   describe(open.back()), open.back().is_object ? '}' : ']')};
    if (open.empty() && before.last != '\0')
        return {where, "there is more text after the end of the document; remove it"};
    const bool closes = found == '}' || found == ']';
    if (before.last == ',' && closes)
        return {where, fmt::format("a {} is missing after the comma", in_object ? "key" : "value")};
    if (before.last == ':') return {where, "a value is missing after the colon"};
    if (in_object && before.is_key && found != ':') return {where, "a colon is missing after the key"};
    if (in_object && (before.last == '{' || before.last == ','))
        return {where, "a key in quotation marks is needed here"};
    const bool starts_value =
        found == '"' || found == '{' || found == '[' || found == '-' || (found >= '0' && found <= '9');
    if (starts_value && before.last != '[' && before.last != ',')
        return {where, "a comma is missing before this"};
    if (closes)
        return {where, fmt::format("there is a \"{}\" where {} is still open", found, describe(open.back()))};
    const std::size_t stop = text.find_first_of(" \t\r\n,:]}", start + 1);
    return {where,
            fmt::format("{} is not a JSON value; a text needs quotation marks",
                        in_quotes(text.substr(start, stop == std::string_view::npos ? stop : stop - start)))};
}

Complaint number_trouble(std::string_view text, std::size_t position, const std::string& token) {
    return {place(text, token_start(text, position, token)),
            fmt::format("the number {} is too large", in_quotes(token))};
}

}  // namespace bandwright
