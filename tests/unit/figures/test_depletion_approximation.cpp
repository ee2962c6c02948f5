// The hand formulas against worked textbook examples and against their own limits.
// SPDX-License-Identifier: MIT
#include "core/figures/depletion_approximation.hpp"

#include <gtest/gtest.h>

#include <cmath>

#include "core/base/constants.hpp"
#include "core/base/error.hpp"

namespace bandwright {
namespace {

constexpr double per_cm3 = 1e6, um = 1e-6, volt_per_cm = 100, nanofarad_per_cm2 = 1e-5;
constexpr double permittivity = 11.7 * constants::vacuum_permittivity;
constexpr double room_voltage = constants::thermal_voltage(300);

// A book's own constants: its q differs from the exact one, which enters as q/eps; the permittivity is scaled
// with it.
double book_permittivity(double relative, double vacuum_per_cm, double charge) {
    return relative * vacuum_per_cm * 100 * constants::elementary_charge / charge;
}

// Tolerances: half a unit of the last printed digit, or 0.5 % where the print has fewer than three digits of
// its own.
TEST(AbruptDepletion, repeats_a_worked_example_with_sides_1e16_and_1e15) {
    // Neamen, Semiconductor Physics and Devices, example 7.2: 1e16/1e15, ni 1.5e10, 11.7, 8.85e-14 F/cm,
    // q 1.6e-19, kT/q 0.0259.
    const double built_in =
        abrupt_built_in_potential(1e16 * per_cm3, 1e15 * per_cm3, 1.5e10 * per_cm3, 0.0259);
    EXPECT_NEAR(built_in, 0.635, 5e-4);
    const double eps = book_permittivity(11.7, 8.85e-14, 1.6e-19);
    const auto estimate = abrupt_depletion(1e16 * per_cm3, 1e15 * per_cm3, eps, 0.635);
    EXPECT_NEAR(estimate.width() / um, 0.951, 5e-4);
    EXPECT_NEAR(estimate.n_extent / um, 0.8644, 5e-5);
    EXPECT_NEAR(estimate.p_extent / um, 0.0864, 5e-5);
    EXPECT_NEAR(estimate.peak_field / volt_per_cm, 1.34e4, 50);
    // Examples 7.3 and 7.5: 5 V reverse.
    const auto reverse = abrupt_depletion(1e16 * per_cm3, 1e15 * per_cm3, eps, 5.635);
    EXPECT_NEAR(reverse.width() / um, 2.83, 5e-3);
    EXPECT_NEAR(reverse.capacitance / nanofarad_per_cm2 * 1.6e-19 / constants::elementary_charge, 3.66, 5e-3);
}

TEST(AbruptDepletion, repeats_a_worked_problem_with_sides_1e17_and_5e15) {
    // Neamen, problem of chapter 7, solution sheet (read in a secondary source).
    const double built_in =
        abrupt_built_in_potential(1e17 * per_cm3, 5e15 * per_cm3, 1.5e10 * per_cm3, 0.0259);
    EXPECT_NEAR(built_in, 0.7363, 5e-5);
    const auto estimate = abrupt_depletion(1e17 * per_cm3, 5e15 * per_cm3,
                                           book_permittivity(11.7, 8.85e-14, 1.6e-19), built_in);
    EXPECT_NEAR(estimate.n_extent / um, 0.426, 5e-4);
    EXPECT_NEAR(estimate.p_extent / um, 0.0213, 5e-5);
    EXPECT_NEAR(estimate.peak_field / volt_per_cm, 3.29e4, 50);
}

TEST(AbruptDepletion, repeats_a_worked_problem_at_10_and_100_volts) {
    // Jaeger & Blalock, Microelectronic Circuit Design, chapter 3, solution sheet (read in a secondary
    // source).
    const double built_in = abrupt_built_in_potential(1e16 * per_cm3, 1e15 * per_cm3, 1e10 * per_cm3, 0.025);
    EXPECT_NEAR(built_in, 0.633, 5e-4);
    const double eps = book_permittivity(11.7, 8.854e-14, 1.602e-19);
    const auto width = [&](double reverse) {
        return abrupt_depletion(1e16 * per_cm3, 1e15 * per_cm3, eps, built_in + reverse).width() / um;
    };
    EXPECT_NEAR(width(0), 0.949, 5e-4);
    EXPECT_NEAR(width(10), 3.89, 5e-3);
    EXPECT_NEAR(width(100), 12.0, 5e-2);
}

TEST(AbruptDepletion, refuses_a_forward_voltage_above_the_built_in_one) {
    EXPECT_THROW(abrupt_depletion(1e22, 1e22, permittivity, -0.1), ContractError);
}

TEST(LinearDepletion, finds_the_width_that_its_own_built_in_potential_needs) {
    // Own values from the two formulas iterated with 40 digits; 1e-6 is the number of digits kept.
    struct Row {
        double gradient, built_in, width, field;
    };
    for (const Row& row :
         {Row{1e18, 0.5035441, 3.393238, 2225.945}, Row{1e20, 0.6671296, 0.8029193, 12463.20},
          Row{1e23, 0.9105973, 0.08906572, 153358.2}}) {
        const double gradient = row.gradient * 1e8;
        const double built_in =
            linear_built_in_potential(gradient, permittivity, 1e10 * per_cm3, room_voltage);
        const auto estimate = linear_depletion(gradient, permittivity, built_in);
        EXPECT_NEAR(built_in / row.built_in, 1, 1e-6);
        EXPECT_NEAR(estimate.width() / um / row.width, 1, 1e-6);
        EXPECT_NEAR(estimate.peak_field / volt_per_cm / row.field, 1, 1e-6);
    }
}

JunctionProfile two_sides(double p, double n) {
    return {.net = [=](double x) { return x < 5 * um ? -p : n; },
            .junction = 5 * um,
            .top = 0,
            .bottom = 20 * um,
            .breakpoints = {}};
}

TEST(ProfileDepletion, equals_the_closed_form_of_an_abrupt_junction) {
    const auto closed = abrupt_depletion(1e23, 1e21, permittivity, 5.8);
    const auto quadrature = profile_depletion(two_sides(1e23, 1e21), permittivity, 5.8);
    ASSERT_TRUE(quadrature.has_value());
    EXPECT_NEAR(quadrature->p_extent / closed.p_extent, 1, 1e-12);
    EXPECT_NEAR(quadrature->n_extent / closed.n_extent, 1, 1e-12);
    EXPECT_NEAR(quadrature->peak_field / closed.peak_field, 1, 1e-12);
}

TEST(ProfileDepletion, equals_the_closed_form_of_a_linear_junction_with_n_above) {
    const JunctionProfile profile{.net = [](double x) { return 1e27 * (10 * um - x); },
                                  .junction = 10 * um,
                                  .top = 0,
                                  .bottom = 20 * um,
                                  .breakpoints = {}};
    const auto closed = linear_depletion(1e27, permittivity, 3);
    const auto quadrature = profile_depletion(profile, permittivity, 3);
    ASSERT_TRUE(quadrature.has_value());
    EXPECT_NEAR(quadrature->width() / closed.width(), 1, 1e-12);
    EXPECT_NEAR(quadrature->peak_field / closed.peak_field, 1, 1e-12);
}

TEST(ProfileDepletion, says_none_where_the_layer_is_reached_through) {
    EXPECT_FALSE(profile_depletion(two_sides(1e23, 1e20), permittivity, 400).has_value());
}

TEST(ProfileDepletion, passes_from_a_doped_into_a_less_doped_layer) {
    // p+ (1e20) | n 1e16, 1 um | n 1e15: W = sqrt((2 eps V/q - (N1 - N2) t^2)/N2) for an infinitely doped p+
    // side.
    const JunctionProfile profile{
        .net = [](double x) { return x < 1 * um   ? -1e30
                                     : x < 2 * um ? 1e22
                                                  : 1e21; },
        .junction = 1 * um,
        .top = 0,
        .bottom = 20 * um,
        .breakpoints = {2 * um}};
    struct Row {
        double potential, width, field;
    };
    for (const Row& row :
         {Row{5, 0.8041038, 124362.1}, Row{30, 5.458477, 223613.7}, Row{60, 8.281905, 267280.6}}) {
        const auto estimate = profile_depletion(profile, permittivity, row.potential);
        ASSERT_TRUE(estimate.has_value());
        // 1e-6: the digits kept; the finite p+ side (1e24 cm-3) changes less.
        EXPECT_NEAR(estimate->n_extent / um / row.width, 1, 1e-6);
        EXPECT_NEAR(estimate->peak_field / volt_per_cm / row.field, 1, 1e-6);
    }
}

// Diffused p profiles into a uniform n layer, junction at a depth that fixes their length; values by adaptive
// quadrature (tests/reference/diffused_depletion.py), 9 digits kept.
struct DiffusedRow {
    const char* shape;
    double surface, background, depth, potential, p_extent, n_extent, field;
};

void PrintTo(const DiffusedRow& row, std::ostream* out) {
    *out << row.shape << " at " << row.potential << " V";
}

class DiffusedDepletion : public ::testing::TestWithParam<DiffusedRow> {};

TEST_P(DiffusedDepletion, finds_the_edges_of_the_reference_quadrature) {
    const DiffusedRow& row = GetParam();
    const std::string shape = row.shape;
    const double depth = row.depth * um, ratio = row.surface / row.background;
    const double length = shape == "gaussian"      ? depth / std::sqrt(std::log(ratio))
                          : shape == "exponential" ? depth / std::log(ratio)
                                                   : 0.6403251265 * um;
    const auto profile_shape = [&](double x) {
        const double s = x / length;
        return shape == "gaussian" ? std::exp(-s * s) : shape == "exponential" ? std::exp(-s) : std::erfc(s);
    };
    const JunctionProfile profile{
        .net = [&](double x) { return (row.background - row.surface * profile_shape(x)) * per_cm3; },
        .junction = depth,
        .top = 0,
        .bottom = 40 * um,
        .breakpoints = {}};
    const auto estimate = profile_depletion(profile, permittivity, row.potential);
    ASSERT_TRUE(estimate.has_value());
    EXPECT_NEAR(estimate->p_extent / um / row.p_extent, 1, 2e-8);
    EXPECT_NEAR(estimate->n_extent / um / row.n_extent, 1, 2e-8);
    EXPECT_NEAR(estimate->peak_field / volt_per_cm / row.field, 1, 2e-8);
}

INSTANTIATE_TEST_SUITE_P(
    Shapes, DiffusedDepletion,
    ::testing::Values(DiffusedRow{"gaussian", 1e18, 1e15, 2, 0.7, 0.306261542, 0.803199915, 10320.8492},
                      DiffusedRow{"gaussian", 1e18, 1e15, 2, 5, 0.451774637, 2.25299236, 32741.2519},
                      DiffusedRow{"gaussian", 1e18, 1e15, 2, 100, 0.717275299, 10.8352644, 165473.998},
                      DiffusedRow{"gaussian", 1e19, 1e16, 1, 20, 0.245014330, 1.44519089, 212995.333},
                      DiffusedRow{"erfc", 1e20, 1e15, 2, 0.7, 0.239580146, 0.817146430, 11184.3501},
                      DiffusedRow{"erfc", 1e20, 1e15, 2, 100, 0.505419200, 10.9797034, 168357.606},
                      DiffusedRow{"exponential", 1e18, 1e15, 2, 0.7, 0.430211584, 0.832894283, 8655.82444},
                      DiffusedRow{"exponential", 1e18, 1e15, 2, 100, 1.07012679, 10.5948326, 159381.007}));

}  // namespace
}  // namespace bandwright
