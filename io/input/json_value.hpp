// A JSON document as a plain tree that keeps the order of keys and numbers as they were written.
// Not for: what the document means (cursor.hpp and the readers).
// SPDX-License-Identifier: MIT
#pragma once

#include <optional>
#include <string>
#include <string_view>
#include <utility>
#include <vector>

#include "core/base/error.hpp"

namespace bandwright {

/// One JSON value.
struct JsonValue {
    enum class Kind { null, boolean, number, string, array, object };
    Kind kind = Kind::null;
    bool boolean = false;
    double number = 0;
    /// The string, or the number as it was written.
    std::string text;
    std::vector<JsonValue> items;
    std::vector<std::pair<std::string, JsonValue>> members;

    /// The member of a key, or nullptr.
    const JsonValue* find(std::string_view key) const;
    JsonValue* find(std::string_view key);
};

/// What parse_json gives: a value, or the complaints that explain why there is none. A key that appears twice
/// is a complaint too; the value then carries the first one.
struct ParsedJson {
    std::optional<JsonValue> value;
    std::vector<Complaint> complaints;
};

/// Reads JSON text (UTF-8, with or without a byte order mark); // and /* */ comments are accepted.
/// Errors: none is thrown; a place that cannot be read is a complaint "line L, column C", columns count
/// characters.
ParsedJson parse_json(std::string_view text);

/// JSON text of a value, indented by two blanks, numbers as they were written, comments left out.
std::string json_text(const JsonValue& value);

/// Short form for messages: a string in quotation marks, a number as written, "a list", "an object".
std::string found_text(const JsonValue& value);

/// A path extended by one RFC 6901 reference token ("~" becomes "~0", "/" becomes "~1").
std::string path_below(const std::string& path, std::string_view key);

}  // namespace bandwright
