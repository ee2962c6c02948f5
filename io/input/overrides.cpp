// SPDX-License-Identifier: MIT
#include "io/input/overrides.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <charconv>
#include <optional>

#include "core/base/text.hpp"
#include "io/input/message_text.hpp"

namespace bandwright {

namespace {

/// Reference tokens of a JSON Pointer that starts with "/"; nothing where "~" is not followed by 0 or 1.
std::optional<std::vector<std::string>> tokens(std::string_view pointer) {
    std::vector<std::string> result;
    for (std::size_t at = 0; at < pointer.size(); ++at) {
        const char c = pointer[at];
        if (c == '/') {
            result.emplace_back();
        } else if (c == '~') {
            const char code = at + 1 < pointer.size() ? pointer[at + 1] : '\0';
            if (code != '0' && code != '1') return std::nullopt;
            result.back() += code == '0' ? '~' : '/';
            ++at;
        } else {
            result.back() += c;
        }
    }
    return result;
}

/// An index as RFC 6901 writes it: digits without leading zeros.
std::optional<std::size_t> array_index(const std::string& token) {
    std::size_t index = 0;
    const char* const end = token.data() + token.size();
    const auto [stop, code] = std::from_chars(token.data(), end, index);
    if (code != std::errc{} || stop != end || (token.size() > 1 && token.front() == '0')) return std::nullopt;
    return index;
}

std::string what_is_there(const JsonValue& value, const std::string& path, const std::string& token) {
    const std::string place = path.empty() ? "the file" : path;
    if (value.kind == JsonValue::Kind::object) {
        std::vector<std::string> keys;
        for (const auto& [key, member] : value.members) keys.push_back(key);
        if (keys.empty()) return fmt::format("{} is an empty object", place);
        const std::string near = nearest_name(token, keys);
        return fmt::format("{}{} has {}",
                           near.empty() ? "" : fmt::format("did you mean {}? ", path_below(path, near)),
                           place, joined(keys));
    }
    if (value.kind == JsonValue::Kind::array)
        return value.items.empty()
                   ? fmt::format("{} is an empty list", place)
                   : fmt::format("{} is a list with items 0 to {}", place, value.items.size() - 1);
    return fmt::format("{} is {}", place, found_text(value));
}

JsonValue parsed_value(const std::string& text, std::vector<Complaint>& complaints,
                       const std::string& where) {
    ParsedJson parsed = parse_json(text);
    if (parsed.value && parsed.value->kind != JsonValue::Kind::null) {
        for (const Complaint& complaint : parsed.complaints)
            complaints.push_back({where + complaint.where, complaint.text});
        return *parsed.value;
    }
    JsonValue plain;
    plain.kind = JsonValue::Kind::string;
    plain.text = text;
    return plain;
}

}  // namespace

void apply_override(JsonValue& document, const std::string& assignment, std::vector<Complaint>& complaints) {
    const std::size_t equals = assignment.find('=');
    if (equals == std::string::npos || assignment.front() != '/') {
        complaints.push_back(
            {"--set", fmt::format("needs POINTER=VALUE, for example \"/temperature=350 K\" (found {})",
                                  in_quotes(assignment))});
        return;
    }
    const std::string pointer = assignment.substr(0, equals);
    const std::string where = "--set " + pointer;
    const auto steps = tokens(pointer);
    if (!steps) {
        complaints.push_back({where, "a \"~\" in a key is written ~0, and a \"/\" in a key ~1"});
        return;
    }
    JsonValue* place = &document;
    std::string path;
    for (const std::string& step : *steps) {
        JsonValue* next = nullptr;
        if (place->kind == JsonValue::Kind::object) {
            next = place->find(step);
        } else if (place->kind == JsonValue::Kind::array) {
            const auto index = array_index(step);
            if (index && *index < place->items.size()) next = &place->items[*index];
        }
        if (next == nullptr) {
            complaints.push_back({where, fmt::format("there is nothing at this place; {}",
                                                     what_is_there(*place, path, step))});
            return;
        }
        place = next;
        path = path_below(path, step);
    }
    *place = parsed_value(assignment.substr(equals + 1), complaints, where);
}

}  // namespace bandwright
