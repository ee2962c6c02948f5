// SPDX-License-Identifier: MIT
#include "io/input/cursor.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cctype>
#include <cmath>

#include "core/base/text.hpp"
#include "io/input/message_text.hpp"
#include "io/input/quantity.hpp"

namespace bandwright {

namespace {

std::string capitalized(std::string_view text) {
    std::string result(text);
    if (!result.empty()) result[0] = static_cast<char>(std::toupper(static_cast<unsigned char>(result[0])));
    return result;
}

}  // namespace

std::optional<Cursor> Cursor::find(std::string_view key) const {
    const JsonValue* member = value_->find(key);
    if (member == nullptr) return std::nullopt;
    return Cursor(*member, path_below(path_, key), *complaints_);
}

std::vector<std::pair<std::string, Cursor>> Cursor::members() const {
    std::vector<std::pair<std::string, Cursor>> result;
    for (const auto& [key, member] : value_->members)
        result.emplace_back(key, Cursor(member, path_below(path_, key), *complaints_));
    return result;
}

std::vector<Cursor> Cursor::items() const {
    std::vector<Cursor> result;
    for (std::size_t index = 0; index < value_->items.size(); ++index)
        result.emplace_back(value_->items[index], path_below(path_, std::to_string(index)), *complaints_);
    return result;
}

bool Cursor::expect_object(std::string_view what) const {
    if (is_object()) return true;
    complain_found(fmt::format("{} is written as an object, {{ ... }}", what));
    return false;
}

bool Cursor::expect_list(std::string_view what, std::string_view example) const {
    if (value_->kind == JsonValue::Kind::array) return true;
    complain_found(fmt::format("{} is written as a list, for example {}", what, example));
    return false;
}

void Cursor::refuse_other_keys(std::string_view what, const std::vector<std::string>& known,
                               const std::vector<std::string>& shown) const {
    for (const auto& [key, member] : value_->members) {
        if (std::find(known.begin(), known.end(), key) != known.end()) continue;
        const std::string near = nearest_name(key, known);
        const std::string takes = joined(shown.empty() ? known : shown);
        if (near.empty())
            complain(fmt::format("unknown key {}; {} takes {}", in_quotes(key), what, takes));
        else
            complain(fmt::format("unknown key {}; did you mean \"{}\"? {} takes {}", in_quotes(key), near,
                                 capitalized(what), takes));
    }
}

std::optional<std::string> Cursor::text(std::string_view meaning) const {
    if (value_->kind == JsonValue::Kind::string && !value_->text.empty()) return value_->text;
    complain_found(fmt::format("needs {} as a text in quotation marks", meaning));
    return std::nullopt;
}

std::optional<double> Cursor::quantity(Unit unit, const Range& range) const {
    double result = 0;
    if (unit == Unit::one) {
        if (value_->kind != JsonValue::Kind::number) {
            complain_found("needs a number without unit and quotation marks, for example 0.3");
            return std::nullopt;
        }
        result = value_->number;
    } else if (value_->kind == JsonValue::Kind::number) {
        complain(missing_unit_text(unit, value_->text));
        return std::nullopt;
    } else if (value_->kind != JsonValue::Kind::string) {
        complain_found(fmt::format("needs {} as a text with a unit, for example \"{}\"",
                                   kind_with_article(unit), info(unit).example));
        return std::nullopt;
    } else {
        try {
            result = parse_quantity(value_->text, unit);
        } catch (const QuantityError& error) {
            complain(error.what());
            return std::nullopt;
        }
    }
    if (range.contains(result)) return result;
    // A temperature may be written in degC, where "greater than 0" would be misread.
    complain_found(fmt::format("must be {}{}", range.text, unit == Unit::temperature ? " K" : ""));
    return std::nullopt;
}

std::optional<std::size_t> Cursor::whole_number(const Range& range) const {
    const bool good = value_->kind == JsonValue::Kind::number && range.contains(value_->number) &&
                      value_->number == std::floor(value_->number);
    if (good) return static_cast<std::size_t>(value_->number);
    complain_found(fmt::format("must be a whole number, {}", range.text));
    return std::nullopt;
}

std::optional<std::size_t> Cursor::choice(std::string_view noun,
                                          std::span<const std::string_view> names) const {
    if (value_->kind == JsonValue::Kind::string) {
        const auto place = std::find(names.begin(), names.end(), value_->text);
        if (place != names.end()) return static_cast<std::size_t>(place - names.begin());
        complain(unknown_name(noun, value_->text, {names.begin(), names.end()}));
    } else {
        complain_found(fmt::format("needs a {}, one of {}", noun, joined({names.begin(), names.end()})));
    }
    return std::nullopt;
}

}  // namespace bandwright
