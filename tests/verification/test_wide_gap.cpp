// Leakage of a wide-gap diode to -800 V, where the intrinsic density is 1e-8 cm^-3 and the carriers' product
// underflows.
//
// J = q integral U dpsi/|E(psi)|, E from the first integral with nie = ni exp(V/2Vt), 40 digits
// (tests/reference/wide_gap_generation.py). The layer integral leaves out diffusion and what the current
// bends: 1 %.

// SPDX-License-Identifier: MIT
#include <gtest/gtest.h>

#include <cmath>
#include <cstdio>

#include "tests/support/set_a.hpp"

using namespace bandwright;
using namespace bandwright::set_a;

TEST(WideGapDiode, leakage_equals_the_layer_integral_to_minus_800_V) {
    Options options;
    options.material = R"("relative_permittivity": 9.7, "electron_affinity": "3.7 eV", "bandgap": "3.26 eV",
        "conduction_band_effective_density": "1.7e19 cm-3", "valence_band_effective_density": "2.5e19 cm-3",
        "electron_mobility": "900 cm2 V-1 s-1", "hole_mobility": "100 cm2 V-1 s-1")";
    options.lifetime = "1e-7 s";
    const std::vector<double> biases{-1, -100, -400, -800};
    const double expected[] = {-1.20553593231e-25, -2.81886231649e-24, -5.97556221373e-24,
                               -8.59939743328e-24};
    const double field[] = {94536.5606188, 437069.990808, 864805.771378, 1220806.07906};
    const BiasOutcome outcome = solve(uniform_stack({{2, -1e18}, {30, 5e15}}, options), biases);
    for (std::size_t k = 0; k < biases.size(); ++k) {
        const double current = point(outcome, "current_density", k) / ampere_per_cm2;
        std::printf("  %6.0f V: %.6e A/cm2, layer integral %.6e, ratio - 1 = %.1e\n", biases[k], current,
                    expected[k], current / expected[k] - 1);
        EXPECT_NEAR(current / expected[k], 1, 0.01) << biases[k];
        EXPECT_NEAR(point(outcome, "peak_field", k) / volt_per_cm / field[k], 1, 2e-4);
    }
}
