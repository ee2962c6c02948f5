// A number with a unit, as people write it, to the value kept in memory.
// Not for: the unit grammar (unit_text.hpp) or ranges (read_fields.hpp).
// SPDX-License-Identifier: MIT
#pragma once

#include <stdexcept>
#include <string>
#include <string_view>

#include "core/base/unit.hpp"

namespace bandwright {

/// Text that is not the quantity it should be; what() is one sentence with what is needed and what was found.
class QuantityError : public std::runtime_error {
  public:
    using std::runtime_error::runtime_error;
};

/// What a number without a unit means.
enum class BareNumber { refused, in_shown_unit };

/// Value in memory units (SI; energy in eV, an angle in degrees, as in unit_table) of a text such as "0.4
/// um".
///
/// Powers of ten of the unit are merged into the decimal text before it is read, so "2 um" is the double 2e-6
/// and "1e16 cm-3" is 1e22. BareNumber::in_shown_unit reads "3" in the unit that tables show (for command
/// lines). Errors: QuantityError. Tests: unit/io_input/test_quantity.cpp.
double parse_quantity(std::string_view text, Unit unit, BareNumber bare = BareNumber::refused);

/// "a length", "an energy": the kind of a unit with its article.
std::string kind_with_article(Unit unit);

/// "needs a unit of length, for example "0.4 um" (found 3)"; found is given as it shall appear.
std::string missing_unit_text(Unit unit, std::string_view found);

}  // namespace bandwright
