// From error demands of a solution to the widths of the next mesh. Pure: knows no state and no physics.
// Not for: where demands come from (solvers/demand.hpp).
// SPDX-License-Identifier: MIT
#pragma once

#include <vector>

#include "core/mesh/spacing.hpp"

namespace bandwright {

/// For one kind of error, the number d of each cell such that width^3 d is the cell's share of a relative
/// error.
using Demand = std::vector<double>;

/// Widths that give every kind of error the size `tolerance` with fewest cells.
///
/// With width w = (b/d)^(1/3) every cell has the same share b, the number of cells is N = integral of dx/w,
/// and N b = tolerance fixes b. Widths of several demands: the least counts. `least` bounds from below, an
/// eighth of a stretch from above; a width changes by no more than a factor of 6 down and 3 up from the
/// present mesh, because the demand of a coarse mesh is uncertain. Derived (equidistribution of a
/// second-order error).
Spacing widths_for(const Mesh& mesh, const std::vector<Demand>& demands,
                   const std::vector<double>& largest_width, double tolerance, double least);

/// Values at the nodes of one mesh, straight between them, at the nodes of another. `stride` values a node.
std::vector<double> interpolated(const Mesh& from, const std::vector<double>& values, const Mesh& to,
                                 std::size_t stride);

/// Values of a fine mesh at the nodes of coarsened(fine).
std::vector<double> injected(const Mesh& fine, const std::vector<double>& values, std::size_t stride);

}  // namespace bandwright
