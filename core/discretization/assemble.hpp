// The equations: residual, Jacobian and the local quantities they are made of. One loop over ends, one over
// cells, one over nodes. Not for: coefficients (discrete_system.hpp) or solving (solvers/newton.hpp).
// SPDX-License-Identifier: MIT
#pragma once

#include <vector>

#include "core/discretization/block_tridiagonal.hpp"
#include "core/discretization/discrete_system.hpp"

namespace bandwright {

/// Carriers that conduct without being counted as charge or in rates [m^-3]. They keep the level of a region
/// defined where a wide gap or cold leaves fewer carriers than one in 1e30 m^3. 1e-40 A/cm2 is far above what
/// they carry, and a current's floor says what they do. No source: numerical practice.
inline constexpr double background_density = 1e-30;

/// Local quantities at one end of a cell.
struct EndState {
    /// Densities [m^-3], d(ln density)/d(eta) (1 for Boltzmann), ln gamma.
    double n, p, ratio_n, ratio_p, log_gamma_n, log_gamma_p;
};

/// Net recombination of one half cell [m^-3 s^-1] and its derivatives with respect to psi, phi_n and phi_p.
struct HalfRate {
    double value, by_psi, by_phi_n, by_phi_p;
};

/// Electron and hole flux of a cell [m^-2 s^-1].
struct CellFluxes {
    double electron, hole;
};

/// Workspace and outcome of assemble(). Ends are counted from top to bottom, one a node and one more where
/// the material changes.
struct Equations {
    /// Newton's system: fluxes, sources and their derivatives (contact voltage held fixed).
    BlockTridiagonal newton;
    /// Derivative of the sources with respect to the contact voltage: rows of node 0 only.
    std::array<double, 3> by_contact_voltage{};

    EndState left(std::size_t cell) const { return end(left_end[cell]); }
    EndState right(std::size_t cell) const { return end(left_end[cell] + 1); }
    HalfRate rate_left(std::size_t cell) const { return rate_at(left_end[cell]); }
    HalfRate rate_right(std::size_t cell) const { return rate_at(left_end[cell] + 1); }
    CellFluxes flux(std::size_t cell) const { return {newton.electron_flux[cell], newton.hole_flux[cell]}; }
    std::size_t cells() const { return left_end.size(); }

    /// Of the system that this workspace was last sized for.
    std::vector<std::size_t> runs;
    /// End at the left of each cell; its right one is the next.
    std::vector<std::size_t> left_end;
    /// Per end. The four degeneracy numbers are kept for Fermi-Dirac statistics alone.
    std::vector<double> n, p, ratio_n, ratio_p, log_gamma_n, log_gamma_p;
    std::vector<double> rate, rate_by_psi, rate_by_phi_n, rate_by_phi_p;

  private:
    EndState end(std::size_t e) const {
        if (ratio_n.empty()) return {n[e], p[e], 1, 1, 0, 0};
        return {n[e], p[e], ratio_n[e], ratio_p[e], log_gamma_n[e], log_gamma_p[e]};
    }
    HalfRate rate_at(std::size_t e) const {
        return {rate[e], rate_by_psi[e], rate_by_phi_n[e], rate_by_phi_p[e]};
    }
};

/// Fills `equations` for a state.
///
/// Node rows: sum over both half cells (box method). Poisson [m^-2]: divergence of eps E plus charge;
/// electrons: change of J_n/q minus recombination; holes: change of J_p/q plus recombination. Contacts: psi
/// and the majority (and where no surface velocity is given, the minority) quasi-Fermi potential are set.
/// Returns false when a number is not finite (the caller shortens its step).
/// Tests: unit/discretization/test_assemble.cpp (Jacobian against differences).
bool assemble(const DiscreteSystem& system, const State& state, Equations& equations);

/// Rounding error of each balance of an assembled state: one unit in the last place of every term and of
/// every unknown it depends on, size 3 nodes. A balance below a few of these cannot be made smaller.
std::vector<double> rounding_of_balance(const DiscreteSystem& system, const State& state,
                                        const Equations& equations);

}  // namespace bandwright
