// The equations: residual, Jacobian and the local quantities they are made of. One loop over cells, one over
// nodes. Not for: coefficients (discrete_system.hpp) or solving (solvers/newton.hpp).
// SPDX-License-Identifier: MIT
#pragma once

#include <vector>

#include "core/discretization/block_tridiagonal.hpp"
#include "core/discretization/cell_flux.hpp"
#include "core/discretization/discrete_system.hpp"

namespace bandwright {

/// Local quantities at one end of a cell.
struct EndState {
    /// Densities [m^-3], d(ln density)/d(eta) (1 for Boltzmann), ln gamma.
    double n, p, ratio_n, ratio_p, log_gamma_n, log_gamma_p;
};

/// Net recombination of one half cell and its derivatives with respect to psi, phi_n, phi_p [m^-3 s^-1].
struct HalfRate {
    double value, by_psi, by_phi_n, by_phi_p;
};

/// Electron and hole flux of a cell with derivatives with respect to its six unknowns.
struct CellFluxes {
    double electron, hole;
    /// By psi and phi of the left node, psi and phi of the right node.
    std::array<double, 4> electron_by, hole_by;
};

/// Workspace and outcome of assemble().
struct Equations {
    /// Rows: Poisson, electrons, holes of node 0, then node 1, ...; each divided by its diagonal, so that an
    /// entry is a correction in kT/q. Size 3 nodes.
    std::vector<double> residual;
    /// The same before division: what is left of each balance (Poisson [m^-2], carriers [m^-2 s^-1]), size 3
    /// nodes.
    std::vector<double> balance;
    /// Derivative of `balance` (contact voltage held fixed).
    BlockTridiagonal jacobian;
    /// Derivative of `balance` with respect to the contact voltage: rows of node 0 only.
    std::array<double, 3> by_contact_voltage{};
    std::vector<EndState> left, right;            // per cell
    std::vector<HalfRate> rate_left, rate_right;  // per cell
    std::vector<CellFluxes> flux;                 // per cell
};

/// Fills `equations` for a state.
///
/// Node rows: sum over both half cells (box method). Poisson [m^-2]: divergence of eps E plus charge;
/// electrons: change of J_n/q minus recombination; holes: change of J_p/q plus recombination. Contacts: psi
/// and the majority (and where no surface velocity is given, the minority) quasi-Fermi potential are set.
/// Returns false when a number is not finite (the caller shortens its step).
/// Tests: unit/discretization/test_assemble.cpp (Jacobian against differences).
bool assemble(const DiscreteSystem& system, const State& state, Equations& equations);

/// Densities, fluxes and rates only, without the Jacobian's blocks and rows.
bool evaluate(const DiscreteSystem& system, const State& state, Equations& equations);

}  // namespace bandwright
