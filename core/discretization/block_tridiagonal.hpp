// A block-tridiagonal matrix of 3x3 blocks: storage, factorisation, solution.
// Not for: what its rows mean (assemble.hpp).
// SPDX-License-Identifier: MIT
#pragma once

#include <array>
#include <cstddef>
#include <span>
#include <vector>

namespace bandwright {

/// Row-major 3x3 block.
using Block = std::array<double, 9>;

/// Rows of block k couple to blocks k-1 (lower), k (diagonal) and k+1 (upper).
///
/// Factorisation is block elimination from the first block to the last, with partial pivoting inside each 3x3 block and
/// none between blocks: the matrices of a drift-diffusion system are close to diagonally dominant in this sense, which
/// is tested against a banded solver with full pivoting. Cost: linear in the number of blocks; no allocation after the
/// first call for a size.
class BlockTridiagonal {
  public:
    /// Sets the number of blocks; contents become zero.
    void resize(std::size_t blocks);
    std::size_t blocks() const { return diagonal.size(); }

    std::vector<Block> lower, diagonal, upper;

    /// Factorises a copy. Returns the first singular block, or blocks() when all is well.
    std::size_t factorize();
    /// Solves with the last factorisation, in place; size 3 blocks().
    void solve(std::span<double> right_hand_side) const;
    /// Product with a vector, for residual checks; size 3 blocks().
    void multiply(std::span<const double> x, std::span<double> product) const;

  private:
    std::vector<Block> inverse_;   // of the reduced diagonal blocks
    std::vector<Block> coupling_;  // inverse_ * upper
};

}  // namespace bandwright
