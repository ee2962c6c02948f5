// Mesh: node positions and the layer of each cell. Not for: choosing positions (make_mesh.hpp).
// SPDX-License-Identifier: MIT
#pragma once

#include <cstddef>
#include <vector>

namespace bandwright {

/// A one-dimensional mesh. A cell joins nodes `cell` and `cell + 1`.
///
/// Invariants: positions strictly increase; every layer boundary and every jump of the doping is a node; each
/// stretch between two such fixed nodes has a number of cells that is a multiple of `coarsenings()` powers of
/// two.
struct Mesh {
    /// Depth of each node [m], size n.
    std::vector<double> position;
    /// Layer of each cell, size n - 1.
    std::vector<std::size_t> layer_of_cell;
    /// Indices of the fixed nodes, first and last included, increasing.
    std::vector<std::size_t> fixed;

    std::size_t nodes() const { return position.size(); }
    std::size_t cells() const { return layer_of_cell.size(); }
    double width(std::size_t cell) const { return position[cell + 1] - position[cell]; }
};

/// The mesh with every second node between fixed nodes left out. Its nodes are nodes of the fine mesh.
/// Errors: ContractError when a stretch has an odd number of cells.
inline Mesh coarsened(const Mesh& fine);

}  // namespace bandwright

#include "core/base/error.hpp"

namespace bandwright {

inline Mesh coarsened(const Mesh& fine) {
    Mesh coarse;
    for (std::size_t k = 0; k + 1 < fine.fixed.size(); ++k) {
        require((fine.fixed[k + 1] - fine.fixed[k]) % 2 == 0,
                "a stretch between fixed nodes has an odd number of cells");
        coarse.fixed.push_back(coarse.position.size());
        for (std::size_t node = fine.fixed[k]; node < fine.fixed[k + 1]; node += 2) {
            coarse.position.push_back(fine.position[node]);
            coarse.layer_of_cell.push_back(fine.layer_of_cell[node]);
        }
    }
    coarse.fixed.push_back(coarse.position.size());
    coarse.position.push_back(fine.position.back());
    return coarse;
}

}  // namespace bandwright
