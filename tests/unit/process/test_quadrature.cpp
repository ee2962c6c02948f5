// The adaptive integral on functions whose integrals are known.
//
// SPDX-License-Identifier: MIT
#include "core/process/quadrature.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <numbers>
#include <vector>

using namespace bandwright;

TEST(Quadrature, is_exact_for_polynomials_of_degree_31) {
    int calls = 0;
    const double sum = integral(
        [&](double x) {
            ++calls;
            return std::pow(x, 31) + std::pow(x, 30);
        },
        0, 1);
    EXPECT_NEAR(sum, 1.0 / 32 + 1.0 / 31, 1e-16);
    // One panel and its two halves: nothing was refined.
    EXPECT_EQ(calls, 48);
}

TEST(Quadrature, known_integrals) {
    EXPECT_NEAR(integral([](double x) { return std::exp(-x * x); }, -9, 9) / std::sqrt(std::numbers::pi), 1,
                1e-14);
    EXPECT_NEAR(integral([](double x) { return 1 / (1 + 1e6 * x * x); }, -1, 1), 2e-3 * std::atan(1e3),
                1e-15);
    EXPECT_NEAR(integral([](double x) { return std::sqrt(x); }, 0, 1), 2.0 / 3, 1e-13);
    EXPECT_NEAR(integral([](double x) { return std::sin(x); }, 0, 2 * std::numbers::pi), 0, 1e-14);
    EXPECT_EQ(integral([](double) { return 1.0; }, 1, 1), 0);
    EXPECT_EQ(integral([](double) { return 1.0; }, 2, 1), 0);
}

TEST(Quadrature, cuts_at_the_points) {
    const auto kink = [](double x) { return std::abs(x - 0.3); };
    const double exact = 0.5 * (0.09 + 0.49);
    int calls = 0;
    const auto counted = [&](double x) {
        ++calls;
        return kink(x);
    };
    EXPECT_NEAR(integral(counted, 0, 1, std::vector{0.3}), exact, 1e-15);
    EXPECT_EQ(calls, 96);
    EXPECT_NEAR(integral(kink, 0, 1), exact, 1e-13);
    // A peak that the panels would step over; at zero, where its depths are not rounded to its width.
    const auto peak = [](double x) { return std::exp(-0.5 * std::pow(x / 1e-6, 2)); };
    EXPECT_NEAR(
        integral(peak, -0.3, 0.7, std::vector{-4e-6, 0.0, 4e-6}) / (1e-6 * std::sqrt(2 * std::numbers::pi)),
        1, 1e-12);
}

// Values with noise, and values too small to be smooth, end the halving.
TEST(Quadrature, stops_at_rounding) {
    int calls = 0;
    const double noisy = integral(
        [&](double x) {
            ++calls;
            return 1 + 1e-11 * std::sin(1e9 * x);
        },
        0, 1);
    EXPECT_NEAR(noisy, 1, 1e-11);
    EXPECT_LT(calls, 2000);
    calls = 0;
    const double tiny = integral(
        [&](double x) {
            ++calls;
            return std::exp(-715 - 25 * x);
        },
        0, 1);
    EXPECT_NEAR(tiny / (std::exp(-715) / 25), 1, 1e-8);
    EXPECT_LT(calls, 2000);
}
