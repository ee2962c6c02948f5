#include "core/figures/terminal.hpp"

#include <algorithm>
#include <cmath>

namespace bandwright {

TerminalCurrent terminal_current(const DiscreteSystem& system, const State& state,
                                 const Equations& equations) {
    TerminalCurrent current;
    double least_n = INFINITY, least_p = INFINITY;
    for (std::size_t cell = 0; cell < system.cells(); ++cell) {
        const double n = system.electron_speed[cell] * (equations.left(cell).n + equations.right(cell).n);
        const double p = system.hole_speed[cell] * (equations.left(cell).p + equations.right(cell).p);
        if (n < least_n) {
            least_n = n;
            current.electron_cell = cell;
        }
        if (p < least_p) {
            least_p = p;
            current.hole_cell = cell;
        }
    }
    const std::size_t a = current.electron_cell, b = current.hole_cell;
    double integral = 0;
    for (std::size_t node = std::min(a, b) + 1; node <= std::max(a, b); ++node)
        integral += box_rate(system, equations, node);
    if (b < a) integral = -integral;
    current.flux = equations.flux(a).electron + equations.flux(b).hole + integral;
    const auto phi_size = [&](std::size_t cell) {
        return std::max({1.0, std::abs(state.phi_n(cell)), std::abs(state.phi_p(cell))});
    };
    const double of_background =
        background_density * (system.electron_speed[a] * std::abs(state.phi_n(a + 1) - state.phi_n(a)) +
                              system.hole_speed[b] * std::abs(state.phi_p(b + 1) - state.phi_p(b)));
    current.rounding =
        of_background + 2.3e-16 * (least_n * phi_size(a) + least_p * phi_size(b) + std::abs(integral));
    return current;
}

double terminal_derivative(const DiscreteSystem& system, const Equations& equations,
                           const TerminalCurrent& current, std::span<const double> change) {
    const std::size_t a = current.electron_cell, b = current.hole_cell;
    const BlockTridiagonal& m = equations.newton;
    const auto gap = [&](std::size_t node, std::size_t k) { return change[3 * node + k]; };
    const double electrons = m.electron_shift[a] * (gap(a + 1, 0) - gap(a, 0)) +
                             m.electron_left[a] * (gap(a, 1) - gap(a + 1, 1)) +
                             m.electron_sum[a] * gap(a + 1, 1);
    const double holes = m.hole_shift[b] * (gap(b + 1, 0) - gap(b, 0)) +
                         m.hole_left[b] * (gap(b, 2) - gap(b + 1, 2)) + m.hole_sum[b] * gap(b + 1, 2);
    double integral = 0;
    for (std::size_t node = std::min(a, b) + 1; node <= std::max(a, b); ++node) {
        const auto half = [&](const HalfRate& rate) {
            return rate.by_phi_n * gap(node, 1) + rate.by_phi_p * gap(node, 2);
        };
        integral += 0.5 * (system.mesh.width(node - 1) * half(equations.rate_right(node - 1)) +
                           system.mesh.width(node) * half(equations.rate_left(node)));
    }
    return electrons + holes + (b < a ? -integral : integral);
}

CurrentProfile current_profile(const DiscreteSystem& system, const Equations& equations,
                               const TerminalCurrent& current) {
    CurrentProfile profile;
    profile.electron.resize(system.cells());
    profile.hole.resize(system.cells());
    const auto integrate = [&](std::vector<double>& values, std::size_t start, double value, double sign) {
        values[start] = value;
        for (std::size_t cell = start + 1; cell < system.cells(); ++cell)
            values[cell] = values[cell - 1] + sign * box_rate(system, equations, cell);
        for (std::size_t cell = start; cell-- > 0;)
            values[cell] = values[cell + 1] - sign * box_rate(system, equations, cell + 1);
    };
    integrate(profile.electron, current.electron_cell, equations.flux(current.electron_cell).electron, 1);
    integrate(profile.hole, current.hole_cell, equations.flux(current.hole_cell).hole, -1);
    return profile;
}

}  // namespace bandwright
