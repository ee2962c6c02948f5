// The Jacobian against differences for every model, in random admissible states; a wrong derivative is
// noticed.
//
// SPDX-License-Identifier: MIT
#include "core/discretization/assemble.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <random>
#include <tuple>

#include "core/mesh/first_spacing.hpp"
#include "tests/support/plain_structure.hpp"

using namespace bandwright;

namespace {

struct Case {
    const char* name;
    Statistics statistics;
    std::vector<std::string> recombination;
    bool surface_velocity;
    bool two_materials;
};

DiscreteSystem system_for(const Case& c) {
    std::vector<Material> materials{plain::material("a", 1.12), plain::material("b", 1.4, 3.9, 10)};
    Structure s = plain::stack({{2e-7, -3e23}, {3e-7, 2e22, c.two_materials ? 1u : 0u}, {2e-7, 1e25}},
                               materials, c.statistics);
    s.models.recombination = c.recombination;
    if (c.surface_velocity) {
        s.top.electron_velocity = 1e3;
        s.bottom.hole_velocity = 20;
    }
    const FixedDepths fixed = fixed_depths(s);
    Spacing spacing = first_spacing(s, fixed);
    return discretize(s, mesh_from_spacing(fixed, spacing, 3));
}

State random_state(const DiscreteSystem& system, unsigned seed) {
    std::mt19937_64 engine(seed);
    const auto next = [&] { return static_cast<double>(engine() >> 11) * 0x1p-52 - 1; };
    State state = neutral_state(system);
    state.contact_voltage = 3;
    for (std::size_t node = 0; node < state.nodes(); ++node) {
        state.unknowns[3 * node] += 2 * next();
        state.unknowns[3 * node + 1] += 3 * next();
        state.unknowns[3 * node + 2] += 3 * next();
    }
    return state;
}

// Largest disagreement between the analytic and the difference derivative of the balances, relative to the
// row's largest entry.
double worst_disagreement(const DiscreteSystem& system, const State& state, std::string& place,
                          double spoil = 0) {
    Equations at, plus, minus;
    EXPECT_TRUE(assemble(system, state, at));
    BlockTridiagonal matrix = at.newton;
    if (spoil != 0) matrix.electron_left[4] *= 1 + spoil;
    double worst = 0;
    const char* names[] = {"psi", "phi_n", "phi_p"};
    for (std::size_t node = 0; node < system.nodes(); ++node)
        for (std::size_t k = 0; k < 3; ++k) {
            const double h = 1e-5;
            State up = state, down = state;
            up.unknowns[3 * node + k] += h;
            down.unknowns[3 * node + k] -= h;
            assemble(system, up, plus);
            assemble(system, down, minus);
            for (std::size_t row_node = node > 0 ? node - 1 : 0;
                 row_node <= std::min(node + 1, system.nodes() - 1); ++row_node)
                for (std::size_t r = 0; r < 3; ++r) {
                    const double difference =
                        (plus.newton.balance(row_node, r) - minus.newton.balance(row_node, r)) / (2 * h);
                    const Block lower = matrix.lower_block(row_node),
                                diagonal = matrix.diagonal_block(row_node),
                                upper = matrix.upper_block(row_node);
                    const Block& block = row_node == node ? diagonal : row_node < node ? upper : lower;
                    double largest = 0;
                    for (const Block* b : {&lower, &diagonal, &upper})
                        for (std::size_t j = 0; j < 3; ++j)
                            largest = std::max(largest, std::abs((*b)[3 * r + j]));
                    const double error = std::abs(difference - block[3 * r + k]) / largest;
                    if (error > worst) {
                        worst = error;
                        place = std::string("row ") + names[r] + " of node " + std::to_string(row_node) +
                                ", column " + names[k] + " of node " + std::to_string(node);
                    }
                }
        }
    return worst;
}

class Jacobian : public testing::TestWithParam<Case> {};

}  // namespace

TEST_P(Jacobian, equals_differences_in_random_states) {
    const DiscreteSystem system = system_for(GetParam());
    for (unsigned seed = 1; seed <= 3; ++seed) {
        std::string place;
        // Central differences with 1e-5 kT/q: h^2/6 of third derivatives (1e-10) and rounding 1e-16/1e-5 =
        // 1e-11 times the size of terms that cancel in a row (up to 1e3 of the diagonal).
        EXPECT_LT(worst_disagreement(system, random_state(system, seed), place), 2e-7) << place;
    }
}

TEST_P(Jacobian, with_a_wrong_entry_is_noticed) {
    const DiscreteSystem system = system_for(GetParam());
    std::string place;
    EXPECT_GT(worst_disagreement(system, random_state(system, 1), place, 0.01), 1e-4);
}

INSTANTIATE_TEST_SUITE_P(
    AllModels, Jacobian,
    testing::Values(
        Case{"boltzmann_without_recombination", Statistics::boltzmann, {}, false, false},
        Case{"boltzmann_srh", Statistics::boltzmann, {"srh"}, false, false},
        Case{"boltzmann_auger", Statistics::boltzmann, {"auger"}, false, true},
        Case{"boltzmann_radiative", Statistics::boltzmann, {"radiative"}, true, false},
        Case{"fermi_dirac_without_recombination", Statistics::fermi_dirac, {}, false, true},
        Case{"fermi_dirac_srh", Statistics::fermi_dirac, {"srh"}, true, true},
        Case{"fermi_dirac_all", Statistics::fermi_dirac, {"srh", "auger", "radiative"}, true, false}),
    [](const auto& information) { return std::string(information.param.name); });

TEST(Assemble, equilibrium_has_no_flux_at_all) {
    const DiscreteSystem system = system_for({"", Statistics::fermi_dirac, {"srh"}, false, true});
    Equations equations;
    assemble(system, neutral_state(system), equations);
    for (std::size_t cell = 0; cell < system.cells(); ++cell) {
        EXPECT_EQ(equations.flux(cell).electron, 0);
        EXPECT_EQ(equations.flux(cell).hole, 0);
    }
}
