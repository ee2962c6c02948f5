// The unit grammar: text such as "cm2 V-1 s-1" to a dimension, a power of ten and a factor.
// Not for: the number in front of a unit (quantity.hpp).
// SPDX-License-Identifier: MIT
#pragma once

#include <stdexcept>
#include <string>
#include <string_view>

#include "core/base/unit.hpp"

namespace bandwright {

/// What a unit is worth in SI: 10^decimal * numerator / denominator * (elementary charge)^electronvolts.
struct UnitValue {
    Dimension dimension;
    /// Power of the plane angle, counted in degrees.
    int angle = 0;
    int decimal = 0;
    int electronvolts = 0;
    double numerator = 1, denominator = 1;
    /// True for degC, whose zero lies at 273.15 K.
    bool is_celsius = false;
};

/// Unit text that cannot be understood; `word` is the part that is unknown, empty when the form is at fault.
class UnitTextError : public std::runtime_error {
  public:
    UnitTextError(std::string word, const std::string& text)
        : std::runtime_error(text), word_(std::move(word)) {}
    const std::string& word() const { return word_; }

  private:
    std::string word_;
};

/// Value of a unit text.
///
/// Grammar, a subset of the UDUNITS-2 unit syntax and a leading "/" besides: factors joined by blank, ".",
/// "*" or "/"
/// ("/" divides by the next factor alone); a factor is a name, "1" or a group in parentheses, with an integer
/// power written cm-3, cm^-3 or cm**-3. Both micro signs, the angstrom signs, the ohm signs and raised digits
/// are accepted. degC stands alone. Errors: UnitTextError.
UnitValue parse_unit(std::string_view text);

/// The common unit nearest to a mistyped one, those of the wanted kind first; "" when nothing is near.
std::string nearest_unit(std::string_view word, Unit wanted);

}  // namespace bandwright
