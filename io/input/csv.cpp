// SPDX-License-Identifier: MIT
#include "io/input/csv.hpp"

#include <fmt/format.h>

#include <charconv>
#include <cmath>
#include <optional>

#include "io/input/message_text.hpp"

namespace bandwright {

namespace {

constexpr std::size_t most_trouble = 3;

std::string_view trimmed(std::string_view text) {
    constexpr std::string_view blanks = " \t\r";
    const std::size_t start = text.find_first_not_of(blanks);
    if (start == std::string_view::npos) return {};
    return text.substr(start, text.find_last_not_of(blanks) - start + 1);
}

std::vector<std::string> split(std::string_view line) {
    std::string_view separators = " \t";
    for (std::string_view candidate : {";", ",", "\t"})
        if (line.find(candidate) != std::string_view::npos) {
            separators = candidate;
            break;
        }
    std::vector<std::string> parts;
    const bool by_blanks = separators.size() == 2;
    while (true) {
        const std::size_t end = line.find_first_of(separators);
        std::string_view part = trimmed(line.substr(0, end));
        if (part.size() >= 2 && part.front() == '"' && part.back() == '"')
            part = trimmed(part.substr(1, part.size() - 2));
        if (!by_blanks || !part.empty()) parts.emplace_back(part);
        if (end == std::string_view::npos) return parts;
        line.remove_prefix(end + 1);
    }
}

bool is_number(std::string_view text) {
    if (text.starts_with('+')) text.remove_prefix(1);
    double value = 0;
    const auto [end, code] = std::from_chars(text.data(), text.data() + text.size(), value);
    return code == std::errc{} && end == text.data() + text.size() && std::isfinite(value);
}

}  // namespace

CsvColumns read_two_columns(std::string_view text) {
    CsvColumns result;
    if (text.starts_with("\xef\xbb\xbf")) text.remove_prefix(3);
    bool header_allowed = true;
    for (std::size_t line_number = 1; !text.empty() && result.trouble.size() < most_trouble; ++line_number) {
        const std::size_t end = text.find('\n');
        const std::string_view line = trimmed(text.substr(0, end));
        text.remove_prefix(end == std::string_view::npos ? text.size() : end + 1);
        if (line.empty() || line.front() == '#') continue;
        const std::vector<std::string> parts = split(line);
        const bool two_numbers = parts.size() == 2 && is_number(parts[0]) && is_number(parts[1]);
        bool any_number = false;
        for (const std::string& part : parts) any_number = any_number || is_number(part);
        if (two_numbers)
            result.rows.push_back({line_number, parts[0], parts[1]});
        else if (!header_allowed || any_number)
            result.trouble.push_back(
                fmt::format("line {}: needs two numbers, depth and concentration (found {})", line_number,
                            in_quotes(line)));
        header_allowed = false;
    }
    return result;
}

}  // namespace bandwright
