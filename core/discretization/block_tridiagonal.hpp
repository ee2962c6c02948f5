// The linear system of a chain of boxes: three unknowns a node, three fluxes a cell; elimination from both
// ends. Not for: what the fluxes mean (assemble.hpp).
//
// SPDX-License-Identifier: MIT
#pragma once

#include <array>
#include <cstddef>
#include <span>
#include <vector>

namespace bandwright {

/// Row-major 3x3 block.
using Block = std::array<double, 9>;

/// Newton's linear system, kept as what it is made of. For node k, with T the fluxes after the step:
///     T_k - T_(k-1) + (source of node k) + (own terms of node k) z_k = 0,
///     T_k = (present flux of cell k) + near_k z_k + far_k z_(k+1).
///
/// Inside, the unknowns of a node are changes of *levels*: z = (psi, phi_major - psi, phi_minor - phi_major),
/// major and minor being the carriers with the higher and the lower density there. A common shift of all
/// three potentials changes no flux and no rate, so the first column of a cell is the same at both ends but
/// for its sign; a rate depends on the third level, so no conductance has to be found as a difference of
/// others; and a minority carrier far from its solution does not disturb the majority's level.
///
/// Elimination runs from both ends to the middle, two nodes at a time in the two lanes of a vector register.
/// It carries what everything outside lets through: T = Y z_k + f into node k. With M = Y - own terms,
/// c = f - source and B = near - M,
///     z_k = C z_(k+1) + y,   C = -B^-1 far = 1 + slip,   slip = B^-1 (M - near - far),   y = B^-1 (c -
///     flux), Y' = M C = near slip + (near + far),   f' = c + M y = flux + near y.
/// Each of the last two has two forms, equal but for rounding: where a cell conducts better than what lies
/// outside the first keeps its digits, where worse the second; entry by entry the one whose terms are smaller
/// is taken. A plain elimination forms differences of large conductances and of rounded balances, and loses a
/// leakage sixteen decades below the cell's own; a floating region's level hangs on just that. The first
/// forms are the rule of Grassmann, Taksar and Heyman for Markov chains [Grassmann1985] in matrices; the rest
/// is derived. Cost: linear in the number of nodes; no allocation after the first call for a size.
class BlockTridiagonal {
  public:
    /// Sets the number of nodes (at least 2); contents become zero, no unknown is set.
    void resize(std::size_t nodes);
    std::size_t blocks() const { return potential_by_both.size(); }

    /// Derivatives of the fluxes of a cell, size nodes - 1 each. Poisson: dielectric * (psi_right -
    /// psi_left). Carriers: by the first level of the right node (of the left node: the same, negative), by
    /// phi of the left node at fixed psi, and by phi of both nodes at fixed psi (the small sum of two large
    /// numbers).
    std::vector<double> dielectric;
    std::vector<double> electron_shift, electron_left, electron_sum;
    std::vector<double> hole_shift, hole_left, hole_sum;
    /// Present fluxes of a cell, size nodes - 1 each.
    std::vector<double> potential_flux, electron_flux, hole_flux;
    /// Sources of a node, rows as the unknowns, size 3 nodes; of a row that sets its unknown: the unknown
    /// minus what it is set to.
    std::vector<double> source;
    /// Whether holes outnumber electrons at a node, size nodes.
    std::vector<char> holes_lead;
    /// Own terms of a node, size nodes each: of Poisson's row, and of the hole row (the electron row has the
    /// same with the other sign), by both quasi-Fermi potentials together and by the minor carrier's alone.
    std::vector<double> potential_by_both, potential_by_minor, hole_by_both, hole_by_minor;
    /// Further own terms at the first and the last node, of the electron row by phi_n and of the hole row by
    /// phi_p; and rows there that set their unknown.
    std::array<double, 2> first_own{}, last_own{};
    std::array<bool, 3> first_is_set{}, last_is_set{};

    /// Step of all levels to the solution, size 3 blocks(). False when a block is singular (the numbers are
    /// then without meaning).
    bool solve(std::span<double> step);
    /// The same, and beside it the answer to `pull` (rows of the first node) instead of sources and fluxes.
    bool solve(std::span<double> step, std::span<double> answer, const std::array<double, 3>& pull);

    /// What is left of a balance, T_k - T_(k-1) + source at present.
    double balance(std::size_t node, std::size_t row) const;

    /// Blocks of the matrix by (psi, phi_n, phi_p), for tests and products.
    Block lower_block(std::size_t node) const;
    Block diagonal_block(std::size_t node) const;
    Block upper_block(std::size_t node) const;

  private:
    // Per pair of nodes, the two lanes beside each other: 9 entries of coupling (z_k = coupling z_next + y).
    std::vector<double> coupling_;
};

/// (psi, phi_n, phi_p) from (psi, phi_n - psi, phi_p - psi), in place.
inline void potentials_from_gaps(std::span<double> step) {
    for (std::size_t k = 0; k + 2 < step.size(); k += 3) {
        step[k + 1] += step[k];
        step[k + 2] += step[k];
    }
}

}  // namespace bandwright
