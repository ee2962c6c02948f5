// SPDX-License-Identifier: MIT
#include "io/input/json_value.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <nlohmann/json.hpp>

#include "io/input/json_trouble.hpp"
#include "io/input/message_text.hpp"

namespace bandwright {

namespace {

using Json = nlohmann::json;

/// Deeper nesting than any structure file needs; a limit protects the recursive readers.
constexpr std::size_t deepest = 64;

JsonValue of_kind(JsonValue::Kind kind) {
    JsonValue value;
    value.kind = kind;
    return value;
}

/// Receives the parser's events and builds the tree.
class TreeBuilder {
  public:
    TreeBuilder(std::string_view text, ParsedJson& result) : text_(text), result_(result) {}

    bool null() { return add({}); }
    bool boolean(bool value) {
        JsonValue leaf = of_kind(JsonValue::Kind::boolean);
        leaf.boolean = value;
        return add(std::move(leaf));
    }
    bool number_integer(Json::number_integer_t value) {
        return number(static_cast<double>(value), std::to_string(value));
    }
    bool number_unsigned(Json::number_unsigned_t value) {
        return number(static_cast<double>(value), std::to_string(value));
    }
    bool number_float(Json::number_float_t value, const std::string& written) {
        return number(value, written);
    }
    bool string(std::string& value) {
        JsonValue leaf = of_kind(JsonValue::Kind::string);
        leaf.text = std::move(value);
        return add(std::move(leaf));
    }
    bool binary(Json::binary_t&) { return false; }
    bool start_object(std::size_t) { return open(JsonValue::Kind::object); }
    bool start_array(std::size_t) { return open(JsonValue::Kind::array); }
    bool key(std::string& key) {
        open_.back().key = std::move(key);
        return true;
    }
    bool end_object() { return close(); }
    bool end_array() { return close(); }
    bool parse_error(std::size_t position, const std::string&, const Json::exception& error) {
        std::vector<OpenContainer> open;
        for (const Container& container : open_)
            open.push_back({container.value.kind == JsonValue::Kind::object, container.path});
        constexpr int out_of_range = 406;
        result_.complaints = {error.id == out_of_range ? number_trouble(text_, position)
                                                       : syntax_trouble(text_, position, error.what(), open)};
        return false;
    }

  private:
    struct Container {
        JsonValue value;
        std::string path;
        std::string key;
        std::vector<std::string> repeated;
    };

    bool number(double value, const std::string& written) {
        JsonValue leaf = of_kind(JsonValue::Kind::number);
        leaf.number = value;
        leaf.text = written;
        return add(std::move(leaf));
    }

    std::string path_of_next() const {
        if (open_.empty()) return "";
        const Container& parent = open_.back();
        return parent.value.kind == JsonValue::Kind::object
                   ? path_below(parent.path, parent.key)
                   : path_below(parent.path, std::to_string(parent.value.items.size()));
    }

    bool open(JsonValue::Kind kind) {
        const std::string path = path_of_next();
        if (open_.size() == deepest) {
            result_.complaints = {{path, fmt::format("is nested more than {} levels deep", deepest)}};
            return false;
        }
        open_.push_back({of_kind(kind), path, "", {}});
        return true;
    }

    bool close() {
        JsonValue value = std::move(open_.back().value);
        open_.pop_back();
        return add(std::move(value));
    }

    bool add(JsonValue value) {
        if (open_.empty()) {
            result_.value = std::move(value);
            return true;
        }
        Container& parent = open_.back();
        if (parent.value.kind == JsonValue::Kind::array) {
            parent.value.items.push_back(std::move(value));
        } else if (parent.value.find(parent.key) != nullptr) {
            if (std::find(parent.repeated.begin(), parent.repeated.end(), parent.key) ==
                parent.repeated.end()) {
                result_.complaints.push_back(
                    {parent.path, fmt::format("the key {} appears twice; keep one", in_quotes(parent.key))});
                parent.repeated.push_back(parent.key);
            }
        } else {
            parent.value.members.emplace_back(parent.key, std::move(value));
        }
        return true;
    }

    std::string_view text_;
    ParsedJson& result_;
    std::vector<Container> open_;
};

std::string json_string(const std::string& text) {
    return Json(text).dump(-1, ' ', false, Json::error_handler_t::replace);
}

void write(const JsonValue& value, int indent, std::string& out) {
    const std::string inner(static_cast<std::size_t>(indent) + 2, ' ');
    const std::string outer(static_cast<std::size_t>(indent), ' ');
    bool first = true;
    const auto next_line = [&] {
        out += first ? "\n" : ",\n";
        out += inner;
        first = false;
    };
    switch (value.kind) {
        case JsonValue::Kind::null:
            out += "null";
            break;
        case JsonValue::Kind::boolean:
            out += value.boolean ? "true" : "false";
            break;
        case JsonValue::Kind::number:
            out += value.text;
            break;
        case JsonValue::Kind::string:
            out += json_string(value.text);
            break;
        case JsonValue::Kind::array:
            out += '[';
            for (const JsonValue& item : value.items) {
                next_line();
                write(item, indent + 2, out);
            }
            out += first ? "]" : "\n" + outer + "]";
            break;
        case JsonValue::Kind::object:
            out += '{';
            for (const auto& [key, member] : value.members) {
                next_line();
                out += json_string(key) + ": ";
                write(member, indent + 2, out);
            }
            out += first ? "}" : "\n" + outer + "}";
            break;
    }
}

}  // namespace

const JsonValue* JsonValue::find(std::string_view key) const {
    for (const auto& [name, member] : members)
        if (name == key) return &member;
    return nullptr;
}

JsonValue* JsonValue::find(std::string_view key) {
    return const_cast<JsonValue*>(static_cast<const JsonValue&>(*this).find(key));
}

ParsedJson parse_json(std::string_view text) {
    ParsedJson result;
    TreeBuilder builder(text, result);
    constexpr bool whole_text = true, with_comments = true;
    const bool good = Json::sax_parse(text.begin(), text.end(), &builder, Json::input_format_t::json,
                                      whole_text, with_comments);
    if (!good) result.value.reset();
    return result;
}

std::string json_text(const JsonValue& value) {
    std::string text;
    write(value, 0, text);
    return text + "\n";
}

std::string found_text(const JsonValue& value) {
    switch (value.kind) {
        case JsonValue::Kind::null:
            return "null";
        case JsonValue::Kind::boolean:
            return value.boolean ? "true" : "false";
        case JsonValue::Kind::number:
            return value.text;
        case JsonValue::Kind::string:
            return in_quotes(value.text);
        case JsonValue::Kind::array:
            return value.items.empty() ? "an empty list" : "a list";
        case JsonValue::Kind::object:
            return "an object";
    }
    return "";
}

std::string path_below(const std::string& path, std::string_view key) {
    std::string result = path + "/";
    for (char c : key) {
        if (c == '~')
            result += "~0";
        else if (c == '/')
            result += "~1";
        else
            result += c;
    }
    return result;
}

}  // namespace bandwright
