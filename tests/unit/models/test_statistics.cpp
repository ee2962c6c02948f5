// The neutral potential: closed form for Boltzmann, neutrality for Fermi-Dirac, at the ends of the range.
// SPDX-License-Identifier: MIT
#include "core/models/statistics.hpp"

#include <gtest/gtest.h>

#include <cmath>

#include "core/base/constants.hpp"
#include "core/models/fermi_integral.hpp"
#include "tests/support/plain_structure.hpp"

using namespace bandwright;

TEST(NeutralPotential, of_a_boltzmann_material_is_the_closed_form) {
    const Material material = plain::material("m", 1.12);
    for (const double T : {250.0, 300.0, 450.0}) {
        const Bands bands = bands_at(material, T);
        const double kT = constants::thermal_voltage(T), ni = std::exp(0.5 * bands.log_intrinsic_squared);
        const double middle = neutral_potential(bands, Statistics::boltzmann, T, 0);
        for (const double N : {1e18, 1e22, 1e26, -1e18, -1e24})
            EXPECT_NEAR(neutral_potential(bands, Statistics::boltzmann, T, N) - middle,
                        kT * std::asinh(N / (2 * ni)), 1e-13);
    }
}

TEST(NeutralPotential, of_a_fermi_dirac_material_is_neutral) {
    for (const double gap : {0.3, 1.12, 6.0})
        for (const double T : {77.0, 300.0, 500.0}) {
            const Bands bands = bands_at(plain::material("m", gap), T);
            const double kT = constants::thermal_voltage(T);
            for (const double N : {1e18, 1e23, 1e27, -1e20, -1e27}) {
                const double psi = neutral_potential(bands, Statistics::fermi_dirac, T, N);
                const double n = bands.Nc * fermi_half((psi + bands.electron_affinity) / kT),
                             p = bands.Nv * fermi_half(-(psi + bands.electron_affinity + bands.bandgap) / kT);
                EXPECT_NEAR((p - n + N) / (p + n), 0, 1e-11) << gap << " " << T << " " << N;
            }
        }
}
