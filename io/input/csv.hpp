// Two columns of numbers out of a CSV text.
// Not for: what the columns mean (read_doping.cpp).
// SPDX-License-Identifier: MIT
#pragma once

#include <string>
#include <string_view>
#include <vector>

namespace bandwright {

/// One line of numbers; they stay text so that a unit's power of ten can be merged exactly.
struct CsvRow {
    std::size_t line = 0;
    std::string first, second;
};

/// What was read; `trouble` is one sentence per line that is not two numbers ("line 4: ...").
struct CsvColumns {
    std::vector<CsvRow> rows;
    std::vector<std::string> trouble;
};

/// Reads two columns separated by a comma, a semicolon, a tab or blanks. Lines that are empty or start with #
/// are skipped, one header line before the first numbers is allowed, a byte order mark and CR LF are
/// accepted. The decimal separator is a point. Errors: none is thrown, see `trouble`; after three of them the
/// rest is not looked at.
CsvColumns read_two_columns(std::string_view text);

}  // namespace bandwright
