// The terminal current and its derivative, by conservation and free of cancellation; current profiles.
// Not for: charges (charge.hpp).
// SPDX-License-Identifier: MIT
#pragma once

#include <span>
#include <vector>

#include "core/discretization/assemble.hpp"

namespace bandwright {

/// The terminal current of a state.
struct TerminalCurrent {
    /// J/q [m^-2 s^-1], positive into the top contact.
    double flux = 0;
    /// Cell of least D_n n / h, and of least D_p p / h.
    std::size_t electron_cell = 0, hole_cell = 0;
    /// The floor of `flux`: what rounding cannot resolve, and what the background carries [m^-2 s^-1].
    double rounding = 0;
};

/// J = J_n(a) + J_p(b) + q integral from a to b of R, a and b the cells where each carrier is scarcest.
///
/// The sum of both fluxes of one cell would drown a leakage current in the rounding noise of the majority
/// flux; here every term is free of cancellation. Derivation: integrate both continuity equations between a
/// and b. equations: filled by assemble() for `state`. Tests: verification/ (generation current
/// of Sah, Noyce and Shockley), unit/figures/test_terminal.cpp
TerminalCurrent terminal_current(const DiscreteSystem& system, const State& state,
                                 const Equations& equations);

/// Derivative of the flux along a change of psi, phi_n - psi, phi_p - psi (size 3 nodes) [m^-2 s^-1].
double terminal_derivative(const DiscreteSystem& system, const Equations& equations,
                           const TerminalCurrent& current, std::span<const double> change);

/// Electron and hole current of every cell, J/q [m^-2 s^-1], by integrating R - G box by box from the two
/// quiet cells.
struct CurrentProfile {
    std::vector<double> electron, hole;
};
CurrentProfile current_profile(const DiscreteSystem& system, const Equations& equations,
                               const TerminalCurrent& current);

/// Recombination of the whole box of an inner node [m^-2 s^-1].
inline double box_rate(const DiscreteSystem& system, const Equations& equations, std::size_t node) {
    return 0.5 * (system.mesh.width(node - 1) * equations.rate_right(node - 1).value +
                  system.mesh.width(node) * equations.rate_left(node).value);
}

}  // namespace bandwright
