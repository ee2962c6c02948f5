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

/// A token of the text, cut without asking whether JSON allows it.
struct Token {
    enum class Kind { mark, string, word, open_comment, end };
    Kind kind = Kind::end;
    std::size_t begin = 0, end = 0;
    std::string_view text;
    bool is(std::string_view other) const { return text == other; }
};

Token next_token(std::string_view text, std::size_t at) {
    constexpr std::string_view marks = "{}[],:", ends_of_words = " \t\r\n{}[],:\"/";
    const auto token = [&](Token::Kind kind, std::size_t begin, std::size_t end) {
        end = std::min(end, text.size());
        return Token{kind, begin, end, text.substr(begin, end - begin)};
    };
    while (at < text.size()) {
        if (is_blank(text[at])) {
            ++at;
        } else if (text.substr(at, 2) == "//") {
            at = std::min(text.find('\n', at), text.size());
        } else if (text.substr(at, 2) == "/*") {
            const std::size_t close = text.find("*/", at + 2);
            if (close == std::string_view::npos) return token(Token::Kind::open_comment, at, text.size());
            at = close + 2;
        } else if (marks.find(text[at]) != std::string_view::npos) {
            return token(Token::Kind::mark, at, at + 1);
        } else if (text[at] == '"') {
            std::size_t end = at + 1;
            while (end < text.size() && text[end] != '"') end += text[end] == '\\' ? 2 : 1;
            return token(Token::Kind::string, at, end + 1);
        } else {
            return token(Token::Kind::word, at,
                         std::max(at + 1, std::min(text.find_first_of(ends_of_words, at), text.size())));
        }
    }
    // A text that ends with blanks ends, for people, after its last sign.
    std::size_t content = text.size();
    while (content > 0 && is_blank(text[content - 1])) --content;
    return {Token::Kind::end, content, text.size(), {}};
}

/// The token at which the parser gave up, and the two before it.
struct Fault {
    Token found, previous, before_previous;
    bool previous_is_key() const {
        return previous.kind == Token::Kind::string && (before_previous.is("{") || before_previous.is(","));
    }
};

Fault fault_at(std::string_view text, std::size_t position, std::string_view reason) {
    const std::string_view mark = "\xef\xbb\xbf";
    Fault fault;
    fault.found.end = text.starts_with(mark) ? mark.size() : 0;
    const bool is_word = reason.find("invalid literal") != std::string_view::npos ||
                         reason.find("invalid number") != std::string_view::npos;
    for (;;) {
        const Token token = next_token(text, fault.found.end);
        // A word or number that breaks off is noticed one sign behind its end.
        const bool breaks_off =
            is_word && fault.found.kind == Token::Kind::word && fault.found.end + 1 >= position;
        if (breaks_off) return fault;
        fault = {token, fault.found, fault.previous};
        if (token.end >= position || token.kind == Token::Kind::end ||
            token.kind == Token::Kind::open_comment)
            return fault;
    }
}

bool has(std::string_view reason, std::string_view words) {
    return reason.find(words) != std::string_view::npos;
}

std::string describe(const OpenContainer& container) {
    const std::string kind = container.is_object ? "object" : "list";
    return container.path.empty() ? "the outermost " + kind : "the " + kind + " at " + container.path;
}

/// What is wrong with a string; empty when it is whole.
std::string string_trouble(std::string_view reason) {
    if (has(reason, "missing closing quote") || has(reason, "control character U+000A") ||
        has(reason, "control character U+000D"))
        return "the closing quotation mark of this text is missing";
    if (has(reason, "control character")) return "this text contains a control character; remove it";
    if (has(reason, "invalid string"))
        return "a backslash in this text starts nothing that JSON knows; write \\\\ for a backslash";
    return "";
}

/// What is wrong with a token that is whole, but in the wrong place.
std::string order_trouble(const Fault& fault, const std::vector<OpenContainer>& open) {
    const bool in_object = open.back().is_object;
    const Token& found = fault.found;
    const bool closes = found.is("}") || found.is("]");
    const bool after_start = fault.previous.is("{") || fault.previous.is("[");
    if (fault.previous.is(",") && (closes || found.is(",")))
        return fmt::format("a {} is missing after the comma", in_object ? "key" : "value");
    if (fault.previous.is(":") && found.kind != Token::Kind::word)
        return "a value is missing after the colon";
    if (in_object && fault.previous_is_key() && !found.is(":")) return "a colon is missing after the key";
    if (closes) return fmt::format("there is a \"{}\" while {} is open", found.text, describe(open.back()));
    if (in_object && (fault.previous.is("{") || fault.previous.is(",")))
        return "a key in quotation marks is needed here";
    if (found.kind == Token::Kind::word && (after_start || fault.previous.is(",") || fault.previous.is(":")))
        return fmt::format("{} is not a JSON value; a text needs quotation marks", in_quotes(found.text));
    if (found.is(":")) return "there is a colon where none is needed; remove it";
    if (found.is(",")) return "there is a comma where a value is needed";
    return "a comma is missing before this";
}

}  // namespace

Complaint syntax_trouble(std::string_view text, std::size_t position, std::string_view reason,
                         const std::vector<OpenContainer>& open) {
    if (has(reason, "UTF-8"))
        return {place(text, position == 0 ? 0 : position - 1),
                "the text is not UTF-8 here; save the file as UTF-8"};
    const Fault fault = fault_at(text, position, reason);
    const Token& found = fault.found;
    const std::string where = place(text, found.begin);
    if (found.kind == Token::Kind::open_comment) return {where, "the comment has no end; close it with */"};
    if (found.kind == Token::Kind::string && !string_trouble(reason).empty())
        return {where, string_trouble(reason)};
    if (found.kind == Token::Kind::end && open.empty())
        return {where, "the file is empty; it needs an object with format and layers"};
    if (found.kind == Token::Kind::end)
        return {where, fmt::format("the text ends while {} is open; a \"{}\" is missing",
                                   describe(open.back()), open.back().is_object ? '}' : ']')};
    if (open.empty() && fault.previous.kind != Token::Kind::end)
        return {where, "there is more text after the end of the document; remove it"};
    if (open.empty()) return {where, "a structure file begins with \"{\""};
    return {where, order_trouble(fault, open)};
}

Complaint number_trouble(std::string_view text, std::size_t position) {
    const Token found = fault_at(text, position, "").found;
    return {place(text, found.begin), fmt::format("the number {} is too large", found.text)};
}

}  // namespace bandwright
