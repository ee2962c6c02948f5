// Regions between junctions against closed forms of uniform layers.
// SPDX-License-Identifier: MIT
#include <gtest/gtest.h>

#include <cmath>

#include "core/base/constants.hpp"
#include "core/figures/sheet_resistance.hpp"
#include "tests/support/plain_structure.hpp"

using namespace bandwright;

TEST(Regions, of_uniform_layers_are_closed_forms) {
    // p 1e17 cm-3 2 um, n 1e15 cm-3 3 um, p 4e15 cm-3 1 um; mobilities 1000 and 450 cm2/Vs, eps_r 11.7.
    const auto regions = sheet_resistances(plain::stack({{2e-6, -1e23}, {3e-6, 1e21}, {1e-6, -4e21}}));
    ASSERT_EQ(regions.size(), 3u);
    const double q = constants::elementary_charge, eps = 11.7 * constants::vacuum_permittivity;
    EXPECT_EQ(regions[1].type, "n");
    EXPECT_NEAR(regions[0].dose / 2e17, 1, 1e-12);
    EXPECT_NEAR(regions[1].value * (q * 0.1 * 1e21 * 3e-6), 1, 1e-12);
    EXPECT_NEAR(regions[2].value * (q * 0.045 * 4e21 * 1e-6), 1, 1e-12);
    EXPECT_EQ(regions[0].peak, 1e23);
    EXPECT_NEAR(regions[1].debye_length / std::sqrt(eps * constants::thermal_voltage(300) / (q * 1e21)), 1,
                1e-12);
    // One junction: q N t^2 / (2 eps). Two: the depletion layers meet half way.
    EXPECT_NEAR(regions[0].depleting_potential / (q * 1e23 * 4e-12 / (2 * eps)), 1, 1e-12);
    EXPECT_NEAR(regions[1].depleting_potential / (q * 1e21 * 2.25e-12 / (2 * eps)), 1, 1e-12);
}
