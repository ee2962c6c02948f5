// The scheme is of second order in every figure: two-sided windows over the last refinements. Errors are
// against closed forms where there is one, otherwise against Richardson's limit of the two finest meshes.
// SPDX-License-Identifier: MIT
#include <gtest/gtest.h>

#include <cmath>
#include <functional>

#include "core/base/constants.hpp"
#include "core/figures/terminal.hpp"
#include "solvers/adaptive.hpp"
#include "solvers/point_figures.hpp"
#include "solvers/sweep.hpp"
#include "tests/support/order.hpp"
#include "tests/support/plain_structure.hpp"

using namespace bandwright;

namespace {

// A figure on meshes whose cells halve exactly: the finest mesh is coarsened.
std::vector<double> on_nested_meshes(Structure s, double factor, int levels, double voltage,
                                     PointFigure figure) {
    s.mesh.tolerance = 1e-3;
    const AdaptedMesh adapted = adapted_mesh(s, {voltage}, 1e40);
    std::vector<Mesh> meshes{
        mesh_from_spacing(adapted.fixed, adapted.spacing, factor, std::size_t{1} << levels)};
    for (int k = 1; k < levels; ++k) meshes.push_back(coarsened(meshes.back()));
    std::vector<double> values;
    for (auto mesh = meshes.rbegin(); mesh != meshes.rend(); ++mesh) {
        const DiscreteSystem system = discretize(s, *mesh);
        BiasWalk walk(system);
        EXPECT_TRUE(walk.start());
        EXPECT_EQ(walk.walk_to(voltage / system.thermal_voltage, 1e40), BiasWalk::Arrival::arrived);
        const PointFigures point =
            point_figures(system, walk.state(), walk.equations(), metallurgical_junctions(s), 0);
        values.push_back(point[figure]);
    }
    return values;  // coarsest first
}

void expect_second_order(const std::vector<double>& values, double limit, double window) {
    std::vector<double> errors;
    for (const double value : values) errors.push_back(value - limit);
    const std::vector<double> orders = observed_orders(errors);
    for (std::size_t k = orders.size() - 2; k < orders.size(); ++k)
        EXPECT_NEAR(orders[k], 2.0, window) << "refinement " << k;
}

// With no closed form: orders of successive differences, which converge alike.
void expect_second_order_of_differences(const std::vector<double>& values, double window) {
    std::vector<double> differences;
    for (std::size_t k = 0; k + 1 < values.size(); ++k) differences.push_back(values[k + 1] - values[k]);
    const std::vector<double> orders = observed_orders(differences);
    for (std::size_t k = orders.size() - 2; k < orders.size(); ++k)
        EXPECT_NEAR(orders[k], 2.0, window) << "refinement " << k;
}

}  // namespace

TEST(Order, of_the_field_at_a_symmetric_junction_is_two) {
    // First integral of Poisson-Boltzmann: E0^2 = (2 q N / eps)(V_bi/2 - V_T + 2 n_i V_T / N), exact.
    const double N = 1e23;
    Structure s = plain::stack({{1e-6, -N}, {1e-6, N}});
    s.materials[0].parameters["valence_band_effective_density"].value = 2.8e25;
    s.models.recombination = std::vector<std::string>{};
    const double T = constants::thermal_voltage(300), q = constants::elementary_charge;
    const double eps = 11.7 * constants::vacuum_permittivity, ni = 2.8e25 * std::exp(-0.56 / T);
    const double exact =
        std::sqrt(2 * q * N / eps *
                  (T * std::asinh(N / (2 * ni)) - T * std::sqrt(1 + 4 * ni * ni / (N * N)) + 2 * ni * T / N));
    expect_second_order(on_nested_meshes(s, 0.25, 5, 0, PointFigure::peak_field), exact, 0.05);
}

TEST(Order, of_the_width_is_two) {
    // Two errors of opposite sign nearly cancel on the first meshes: the window is for the last three of
    // finer ones.
    expect_second_order_of_differences(on_nested_meshes(plain::stack({{1e-6, -1e24}, {3e-6, 1e22}}), 0.03125,
                                                        6, -2, PointFigure::depletion_width),
                                       0.15);
}

TEST(Order, of_the_leakage_current_is_two) {
    Structure s = plain::stack({{1e-6, -1e24}, {3e-6, 1e22}});
    s.models.recombination = std::vector<std::string>{"srh"};
    expect_second_order_of_differences(on_nested_meshes(s, 0.125, 5, -5, PointFigure::current_density), 0.15);
}

TEST(Order, of_the_forward_current_is_two) {
    Structure s = plain::stack({{1e-6, -1e24}, {3e-6, 1e22}});
    s.models.recombination = std::vector<std::string>{"srh", "auger"};
    expect_second_order_of_differences(on_nested_meshes(s, 0.125, 5, 0.6, PointFigure::current_density),
                                       0.15);
}

TEST(Order, is_two_across_a_heterojunction_with_fermi_dirac_statistics) {
    // The band step sits on a node: no gradient across a cell.
    Structure s = plain::stack({{5e-7, -5e24, 1}, {1e-6, 1e23, 0}},
                               {plain::material("narrow", 0.9, 4.4), plain::material("wide", 1.4, 4.0, 12.5)},
                               Statistics::fermi_dirac);
    expect_second_order_of_differences(on_nested_meshes(s, 0.125, 5, 0.4, PointFigure::current_density),
                                       0.15);
    expect_second_order_of_differences(on_nested_meshes(s, 0.125, 5, -1, PointFigure::peak_field), 0.15);
}
