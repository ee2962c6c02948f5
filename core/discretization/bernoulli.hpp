// The Bernoulli function x / (exp(x) - 1) and its derivative. Not for: the flux built on it (cell_flux.hpp).
// SPDX-License-Identifier: MIT
#pragma once

#include <array>
#include <cmath>
#include <cstddef>

#include "core/base/vector_math.hpp"

namespace bandwright {

/// B(x) = x / (exp(x) - 1), positive, B(-x) = B(x) + x.
struct Bernoulli {
    /// B(+x), B(-x) and B'(+x), B'(-x); B'(-x) = -1 - B'(x).
    double plus, minus, slope_plus, slope_minus;
};

/// All four numbers from one exponential.
///
/// Valid for every finite x; accuracy a few units in the last place. Series below 0.1 for the slope, because
/// (1 - B - x) cancels there; the remainder of the series is below 1e-18 at the threshold.
/// Source: [ScharfetterGummel1969]; series from the Bernoulli numbers.
/// Tests: unit/discretization/test_bernoulli.cpp
inline Bernoulli bernoulli(double x) {
    const double y = std::abs(x);
    double value, slope;
    if (y < 0.1) {
        const double y2 = y * y;
        // 1 - y/2 + y^2/12 - y^4/720 + y^6/30240 - y^8/1209600 + y^10/47900160
        value =
            1 - y / 2 +
            y2 * (1.0 / 12 - y2 * (1.0 / 720 - y2 * (1.0 / 30240 - y2 * (1.0 / 1209600 - y2 / 47900160))));
        slope =
            -0.5 + y * (1.0 / 6 - y2 * (1.0 / 180 - y2 * (1.0 / 5040 - y2 * (1.0 / 151200 - y2 / 4790016))));
    } else {
        value = y > 700 ? y * std::exp(-y) : y / std::expm1(y);
        slope = value * (1 - value - y) / y;
    }
    const double other = value + y, other_slope = -1 - slope;
    if (x >= 0) return {value, other, slope, other_slope};
    return {other, value, other_slope, slope};
}

/// The same for many arguments at once.
template <std::size_t most>
struct BernoulliLanes {
    std::array<double, most> argument, value, slope;  // B and B' at |argument|

    Bernoulli at(std::size_t i) const {
        const double v = value[i], s = slope[i], y = std::abs(argument[i]);
        const bool positive = argument[i] >= 0;
        return {positive ? v : v + y, positive ? v + y : v, positive ? s : -1 - s, positive ? -1 - s : s};
    }
};

/// Fills value and slope from the first `count` arguments; accuracy as `bernoulli`, 0 beyond 700.
template <std::size_t most>
void bernoulli_of(BernoulliLanes<most>& b, std::size_t count) {
    std::array<double, most> negative{}, exponential{}, minus_one{};
    for (std::size_t i = 0; i < count; ++i) negative[i] = -std::abs(b.argument[i]);
    exponentials_of_negative(negative.data(), exponential.data(), minus_one.data(), count);
    for (std::size_t i = 0; i < count; ++i) {
        const double y = -negative[i], y2 = y * y;
        const double near =
            1 - y / 2 +
            y2 * (1.0 / 12 - y2 * (1.0 / 720 - y2 * (1.0 / 30240 - y2 * (1.0 / 1209600 - y2 / 47900160))));
        const double near_slope =
            -0.5 + y * (1.0 / 6 - y2 * (1.0 / 180 - y2 * (1.0 / 5040 - y2 * (1.0 / 151200 - y2 / 4790016))));
        const double far = -y * exponential[i] / minus_one[i];
        const double far_slope = far * (1 - far - y) / y;
        b.value[i] = y < 0.1 ? near : far;
        b.slope[i] = y < 0.1 ? near_slope : far_slope;
    }
}

}  // namespace bandwright
