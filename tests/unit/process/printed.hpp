// Comparison with a printed number: equal to within half a unit of its last digit.
// Not for: tolerances that a model or a measurement sets.
//
// SPDX-License-Identifier: MIT
#pragma once

#include <gtest/gtest.h>

#include <cmath>
#include <string>

namespace bandwright {

/// Passes when value rounds to the number as written, for example "2.4e-5".
inline ::testing::AssertionResult prints_as(double value, const std::string& written) {
    const std::size_t exponent_at = written.find('e'), point = written.find('.');
    const std::string mantissa = written.substr(0, exponent_at);
    const int decimals = point == std::string::npos ? 0 : static_cast<int>(mantissa.size() - point - 1);
    const int exponent = exponent_at == std::string::npos ? 0 : std::stoi(written.substr(exponent_at + 1));
    const double half_unit = 0.5 * std::pow(10, exponent - decimals), expected = std::stod(written);
    // A little more than half a unit: the value may lie on the boundary between two roundings.
    if (std::abs(value - expected) <= 1.001 * half_unit) return ::testing::AssertionSuccess();
    return ::testing::AssertionFailure()
           << value << " does not print as " << written << " (off by " << (value - expected) / (2 * half_unit)
           << " units of its last digit)";
}

}  // namespace bandwright
