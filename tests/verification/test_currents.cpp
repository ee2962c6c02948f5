// Currents with closed answers: a bar, the ideal diode, the generation current of Sah, Noyce and Shockley.
// SPDX-License-Identifier: MIT
#include <gtest/gtest.h>

#include <cmath>

#include "tests/support/set_a.hpp"

using namespace bandwright;
using namespace bandwright::set_a;

namespace {

double per_area(const BiasOutcome& outcome, std::size_t index = 0) {
    return point(outcome, "current_density", index) / ampere_per_cm2;
}

// Saturation current of one ohmic side of width w [cm], doping N [cm^-3], D [cm2/s], lifetime tau [s]: q ni^2
// D/(L N) coth(w/L) [Shockley1949].
double saturation(double N, double D, double tau, double w) {
    const double L = std::sqrt(D * tau);
    return constants::elementary_charge * 1e20 * D / (L * N) / std::tanh(w / L);
}

}  // namespace

TEST(Bar, obeys_ohm) {
    // n 1e15, 1400 cm2/Vs, 100 um, 1 V; exact with contacts in equilibrium: 22.430473 A/cm2 (electrons alone;
    // holes are 1e-10 of that).
    Options options;
    options.material =
        R"("relative_permittivity": 11.7, "electron_affinity": "4.05 eV", "bandgap": "1.0714757279819708 eV",
        "conduction_band_effective_density": "1e19 cm-3", "valence_band_effective_density": "1e19 cm-3",
        "electron_mobility": "1400 cm2 V-1 s-1", "hole_mobility": "450 cm2 V-1 s-1")";
    const BiasOutcome outcome = solve(uniform_stack({{100, 1e15}}, options), {1});
    EXPECT_NEAR(per_area(outcome) / 22.430473, 1, 1e-7);
}

TEST(GenerationCurrent, in_reverse_equals_the_layer_integral_plus_diffusion) {
    // Layer current q integral U dpsi/|E|, exact (tests/reference/recombination_layer.py): 1e17/1e17, tau
    // 1e-7 s. The textbook q ni W/(2 tau) is 4.3 times larger at -0.5 V. Diffusion from both quasi-neutral
    // parts, ohmic ends, with the solved edges. Tolerance 0.02 %: the split into a layer and two neutral
    // parts neglects generation near the edges at that size.
    Options options;
    options.lifetime = "1e-7 s";
    options.tolerance = 1e-5;
    const std::vector<double> biases{-0.5, -1, -5, -10};
    const double layer[] = {-3.481536990e-8, -6.092744383e-8, -1.987410418e-7, -3.119885567e-7};
    const BiasOutcome outcome = solve(uniform_stack({{2, -1e17}, {2, 1e17}}, options), biases);
    for (std::size_t k = 0; k < biases.size(); ++k) {
        const double width = (2e-6 - 0.5 * point(outcome, "depletion_width", k)) * 100;
        const double Vt = thermal_voltage;
        const double diffusion =
            -(saturation(1e17, 1000 * Vt, 1e-7, width) + saturation(1e17, 450 * Vt, 1e-7, width));
        EXPECT_NEAR(per_area(outcome, k) / (layer[k] + diffusion), 1, 2e-4) << biases[k];
        std::printf("  %5.1f V: %.9e A/cm2, layer + diffusion %.9e, ratio - 1 = %.1e\n", biases[k],
                    per_area(outcome, k), layer[k] + diffusion,
                    per_area(outcome, k) / (layer[k] + diffusion) - 1);
    }
}

TEST(GenerationCurrent, forward_of_the_layer_has_its_own_ideality) {
    // The layer's current alone, 0.2 to 0.4 V; 1 % because the neutral parts' recombination is only
    // estimated.
    Options options;
    options.lifetime = "1e-7 s";
    const std::vector<double> biases{0.2, 0.3, 0.4};
    const double layer[] = {3.439118957e-7, 2.684560583e-6, 2.139875988e-5};
    const BiasOutcome outcome = solve(uniform_stack({{2, -1e17}, {2, 1e17}}, options), biases);
    for (std::size_t k = 0; k < biases.size(); ++k) {
        const double width = (2e-6 - 0.5 * point(outcome, "depletion_width", k)) * 100, Vt = thermal_voltage;
        const double J0 = saturation(1e17, 1000 * Vt, 1e-7, width) + saturation(1e17, 450 * Vt, 1e-7, width);
        EXPECT_NEAR(per_area(outcome, k) / (layer[k] + J0 * std::expm1(biases[k] / Vt)), 1, 0.01)
            << biases[k];
    }
}

TEST(IdealDiode, short_side_without_recombination_is_ni_squared_over_the_gummel_number) {
    // J0 = q ni^2 D/(N W) for each side [MollRoss1956], W the neutral width at that bias; 0.5 % for where
    // exactly it begins.
    const BiasOutcome outcome = solve(uniform_stack({{3, -1e17}, {3, 1e17}}), {0.3, 0.4});
    for (const std::size_t k : {0u, 1u}) {
        const double width = (3e-6 - 0.5 * point(outcome, "depletion_width", k)) * 100, Vt = thermal_voltage;
        const double J0 = constants::elementary_charge * 1e20 * (1000 * Vt + 450 * Vt) / (1e17 * width);
        EXPECT_NEAR(per_area(outcome, k) / (J0 * std::expm1((k == 0 ? 0.3 : 0.4) / Vt)), 1, 5e-3);
    }
}

TEST(IdealDiode, identity_of_moll_and_ross_holds_inside_the_solution) {
    // J_n integral exp(-psi/Vt) dx = q D ni (exp(-phi_n(L)/Vt) - exp(-phi_n(0)/Vt)) for any profile without
    // recombination [MollRoss1956]. The flux of a cell is exact for a straight potential in it, so with the
    // integral of exp(-psi/Vt) taken the same way the identity holds for the discrete solution itself: 1e-10
    // for the rounding of exponentials of 30 kT and of sums over some thousand cells.
    const BiasOutcome outcome = solve(
        one_layer(
            3,
            {R"({"kind": "gaussian", "dopant": "acceptor", "peak": "1e18 cm-3", "depth": "0 um", "straggle": "0.4 um"})",
             R"({"kind": "uniform", "dopant": "donor", "concentration": "1e16 cm-3"})"}),
        {0.3, -2});
    const double Vt = thermal_voltage;
    for (const std::size_t k : {0u, 1u}) {
        const Curve intrinsic = curve(outcome, "intrinsic_level", k);
        const Curve level = curve(outcome, "electron_quasi_fermi_level", k);
        const Curve current = curve(outcome, "electron_current_density", k);
        double integral = 0;
        for (std::size_t place = 0; place + 1 < intrinsic.depth.size(); ++place) {
            const double rise = (intrinsic.value[place + 1] - intrinsic.value[place]) / Vt;
            const double shape = std::abs(rise) < 1e-8 ? 1 + rise / 2 : std::expm1(rise) / rise;
            integral += (intrinsic.depth[place + 1] - intrinsic.depth[place]) *
                        std::exp(intrinsic.value[place] / Vt) * shape;
        }
        const double right = constants::elementary_charge * electron_diffusivity * intrinsic_density *
                             (std::exp(level.value.back() / Vt) - std::exp(level.value.front() / Vt));
        const double ratio = current.value[intrinsic.depth.size() / 2] * integral / right;
        EXPECT_NEAR(ratio, 1, 1e-10) << k;
    }
}
