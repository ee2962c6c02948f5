// The forward current of a p-n diode is the sum of what its two quasi-neutral sides and its layer recombine.
//
// Sides: J0 = (q ni^2 D/(N L)) f, f = coth(w) at an ohmic contact, 1 for a long side,
// (sinh w + s cosh w)/(cosh w + s sinh w) at a contact with surface velocity S, w = W/L, s = S L/D
// [Shockley1949]. Layer: q int (U - U_far) dpsi/|E| (tests/reference/recombination_layer.py; p 1e18 | n 1e16,
// tau 1e-7 s, scaled to 1e-6 s) and the excess of the n side carried on to the plane, q p_edge x_n/tau.
// Tolerance 0.5 %: the neutral side begins within half a Debye length (20 nm of 10 um) of the half-depletion
// point, and high injection adds ni^2 exp(V/Vt)/N^2 = 2.5e-4 at 0.5 V.

// SPDX-License-Identifier: MIT
#include <gtest/gtest.h>

#include <cmath>

#include "tests/support/set_a.hpp"

using namespace bandwright;
using namespace bandwright::set_a;

namespace {

constexpr double tau = 1e-6, p_doping = 1e24, n_doping = 1e22;
constexpr double p_thickness = 5e-6;

struct Case {
    const char* name;
    double n_thickness;
    // Surface velocity at the bottom [m/s]; negative for unlimited.
    double velocity;
};

double side(double doping, double diffusivity, double width, double velocity) {
    const double L = std::sqrt(diffusivity * tau), w = width / L, s = velocity * L / diffusivity;
    const double f = velocity < 0 ? 1 / std::tanh(w)
                                  : (std::sinh(w) + s * std::cosh(w)) / (std::cosh(w) + s * std::sinh(w));
    return constants::elementary_charge * intrinsic_density * intrinsic_density * diffusivity / (doping * L) *
           f;
}

class DiodeSide : public testing::TestWithParam<Case> {};

}  // namespace

TEST(DiodeFormula, repeats_its_reference_values) {
    // n side 1e16, mobility 450, 1 us, evaluated with mpmath [A/cm2]; 10 digits kept.
    const auto value = [](double width, double velocity) {
        return side(n_doping, hole_diffusivity, width, velocity) / ampere_per_cm2;
    };
    EXPECT_NEAR(value(1, -1) / 5.464667251e-12, 1, 1e-9);
    EXPECT_NEAR(value(1e-5, -1) / 1.916978473e-11, 1, 1e-9);
    EXPECT_NEAR(value(1e-5, 0) / 1.557794654e-12, 1, 1e-9);
    EXPECT_NEAR(value(1e-5, 10) / 2.916237339e-12, 1, 1e-9);
}

TEST_P(DiodeSide, carries_the_current_of_shockley) {
    const Case& c = GetParam();
    Options options;
    options.lifetime = "1e-6 s";
    if (c.velocity >= 0)
        options.contacts = R"({"top": {"kind": "ohmic"}, "bottom": {"kind": "ohmic", "hole_velocity": ")" +
                           std::to_string(c.velocity) + R"( m s-1"}})";
    const std::vector<double> biases{0.4, 0.5};
    const double layer[] = {7.54727680978e-5 * 0.1 * ampere_per_cm2, 6.28738100211e-4 * 0.1 * ampere_per_cm2};
    const BiasOutcome outcome =
        solve(uniform_stack({{p_thickness / um, -1e18}, {c.n_thickness / um, 1e16}}, options), biases);
    for (std::size_t k = 0; k < biases.size(); ++k) {
        const double top_edge = point(outcome, "depletion_top_edge", k);
        const double n_extent = point(outcome, "depletion_bottom_edge", k) - p_thickness;
        const double carried_on =
            constants::elementary_charge * intrinsic_density * intrinsic_density / n_doping / tau * n_extent;
        const double sides = side(n_doping, hole_diffusivity, c.n_thickness - n_extent, c.velocity) +
                             side(p_doping, electron_diffusivity, top_edge, -1) + carried_on;
        const double expected = sides * std::expm1(biases[k] / thermal_voltage) + layer[k];
        const double ratio = point(outcome, "current_density", k) / expected;
        EXPECT_NEAR(ratio, 1, 5e-3) << c.name << " " << biases[k];
    }
}

INSTANTIATE_TEST_SUITE_P(Cases, DiodeSide,
                         testing::Values(Case{"long", 170e-6, -1}, Case{"10 um, ohmic", 10e-6, -1},
                                         Case{"10 um, 1e3 cm/s", 10e-6, 10}),
                         [](const auto& info) {
                             return std::string(info.index == 0   ? "long_side"
                                                : info.index == 1 ? "ohmic"
                                                                  : "velocity");
                         });
