// Graded profiles with closed or computed answers: the exponential profile's constant field, the linear
// junction.
//
// SPDX-License-Identifier: MIT
#include <gtest/gtest.h>

#include <cmath>

#include "tests/support/set_a.hpp"

using namespace bandwright;
using namespace bandwright::set_a;

TEST(ExponentialProfile, has_the_field_kT_over_q_L) {
    // Majority carriers only: psi is exactly linear, |E| = kT/(q L). Minority carriers change it by 2
    // ni^2/N^2 (1e-12). Judged 12 Debye lengths or more away from both ends (41 nm at 1e16): their influence
    // is below exp(-12).
    struct Row {
        double thickness, decay;
        const char* surface;
        double field;
    };
    for (const Row& row : {Row{1, 1, "1e18 cm-3", 258.519998}, Row{0.3, 0.1, "1e18 cm-3", 2585.19998},
                           Row{1, 0.217147241, "1e18 cm-3", 1190.528587}}) {
        Options options;
        options.tolerance =
            1e-8;  // without a junction no figure watches the field; the mesh must be fine by itself
        const std::string doping = std::string(R"({"kind": "exponential", "dopant": "donor", "surface": ")") +
                                   row.surface + R"(", "decay_length": ")" + std::to_string(row.decay) +
                                   R"( um"})";
        const BiasOutcome outcome = solve(one_layer(row.thickness, {doping}, options), {0});
        const double middle = 0.2 * row.thickness * um;
        EXPECT_NEAR(std::abs(curve(outcome, "electric_field").at(middle)) / volt_per_cm / row.field, 1, 1e-5)
            << row.decay;
    }
}

TEST(LinearJunction, has_the_exact_field_at_its_plane) {
    // Poisson with both carriers and flat quasi-Fermi levels, fourth-order Numerov, 9 digits; recomputed by
    // tests/reference/linear_junction.py. cm^-4, V, V/cm.
    struct Row {
        const char* gradient;
        double thickness, bias, field;
    };
    for (const Row& row : {Row{"1e18 cm-4", 24, 0, 2070.91942}, Row{"1e18 cm-4", 40, -5, 10949.9758},
                           Row{"1e19 cm-4", 12, 0, 4987.72134}, Row{"1e19 cm-4", 20, -5, 23818.3602},
                           Row{"1e20 cm-4", 6, 0, 11816.5883}, Row{"1e20 cm-4", 8, -5, 51802.5698},
                           Row{"1e21 cm-4", 3, 0, 27656.4977}, Row{"1e21 cm-4", 4, -5, 112650.510},
                           Row{"1e22 cm-4", 1.6, 0, 64125.7043}, Row{"1e22 cm-4", 2, -5, 244939.614},
                           Row{"1e23 cm-4", 0.8, 0, 147582.022}, Row{"1e23 cm-4", 1, -5, 532513.268}}) {
        const std::string doping = std::string(R"({"kind": "linear", "gradient": ")") + row.gradient +
                                   R"(", "zero_depth": ")" + std::to_string(row.thickness / 2) + R"( um"})";
        Options options;
        options.tolerance = 1e-6;
        const BiasOutcome outcome = solve(one_layer(row.thickness, {doping}, options), {row.bias});
        // The tolerance aimed at, and the 9 digits of the reference.
        EXPECT_NEAR(point(outcome, "peak_field") / volt_per_cm / row.field, 1, 2e-6)
            << row.gradient << " " << row.bias;
    }
}
