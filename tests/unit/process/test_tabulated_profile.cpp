// Tables of profiles: their error, their zero, their second derivatives.
//
// SPDX-License-Identifier: MIT
#include "core/process/tabulated_profile.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <vector>

#include "core/process/diffusion.hpp"
#include "core/process/predeposition.hpp"
#include "core/process/quadrature.hpp"

using namespace bandwright;

namespace {

constexpr double um = 1e-6;

void expect_close(const std::function<double(double)>& N, double thickness, const std::vector<double>& points,
                  int samples) {
    const TabulatedProfile table = tabulated(N, thickness, points);
    EXPECT_LE(table.worst, 1e-11);
    EXPECT_LT(table.piece.size(), 2000u);
    ASSERT_EQ(table.edge.size(), table.piece.size() + 1);
    int above = 0;
    for (int k = 0; k <= samples; ++k) {
        const double x = thickness * k / samples, exact = N(x), found = value(table, x);
        if (exact > 1.01 * table.floor) {
            EXPECT_NEAR(found / exact, 1, 1e-10) << x;
            ++above;
        } else if (exact < 0.99 * table.floor) {
            EXPECT_EQ(found, 0) << x;
        }
    }
    EXPECT_GT(above, samples / 50);
    EXPECT_EQ(value(table, -1e-12), 0);
    EXPECT_EQ(value(table, 1.0001 * thickness), 0);
}

}  // namespace

TEST(TabulatedProfile, is_within_1e10_of_closed_profiles) {
    expect_close([](double x) { return predeposited(x, 1e26, 1e-15); }, 3 * um, {}, 3001);
    expect_close([](double x) { return 1e24 * std::exp(-x / (0.05 * um)); }, 3 * um, {}, 3001);
    const std::vector<StartingPiece> narrow{GaussianPiece{1e25, 1.3 * um, 0.01 * um}};
    expect_close([&](double x) { return diffused(narrow, x, 1e-18, 3 * um); }, 3 * um, {1.3 * um}, 3001);
    expect_close([](double) { return 4.0; }, 3 * um, {}, 301);
}

TEST(TabulatedProfile, is_within_1e10_of_integrated_profiles) {
    std::vector<std::string> remarks;
    const ImplantShape shape = pearson_four({0.3 * um, 0.0746 * um, -1.05, 6.2}, remarks);
    const auto implanted = starting_pieces(shape, 1e18, 0.02 * um, 0, 2 * um);
    expect_close([&](double x) { return diffused(implanted, x, 2.5e-15, 2 * um); }, 2 * um, {0.3 * um}, 501);
    const std::vector<StartingPiece> erfc{
        AnyPiece{[](double x) { return predeposited(x, 1e26, 1e-15); }, 0, 2 * um, {0.03 * um, 0.1 * um}}};
    expect_close([&](double x) { return diffused(erfc, x, 1e-16, 2 * um); }, 2 * um, {}, 501);
    const std::vector<StartingPiece> exponential{
        AnyPiece{[](double x) { return 1e24 * std::exp(-x / (0.1 * um)); }, 0, 2 * um, {}}};
    expect_close([&](double x) { return diffused(exponential, x, 1e-15, 2 * um); }, 2 * um, {}, 501);
}

TEST(TabulatedProfile, has_the_second_derivative_of_the_profile) {
    const double s = 0.1 * um;
    const auto N = [&](double x) { return 1e24 * std::exp(-0.5 * std::pow((x - 0.5 * um) / s, 2)); };
    const TabulatedProfile table = tabulated(N, 2 * um);
    for (double x = 0.05 * um; x < 1.2 * um; x += 0.0137 * um) {
        const double h = 1e-3 * s, z = (x - 0.5 * um) / s;
        const double bend =
            (std::log(value(table, x + h)) - 2 * std::log(value(table, x)) + std::log(value(table, x - h))) /
            (h * h);
        // The allowed error of the table, 1e-11, over h^2 is 1e-5 of 1/s^2.
        EXPECT_NEAR(bend * s * s, -1, 2e-5) << z;
    }
}

TEST(TabulatedProfile, jumps_and_nothing) {
    const auto step = [](double x) { return x < 0.4 * um ? 1e22 : 1e20; };
    const TabulatedProfile table = tabulated(step, 1 * um, std::vector{0.4 * um});
    EXPECT_NEAR(value(table, 0.3999 * um) / 1e22, 1, 1e-12);
    EXPECT_NEAR(value(table, 0.4001 * um) / 1e20, 1, 1e-12);
    const TabulatedProfile nothing = tabulated([](double) { return 0.0; }, 1 * um);
    EXPECT_EQ(value(nothing, 0.5 * um), 0);
    const TabulatedProfile box = tabulated([](double x) { return x < 0.4123 * um ? 1e22 : 0.0; }, 1 * um);
    EXPECT_NEAR(value(box, 0.4122 * um) / 1e22, 1, 1e-12);
    EXPECT_EQ(value(box, 0.4124 * um), 0);
}

TEST(TabulatedProfile, dose_survives) {
    const std::vector<StartingPiece> pieces{ConstantPiece{1e24, 0.1 * um, 0.3 * um}};
    const TabulatedProfile table =
        tabulated([&](double x) { return diffused(pieces, x, 1e-15, 1 * um); }, 1 * um);
    EXPECT_NEAR(
        integral([&](double x) { return value(table, x); }, 0, 1 * um, table.edge) / (1e24 * 0.2 * um), 1,
        1e-10);
}
