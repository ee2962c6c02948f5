// The linear system of a chain of boxes: three unknowns a node, three fluxes a cell; factorisation and
// solution. Not for: what the fluxes mean (assemble.hpp).
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

/// A block-tridiagonal matrix kept as what it is made of. Row block k of the matrix says
///     (flux of cell k) - (flux of cell k-1) + shunt_k x_k = right-hand side,
///     flux of cell k = left_k x_k + right_k x_(k+1);
/// at the first and last node a row may instead set its unknown.
///
/// Elimination runs from the first node to the last and carries the admittance Y of everything to the left:
/// the flux into node k is Y_k x_k + f_k. With M = Y - shunt and B = left - M,
///     Y_(k+1) = -M B^-1 right,   f_(k+1) = (f + c) + M B^-1 (f + c),
/// products and sums alone. A plain elimination would form left - left B^-1 left by subtraction and lose an
/// admittance sixteen decades below the cell's own; a floating region's level hangs on just that. This is the
/// matrix form of the rule of Grassmann, Taksar and Heyman for Markov chains [Grassmann1985]. A shift of all
/// unknowns alike changes no flux, so the first unknown is carried as that shift and the other two as
/// differences from it. Cost: linear in the number of nodes; no allocation after the first call for a size.
class BlockTridiagonal {
  public:
    /// Sets the number of nodes (at least 2); contents become zero, no unknown is set.
    void resize(std::size_t nodes);
    std::size_t blocks() const { return shunt.size(); }

    /// Derivative of a cell's fluxes with respect to its left and right node, size nodes - 1.
    std::vector<Block> left, right;
    /// Derivative of a node's own terms, size nodes.
    std::vector<Block> shunt;
    /// Rows that set their unknown, at the first and the last node.
    std::array<bool, 3> first_is_set{}, last_is_set{};

    /// Factorises. Returns the first singular node, or blocks() when all is well.
    std::size_t factorize();
    /// Solves with the last factorisation, in place; size 3 blocks().
    void solve(std::span<double> right_hand_side) const;

    /// Blocks of the matrix as such, for tests and products.
    Block lower_block(std::size_t node) const;
    Block diagonal_block(std::size_t node) const;
    Block upper_block(std::size_t node) const;

  private:
    // In the basis (shift; difference of the second; difference of the third).
    std::vector<Block> inverse_;     // B^-1
    std::vector<Block> coupling_;    // x_k = coupling x_(k+1) + B^-1 (f + c)
    std::vector<Block> admittance_;  // M
};

}  // namespace bandwright
