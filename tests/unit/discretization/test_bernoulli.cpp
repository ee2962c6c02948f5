// B(x) = x / (exp(x) - 1) against values of 17 digits computed with 30-digit arithmetic.
// SPDX-License-Identifier: MIT
#include "core/discretization/bernoulli.hpp"

#include <gtest/gtest.h>

#include <limits>

using bandwright::bernoulli;

TEST(Bernoulli, equals_reference_values) {
    const double rows[][2] = {{1e-8, 0.999999995},
                              {1e-3, 0.99950008333333194},
                              {0.1, 0.95083319447750496},
                              {1, 0.58197670686932642},
                              {2, 0.3130352854993313},
                              {5, 0.03391827453152116},
                              {10, 4.5401991009687768e-4},
                              {50, 9.6437492398195889e-21},
                              {700, 6.90177358063184e-302},
                              {-1, 1.5819767068693264},
                              {-10, 10.000454019910097},
                              {-50, 50},
                              {-700, 700}};
    // 4 units in the last place; the rows carry 15 to 17 digits.
    for (const auto& [x, expected] : rows) EXPECT_NEAR(bernoulli(x).plus / expected, 1, 1.5e-15) << x;
    EXPECT_EQ(bernoulli(0).plus, 1);
}

TEST(Bernoulli, of_minus_x_is_its_own_plus_x) {
    for (double x = -40; x <= 40; x += 0.37) {
        const auto b = bernoulli(x);
        EXPECT_DOUBLE_EQ(b.minus, bernoulli(-x).plus);
        EXPECT_NEAR(b.minus, b.plus + x, 4e-16 * (std::abs(x) + b.plus));
    }
}

TEST(Bernoulli, is_smooth_across_the_series_threshold) {
    // Both sides of the threshold see the same smooth function: the jump is that of the argument alone.
    const double below = std::nextafter(0.1, 0.0), above = std::nextafter(0.1, 1.0);
    EXPECT_NEAR(bernoulli(below).plus, bernoulli(above).plus, 4e-16);
    // The closed form of the slope loses digits as 1/x^2 there: 2e-16 / 0.01.
    EXPECT_NEAR(bernoulli(below).slope_plus, bernoulli(above).slope_plus, 5e-14);
}

TEST(Bernoulli, slope_equals_the_difference_quotient) {
    // Central difference: error h^2/6 B''' (below 1e-11) plus rounding 1e-16/h (1e-11).
    for (double x : {-30.0, -3.0, -0.5, -0.05, 0.0, 0.02, 0.09, 0.2, 1.0, 7.0, 40.0}) {
        const double h = 1e-5;
        const double quotient = (bernoulli(x + h).plus - bernoulli(x - h).plus) / (2 * h);
        EXPECT_NEAR(bernoulli(x).slope_plus, quotient, 2e-10 * std::max(1.0, std::abs(x))) << x;
        const double other = (bernoulli(-x + h).plus - bernoulli(-x - h).plus) / (2 * h);
        EXPECT_NEAR(bernoulli(x).slope_minus, other, 2e-10 * std::max(1.0, std::abs(x))) << x;
    }
}

TEST(Bernoulli, stays_finite_and_positive_far_out) {
    for (double x : {-1e6, -800.0, 720.0, 745.0}) {
        const auto b = bernoulli(x);
        EXPECT_TRUE(std::isfinite(b.plus) && std::isfinite(b.minus) && std::isfinite(b.slope_plus));
        EXPECT_GE(b.plus, 0);
    }
}

TEST(Bernoulli, of_many_arguments_equals_the_one_of_each) {
    using namespace bandwright;
    BernoulliLanes<64> lanes{};
    std::size_t count = 0;
    for (double y = 1e-12; count < 60; y *= 1.75, ++count) lanes.argument[count] = count % 2 ? y : -y;
    for (const double x : {0.0, 0.1, -0.1, 699.0}) lanes.argument[count++] = x;
    bernoulli_of(lanes, count);
    for (std::size_t k = 0; k < count; ++k) {
        const double x = lanes.argument[k];
        if (std::abs(x) > 700) continue;  // 0 there, as stated
        const Bernoulli one = bernoulli(x), many = lanes.at(k);
        EXPECT_NEAR(many.plus / one.plus, 1, 2e-15) << x;
        EXPECT_NEAR(many.minus / one.minus, 1, 2e-15) << x;
        // The closed form of the slope loses digits as 1/x^2 just above 0.1.
        EXPECT_NEAR(many.slope_plus / one.slope_plus, 1, 5e-13) << x;
        EXPECT_NEAR(many.slope_minus / one.slope_minus, 1, 5e-13) << x;
    }
}
