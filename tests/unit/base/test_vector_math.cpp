// Exponentials of arrays against the long double ones of the standard library, over their whole range.
// SPDX-License-Identifier: MIT
#include "core/base/vector_math.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <vector>

using namespace bandwright;

TEST(VectorMath, exp_keeps_its_stated_accuracy) {
    std::vector<double> x, y;
    for (double v = -700; v <= 700; v += 0.0137) x.push_back(v);
    x.push_back(0);
    y.resize(x.size());
    exp_of(x.data(), y.data(), x.size());
    for (std::size_t k = 0; k < x.size(); ++k)
        ASSERT_NEAR(static_cast<double>(y[k] / std::exp(static_cast<long double>(x[k]))), 1, 4e-16) << x[k];
    EXPECT_EQ(y.back(), 1);
}

TEST(VectorMath, expm1_of_negative_keeps_its_stated_accuracy) {
    std::vector<double> x, y, whole, both;
    for (double v = 1e-300; v < 700; v *= 1.003) x.push_back(-v);
    y.resize(x.size());
    whole.resize(x.size());
    both.resize(x.size());
    expm1_of_negative(x.data(), y.data(), x.size());
    exponentials_of_negative(x.data(), whole.data(), both.data(), x.size());
    EXPECT_EQ(y, both);
    for (std::size_t k = 0; k < x.size(); ++k) {
        ASSERT_NEAR(static_cast<double>(y[k] / std::expm1(static_cast<long double>(x[k]))), 1, 6e-16) << x[k];
        ASSERT_NEAR(static_cast<double>(whole[k] / std::exp(static_cast<long double>(x[k]))), 1, 4e-16)
            << x[k];
    }
}

TEST(VectorMath, ends_of_the_range_are_as_stated) {
    const std::vector<double> x{0.0, -0.0, -701, -1e308};
    std::vector<double> y(4), whole(4);
    exponentials_of_negative(x.data(), whole.data(), y.data(), 4);
    EXPECT_EQ(y, (std::vector<double>{0, 0, -1, -1}));
    EXPECT_EQ(whole[0], 1);
    EXPECT_NEAR(whole[2] / std::exp(-700.0), 1, 4e-16);
}
