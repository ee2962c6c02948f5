// The terminal current: the same from the cells it is read at and from the integrated profiles, and its
// derivative. SPDX-License-Identifier: MIT
#include "core/figures/terminal.hpp"

#include <gtest/gtest.h>

#include <cmath>

#include "core/mesh/first_spacing.hpp"
#include "solvers/sweep.hpp"
#include "tests/support/plain_structure.hpp"

using namespace bandwright;

namespace {

DiscreteSystem diode() {
    const Structure s = plain::stack({{1e-6, -1e23}, {4e-6, 1e22}});
    const FixedDepths fixed = fixed_depths(s);
    return discretize(s, mesh_from_spacing(fixed, first_spacing(s, fixed, 10)));
}

}  // namespace

TEST(TerminalCurrent, is_the_sum_of_both_profiles_in_every_cell) {
    const DiscreteSystem system = diode();
    BiasWalk walk(system);
    ASSERT_TRUE(walk.start());
    for (const double volts : {0.4, -8.0}) {
        ASSERT_EQ(walk.walk_to(volts / system.thermal_voltage, 1e40), BiasWalk::Arrival::arrived);
        const TerminalCurrent current = terminal_current(system, walk.state(), walk.equations());
        const CurrentProfile profile = current_profile(system, walk.equations(), current);
        for (std::size_t cell = 0; cell < system.cells(); ++cell)
            EXPECT_NEAR((profile.electron[cell] + profile.hole[cell]) / current.flux, 1, 1e-12);
    }
}

TEST(TerminalCurrent, derivative_equals_a_difference) {
    const DiscreteSystem system = diode();
    BiasWalk walk(system);
    ASSERT_TRUE(walk.start());
    const double at = 0.5 / system.thermal_voltage, step = 1e-3;
    const auto flux_at = [&](double voltage) {
        EXPECT_EQ(walk.walk_to(voltage, 1e40), BiasWalk::Arrival::arrived);
        return walk.flux();
    };
    const double low = flux_at(at - step), high = flux_at(at + step);
    ASSERT_EQ(walk.walk_to(at, 1e40), BiasWalk::Arrival::arrived);
    NewtonSolver solver(system);
    Equations equations;
    ASSERT_TRUE(assemble(system, walk.state(), equations));
    const NewtonSolver::Tangent tangent = solver.tangent(walk.state(), false);
    const double slope = terminal_derivative(
        system, equations, terminal_current(system, walk.state(), equations), tangent.by_contact_voltage);
    // h^2/6 of the third derivative: (1e-3)^2 / 6.
    EXPECT_NEAR(slope / ((high - low) / (2 * step)), 1, 1e-6);
}
