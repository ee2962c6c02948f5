// A solved junction differs from the depletion approximation by what theory predicts, and by no more.
//
// Depletion approximation: W = sqrt(2 eps V (1/Na + 1/Nd)/q), E = 2 V/W [SzeNg2007, ch. 2], by
// core/figures/depletion_approximation.hpp. The solution has a tail of majority carriers on both sides, and,
// beside a heavily doped side, carriers that spill into the lightly doped one. What each test allows is
// derived at the test.

// SPDX-License-Identifier: MIT
#include <gtest/gtest.h>

#include <cmath>

#include "core/figures/depletion_approximation.hpp"
#include "tests/support/set_a.hpp"

using namespace bandwright;
using namespace bandwright::set_a;

namespace {

// How far a half-depletion point lies inside the point where the field, drawn on as a straight line, is zero,
// in Debye lengths; tests/reference/half_depletion_point.py.
constexpr double inside_the_line = 0.16083946200467;

double built_in(double acceptors, double donors) {
    return abrupt_built_in_potential(acceptors, donors, intrinsic_density, thermal_voltage);
}

}  // namespace

TEST(AbruptJunction, of_equal_sides_is_the_depletion_approximation_with_2kT_less) {
    // The first integral gives E^2 = (2 q N/eps)(V/2 - kT/q) exactly (to 2 ni kT/N): the depletion field at a
    // potential less by 2 kT/q. The half-depletion points follow from the same integral, 0.1608 Debye lengths
    // inside. Tolerance: 2e-4, twice the error aimed at; minority carriers at the plane change the figures by
    // exp(-V/2Vt) < 1e-5.
    for (const double doping : {1e15, 1e16, 1e17, 1e18}) {
        const double N = doping * per_cm3,
                     thickness = 12 * debye_length(N) / um * 2 + 3e8 / std::sqrt(doping) * 0.5;
        const std::vector<double> biases{0, -1, -5};
        const BiasOutcome outcome = solve(uniform_stack({{thickness, -doping}, {thickness, doping}}), biases);
        for (std::size_t k = 0; k < biases.size(); ++k) {
            const double total = built_in(N, N) - biases[k];
            const DepletionEstimate hand = abrupt_depletion(N, N, permittivity, total);
            const DepletionEstimate corrected =
                abrupt_depletion(N, N, permittivity, total - 2 * thermal_voltage);
            const double field = point(outcome, "peak_field", k),
                         width = point(outcome, "depletion_width", k);
            EXPECT_NEAR(field / corrected.peak_field, 1, 2e-4) << doping << " " << biases[k];
            EXPECT_NEAR(width / (corrected.width() - 2 * inside_the_line * debye_length(N)), 1, 2e-4)
                << doping << " " << biases[k];
            // And the plain hand value is off by what it must be off by.
            EXPECT_NEAR(field / hand.peak_field, std::sqrt(1 - 2 * thermal_voltage / total), 2e-4);
        }
    }
}

TEST(AbruptJunction, of_a_heavy_and_a_light_side_has_the_field_that_a_hand_estimate_means) {
    // The carriers of the 1e19 side spill over the plane. There the potential drops by about
    // kT/q (2 + 2 ln(E0/E)), with E0 = sqrt(2 q N kT/(e eps)) = 1.7e5 V/cm at the plane and E the field
    // beyond: 2 to 8 kT/q for E from E0 down to E0/20. The lightly doped side sees the hand estimate at a
    // potential less by that.
    const double heavy = 1e19 * per_cm3;
    for (const double light : {1e15, 1e16}) {
        const std::vector<double> biases{0, -2, -20};
        const BiasOutcome outcome =
            solve(uniform_stack({{0.2, -1e19}, {light == 1e15 ? 12.0 : 4.0, light}}), biases);
        for (std::size_t k = 0; k < biases.size(); ++k) {
            const double total = built_in(heavy, light * per_cm3) - biases[k];
            const auto hand = [&](double less) {
                return abrupt_depletion(heavy, light * per_cm3, permittivity, total - less * thermal_voltage);
            };
            const double field = point(outcome, "extrapolated_field", k);
            EXPECT_LT(field, hand(2).peak_field) << light << " " << biases[k];
            EXPECT_GT(field, hand(8).peak_field) << light << " " << biases[k];
            const double edge = point(outcome, "depletion_bottom_edge", k) - 0.2 * um;
            const double tail = inside_the_line * debye_length(light * per_cm3);
            EXPECT_LT(edge, hand(2).n_extent - tail) << light << " " << biases[k];
            EXPECT_GT(edge, hand(8).n_extent - tail) << light << " " << biases[k];
        }
    }
}

TEST(AbruptJunction, reached_through_to_a_substrate_has_a_trapezoid_of_field) {
    // p+ | n 1e15, 5 um | n+: beyond 19.3 V the field falls linearly from (V + q N d^2/2 eps)/d to (V - q N
    // d^2/2 eps)/d (total potentials of 50 and 100 V: 138664.8 and 61335.2, 238664.8 and 161335.2 V/cm).
    // Carriers spill in from both ends, 2 to 8 kT/q each as above; the window of the middle of the layer is 4
    // to 16 kT/q below.
    const std::vector<double> totals{50, 100};
    const double contact = built_in(1e25, 1e25);
    const BiasOutcome outcome = solve(uniform_stack({{0.2, -1e19}, {5, 1e15}, {0.5, 1e19}}),
                                      {contact - totals[0], contact - totals[1]});
    const double half_drop = constants::elementary_charge * 1e21 * 2.5e-6 / permittivity;
    for (std::size_t k = 0; k < 2; ++k) {
        const auto middle_field = [&](double less) { return (totals[k] - less * thermal_voltage) / 5e-6; };
        const Curve field = curve(outcome, "electric_field", k);
        const double middle = std::abs(field.at(2.7e-6));
        // The axis has no node exactly in the middle; between nodes the field changes by q N/eps dx.
        const double slack = constants::elementary_charge * 1e21 / permittivity * 0.05e-6;
        EXPECT_LT(middle, middle_field(2) + slack);
        EXPECT_GT(middle, middle_field(16) - slack);
        EXPECT_NEAR(point(outcome, "extrapolated_field", k), middle + half_drop, 2 * slack);
    }
}

TEST(AbruptJunction, passes_from_a_doped_into_a_less_doped_layer_as_the_quadrature_says) {
    // p+ 1e19 | n 1e16, 1 um | n 1e15, total potential 30 and 60 V: W = sqrt((2 eps V/q - (N1 - N2) t^2)/N2),
    // 5.458 and 8.282 um, 223614 and 267281 V/cm. At these fields (above E0) the spill takes less than 4
    // kT/q, and the majority tail 1 kT/q.
    const std::vector<double> totals{30, 60};
    const double contact = built_in(1e25, 1e21);
    const BiasOutcome outcome = solve(uniform_stack({{0.2, -1e19}, {1, 1e16}, {20, 1e15}}),
                                      {contact - totals[0], contact - totals[1]});
    const JunctionProfile profile{
        .net = [](double x) { return x < 0.2 * um   ? -1e25
                                     : x < 1.2 * um ? 1e22
                                                    : 1e21; },
        .junction = 0.2 * um,
        .top = 0,
        .bottom = 21.2 * um,
        .breakpoints = {1.2 * um}};
    for (std::size_t k = 0; k < 2; ++k) {
        const auto high = profile_depletion(profile, permittivity, totals[k] - thermal_voltage);
        const auto low = profile_depletion(profile, permittivity, totals[k] - 5 * thermal_voltage);
        ASSERT_TRUE(high && low);
        const double field = point(outcome, "extrapolated_field", k);
        EXPECT_LT(field, high->peak_field);
        EXPECT_GT(field, low->peak_field);
        const double edge = point(outcome, "depletion_bottom_edge", k) - 0.2 * um;
        const double tail = inside_the_line * debye_length(1e21);
        EXPECT_LT(edge, high->n_extent - tail);
        EXPECT_GT(edge, low->n_extent - tail);
    }
}

TEST(DiffusedJunction, follows_the_quadrature_on_its_own_profile) {
    // Gaussian p profile, 1e18 at the surface, into n 1e15, junction at 2 um. The potential across the
    // estimate's own edges is V_bi = kT/q ln(|net at the p edge| N/ni^2) less the bias, found together with
    // the edges (beyond the p edge the neutral side goes on with its own built-in field). Each side has a
    // majority tail of 1 kT/q, so the estimate at V - 2 kT/q is the expected one; 1 kT/q both ways stands for
    // the tail on the graded side, whose doping changes within it. Edges: the same window and one Debye
    // length of the doping there.
    const double straggle = 2 / std::sqrt(2 * std::log(1000.0));
    const auto net = [=](double x) {
        const double s = x / (straggle * um);
        return 1e21 - 1e24 * std::exp(-0.5 * s * s);
    };
    const std::string gaussian =
        R"({"kind": "gaussian", "dopant": "acceptor", "peak": "1e18 cm-3", "depth": "0 um",
        "straggle": ")" +
        std::to_string(straggle) + R"( um"})";
    const std::string uniform = R"({"kind": "uniform", "dopant": "donor", "concentration": "1e15 cm-3"})";
    const std::vector<double> biases{0, -5, -20};
    const BiasOutcome outcome = solve(one_layer(14, {gaussian, uniform}), biases);
    const JunctionProfile profile{
        .net = net, .junction = 2 * um, .top = 0, .bottom = 14 * um, .breakpoints = {}};
    for (std::size_t k = 0; k < biases.size(); ++k) {
        double total = 0.6 - biases[k];
        for (int step = 0; step < 20; ++step) {
            const auto estimate = profile_depletion(profile, permittivity, total);
            ASSERT_TRUE(estimate);
            total = built_in(-net(2 * um - estimate->p_extent), 1e21) - biases[k];
        }
        const auto high = profile_depletion(profile, permittivity, total - thermal_voltage);
        const auto low = profile_depletion(profile, permittivity, total - 3 * thermal_voltage);
        ASSERT_TRUE(high && low);
        std::printf("  %4.0f V: %.6g V/cm, window %.6g to %.6g\n", biases[k],
                    point(outcome, "peak_field", k) / volt_per_cm, low->peak_field / volt_per_cm,
                    high->peak_field / volt_per_cm);
        EXPECT_LT(point(outcome, "peak_field", k), high->peak_field) << biases[k];
        EXPECT_GT(point(outcome, "peak_field", k), low->peak_field) << biases[k];
        const double above = 2 * um - point(outcome, "depletion_top_edge", k);
        const double below = point(outcome, "depletion_bottom_edge", k) - 2 * um;
        const double p_tail = debye_length(-net(2 * um - high->p_extent)), n_tail = debye_length(1e21);
        EXPECT_LT(above, high->p_extent + p_tail) << biases[k];
        EXPECT_GT(above, low->p_extent - p_tail) << biases[k];
        EXPECT_LT(below, high->n_extent + n_tail) << biases[k];
        EXPECT_GT(below, low->n_extent - n_tail) << biases[k];
    }
}
