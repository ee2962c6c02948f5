// The demos solve, keep the invariants of a current, and stay within their iteration budget.
// SPDX-License-Identifier: MIT
#include <gtest/gtest.h>

#include <cmath>
#include <cstdio>
#include <filesystem>

#include "core/base/constants.hpp"
#include "core/figures/terminal.hpp"
#include "io/input/read_structure.hpp"
#include "solvers/adaptive.hpp"
#include "solvers/analyses/bias_points.hpp"
#include "tests/support/set_a.hpp"

using namespace bandwright;

namespace {

std::vector<std::filesystem::path> demos() {
    std::vector<std::filesystem::path> list;
    for (const auto& entry :
         std::filesystem::directory_iterator(std::string(SOURCE_ROOT) + "/demo-structures"))
        if (entry.path().extension() == ".json") list.push_back(entry.path());
    std::sort(list.begin(), list.end());
    return list;
}

const std::vector<double> biases{-20, -5, -1, 0.3, 0.5};

}  // namespace

TEST(Demos, there_are_four) { EXPECT_GE(demos().size(), 4u); }

TEST(Demos, solve_with_error_bars_and_no_current_at_zero_bias) {
    for (const auto& path : demos()) {
        const Structure s = read_structure(path).structure;
        BiasRequest request;
        request.biases = {-20, -1, 0, 0.5};
        const BiasOutcome outcome = run_bias_points(s, request);
        ASSERT_EQ(outcome.end, EndReason::complete) << path << outcome.message;
        const Column& current = *outcome.points.find("current_density");
        EXPECT_LT(current.values[0], 0) << path;
        EXPECT_GT(current.values[3], 0) << path;
        EXPECT_LT(std::abs(current.values[2]), 1e-12 * current.values[3]) << path;
        for (const std::size_t k : {0u, 1u, 3u})
            EXPECT_LT(current.errors[k], 1e-3 * std::abs(current.values[k])) << path;
        const Column& field = *outcome.points.find("peak_field");
        for (std::size_t k = 0; k < 4; ++k) EXPECT_LT(field.errors[k], 1e-3 * field.values[k]) << path;
    }
}

TEST(Demos, fluxes_equal_the_integrated_currents_wherever_rounding_lets_that_be_seen) {
    // In every cell where a carrier's rounding estimate q D n/h 2e-16 max(1, |phi|) is below 1e-10 |J|, its
    // Scharfetter-Gummel flux equals the current integrated from the quiet cell to 1e-8 |J|; at least 30 % of
    // the cells are judged.
    for (const auto& path : demos()) {
        const Structure s = read_structure(path).structure;
        const AdaptedMesh adapted = adapted_mesh(s, biases, 1e10);
        const DiscreteSystem system = discretize(s, adapted.mesh);
        for (const double bias : biases) {
            BiasWalk walk(system);
            ASSERT_TRUE(walk.start());
            ASSERT_EQ(walk.walk_to(bias / system.thermal_voltage, 1e40), BiasWalk::Arrival::arrived)
                << path << walk.message();
            const Equations& e = walk.equations();
            const TerminalCurrent total = terminal_current(system, walk.state(), e);
            const CurrentProfile profile = current_profile(system, e, total);
            const double J = std::abs(total.flux);
            std::size_t judged = 0;
            double worst = 0;
            for (std::size_t cell = 0; cell < system.cells(); ++cell) {
                const auto rounding = [&](double speed, double left, double right, double phi) {
                    return speed * std::max(left, right) * 2e-16 * std::max(1.0, std::abs(phi));
                };
                const bool electrons = rounding(system.electron_speed[cell], e.left(cell).n, e.right(cell).n,
                                                walk.state().phi_n(cell)) < 1e-10 * J;
                const bool holes = rounding(system.hole_speed[cell], e.left(cell).p, e.right(cell).p,
                                            walk.state().phi_p(cell)) < 1e-10 * J;
                if (electrons)
                    worst = std::max(worst, std::abs(e.flux(cell).electron - profile.electron[cell]) / J);
                if (holes) worst = std::max(worst, std::abs(e.flux(cell).hole - profile.hole[cell]) / J);
                judged += electrons || holes;
            }
            const double share = static_cast<double>(judged) / static_cast<double>(system.cells());
            std::printf("  %-28s %6.2f V: %5.1f %% of the cells judged, worst %.1e of J\n",
                        path.stem().c_str(), bias, 100 * share, worst);
            EXPECT_LT(worst, 1e-8) << path << " " << bias;
            EXPECT_GE(share, 0.3) << path << " " << bias;
        }
    }
}

TEST(Budget, of_fifty_volts_in_reverse_is_fifteen_iterations_a_point) {
    // 0 to -50 V, 1 V apart, one-sided 1e15 silicon: all Newton iterations, mesh building and nested meshes
    // included.
    set_a::Options options;
    options.lifetime = "1e-7 s";
    std::vector<double> sweep;
    for (int k = 0; k <= 50; ++k) sweep.push_back(-k);
    const BiasOutcome outcome = set_a::solve(set_a::uniform_stack({{1, -1e19}, {20, 1e15}}, options), sweep);
    std::printf("  %ld iterations for %zu points, %zu nodes\n", outcome.counts.newton_iterations,
                sweep.size(), outcome.counts.nodes);
    EXPECT_EQ(outcome.points.rows(), 51u);
    EXPECT_LE(outcome.counts.newton_iterations, 15 * 51);
}

TEST(Invariants, mirroring_a_structure_leaves_the_current) {
    // Exchange n and p, turn depth round, exchange mobilities (both carriers alike here): |J| unchanged to
    // rounding of the mesh.
    set_a::Options options;
    options.lifetime = "1e-7 s";
    options.material =
        R"("relative_permittivity": 11.7, "electron_affinity": "4.05 eV", "bandgap": "1.0714757279819708 eV",
        "conduction_band_effective_density": "1e19 cm-3", "valence_band_effective_density": "1e19 cm-3",
        "electron_mobility": "700 cm2 V-1 s-1", "hole_mobility": "700 cm2 V-1 s-1")";
    const BiasOutcome one = set_a::solve(set_a::uniform_stack({{1, -1e18}, {4, 1e16}}, options), {-3, 0.4});
    const BiasOutcome other = set_a::solve(set_a::uniform_stack({{4, -1e16}, {1, 1e18}}, options), {-3, 0.4});
    for (std::size_t k = 0; k < 2; ++k) {
        const double a = set_a::point(one, "current_density", k),
                     b = set_a::point(other, "current_density", k);
        EXPECT_LE(std::abs(a - b), set_a::point_error(one, "current_density", k) +
                                       set_a::point_error(other, "current_density", k));
        EXPECT_NEAR(a / b, 1, 1e-4);
    }
}

TEST(Invariants, charge_of_the_stack_equals_the_jump_of_the_displacement) {
    const BiasOutcome outcome = set_a::solve(set_a::uniform_stack({{1, -1e17}, {2, 1e16}}), {-2});
    const set_a::Curve rho = set_a::curve(outcome, "space_charge_density"),
                       field = set_a::curve(outcome, "electric_field");
    double charge = 0, size = 0;
    for (std::size_t k = 0; k + 1 < rho.depth.size(); ++k) {
        const double part = 0.5 * (rho.depth[k + 1] - rho.depth[k]) * (rho.value[k] + rho.value[k + 1]);
        charge += part;
        size += std::abs(part);
    }
    // Both fields vanish; the trapezoid of the pointwise charge is second order (1e-4 of its size on this
    // mesh).
    EXPECT_LT(std::abs(charge), 1e-4 * size);
    EXPECT_LT(std::abs(field.value.front()) + std::abs(field.value.back()), 1.0);
}

TEST(Invariants, scaling_densities_and_lengths_leaves_potentials) {
    // (N, ni, Nc, Nv) times s with lengths over sqrt(s): the same equations in scaled form, so the same
    // potentials; without recombination the currents scale as s sqrt(s). s = 4 keeps every number's decimal
    // text exact.
    set_a::Options options, scaled;
    scaled.material =
        R"("relative_permittivity": 11.7, "electron_affinity": "4.05 eV", "bandgap": "1.0714757279819708 eV",
        "conduction_band_effective_density": "4e19 cm-3", "valence_band_effective_density": "4e19 cm-3",
        "electron_mobility": "1000 cm2 V-1 s-1", "hole_mobility": "450 cm2 V-1 s-1")";
    const BiasOutcome one = set_a::solve(set_a::uniform_stack({{1, -1e17}, {4, 1e16}}, options), {-3, 0.4});
    const BiasOutcome other =
        set_a::solve(set_a::uniform_stack({{0.5, -4e17}, {2, 4e16}}, scaled), {-3, 0.4});
    EXPECT_NEAR(set_a::figure(one, "contact_potential"), set_a::figure(other, "contact_potential"), 1e-13);
    for (std::size_t k = 0; k < 2; ++k) {
        const auto ratio = [&](const char* column) {
            return set_a::point(other, column, k) / set_a::point(one, column, k);
        };
        const auto bar = [&](const char* column) {
            return set_a::point_error(one, column, k) / std::abs(set_a::point(one, column, k)) +
                   set_a::point_error(other, column, k) / std::abs(set_a::point(other, column, k));
        };
        EXPECT_NEAR(ratio("peak_field") / 2, 1, bar("peak_field"));
        EXPECT_NEAR(ratio("depletion_width") * 2, 1, bar("depletion_width"));
        EXPECT_NEAR(ratio("current_density") / 8, 1, bar("current_density"));
        EXPECT_LT(bar("current_density"), 5e-4);
    }
}
