// Field<S>: one line of the table by which a struct describes its own keys: key, place, unit, range, meaning.
// Not for: reading JSON (io/input/read_fields.hpp) or the closed list of units (unit.hpp).
// SPDX-License-Identifier: MIT
#pragma once

#include <array>
#include <limits>
#include <optional>
#include <span>
#include <string>
#include <string_view>
#include <variant>

#include "core/base/unit.hpp"

namespace bandwright {

/// Numbers that a field may take, in memory units. The text finishes the sentence "must be ...".
struct Range {
    double low = -std::numeric_limits<double>::infinity();
    double high = std::numeric_limits<double>::infinity();
    /// False: low itself is not allowed.
    bool low_included = true;
    std::string_view text = "a finite number";

    /// Whether a value lies in the range; NaN never does.
    constexpr bool contains(double value) const {
        return (low_included ? value >= low : value > low) && value <= high;
    }
};

inline constexpr Range any_number{};
inline constexpr Range above_zero{0, std::numeric_limits<double>::infinity(), false, "greater than 0"};
inline constexpr Range zero_or_more{0, std::numeric_limits<double>::infinity(), true, "0 or more"};

/// Whether a key may be left out.
enum class Presence { required, optional };

/// A word out of a closed list; `set` receives the index of the chosen word.
template <class S>
struct Choice {
    /// What is chosen, for messages: "direction".
    std::string_view noun;
    std::span<const std::string_view> names;
    void (*set)(S&, std::size_t);
};

/// A whole number.
template <class S>
struct WholeNumber {
    std::optional<std::size_t> S::*member;
};

/// Where a field's value goes.
template <class S>
using FieldTarget =
    std::variant<double S::*, std::optional<double> S::*, std::string S::*, Choice<S>, WholeNumber<S>>;

/// One key of a struct. `unit` and `range` matter for numbers alone; Unit::one is a JSON number, every other
/// unit a text with a unit.
template <class S>
struct Field {
    std::string_view key;
    FieldTarget<S> target;
    Unit unit = Unit::one;
    Range range = any_number;
    Presence presence = Presence::required;
    /// One phrase for help texts and for the message about a missing key.
    std::string_view meaning;
};

}  // namespace bandwright
