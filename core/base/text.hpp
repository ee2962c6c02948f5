// Small text tools: numbers as text and the nearest known name. Not for: unit text (io/input/quantity).
// SPDX-License-Identifier: MIT
#pragma once

#include <span>
#include <string>
#include <string_view>
#include <vector>

namespace bandwright {

/// The known name closest to a mistyped one (case-insensitive edit distance, a shared beginning counts for
/// it), or "" when nothing is near (distance above a third of the length, at least 2 allowed).
std::string nearest_name(std::string_view word, const std::vector<std::string>& known);

/// "a, b, c".
std::string joined(const std::vector<std::string>& words, std::string_view between = ", ");

/// Shortest text with a number of significant digits, for example 4 -> "1.235e+16", "0.3500" -> "0.35".
std::string number_text(double value, int digits = 4);

/// Shortest text that reads back as the same double.
std::string exact_text(double value);

}  // namespace bandwright
