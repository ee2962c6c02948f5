// Fills any struct that describes itself by a table of Field records, and complains about what does not fit.
// Not for: values that depend on each other; the reader of that struct checks those.
// SPDX-License-Identifier: MIT
#pragma once

#include <array>
#include <string>
#include <type_traits>
#include <variant>
#include <vector>

#include "core/base/field.hpp"
#include "io/input/cursor.hpp"
#include "io/input/quantity.hpp"

namespace bandwright {

/// The keys of a table, in its order.
template <class S, std::size_t count>
std::vector<std::string> keys_of(const std::array<Field<S>, count>& fields) {
    std::vector<std::string> keys;
    for (const Field<S>& field : fields) keys.emplace_back(field.key);
    return keys;
}

/// Reads one field from the place of its value. Errors: complaints at that place.
template <class S>
void read_field(const Cursor& place, const Field<S>& field, S& into) {
    std::visit(
        [&](const auto& target) {
            using Target = std::decay_t<decltype(target)>;
            if constexpr (std::is_same_v<Target, std::string S::*>) {
                if (auto text = place.text(field.meaning)) into.*target = *text;
            } else if constexpr (std::is_same_v<Target, Choice<S>>) {
                if (auto index = place.choice(target.noun, target.names)) target.set(into, *index);
            } else if constexpr (std::is_same_v<Target, WholeNumber<S>>) {
                if (auto number = place.whole_number(field.range)) into.*(target.member) = *number;
            } else {
                if (auto number = place.quantity(field.unit, field.range)) into.*target = *number;
            }
        },
        field.target);
}

/// "needs the key "straggle", a length, for example "0.4 um"".
template <class S>
std::string missing_key_text(const Field<S>& field) {
    std::string text = "needs the key \"" + std::string(field.key) + "\", " + std::string(field.meaning);
    if (std::holds_alternative<double S::*>(field.target))
        text += ", for example \"" + std::string(info(field.unit).example) + "\"";
    return text;
}

/// Reads all fields of a table out of an object. Keys outside the table are left to
/// Cursor::refuse_other_keys. Errors: a complaint for each value that does not fit and for each required key
/// that is missing.
template <class S, std::size_t count>
void read_fields(const Cursor& place, const std::array<Field<S>, count>& fields, S& into) {
    for (const Field<S>& field : fields) {
        if (const auto member = place.find(field.key))
            read_field(*member, field, into);
        else if (field.presence == Presence::required)
            place.complain(missing_key_text(field));
    }
}

}  // namespace bandwright
