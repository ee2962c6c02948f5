// The electric field at nodes by Gauss's law on each box. Not for: choosing a peak (junction.hpp).
// SPDX-License-Identifier: MIT
#pragma once

#include <vector>

#include "core/discretization/assemble.hpp"

namespace bandwright {

/// eps E / q at every node [m^-2], positive towards greater depth; size nodes.
///
/// A cell's displacement is exact to second order at its middle; from there it is carried to the node, by the
/// charge of half a cell where the charge may jump. The largest cell field, by contrast, is first order at a
/// cusp. Across a step of permittivity it is eps E that is continuous, so one number serves both sides.
std::vector<double> displacement_at_nodes(const DiscreteSystem& system, const State& state,
                                          const Equations& equations);

/// Space charge at the two ends of a cell, in elementary charges [m^-3].
inline double charge_left(const DiscreteSystem& s, const Equations& e, std::size_t cell) {
    return e.left(cell).p - e.left(cell).n + s.net_left[cell];
}
inline double charge_right(const DiscreteSystem& s, const Equations& e, std::size_t cell) {
    return e.right(cell).p - e.right(cell).n + s.net_right[cell];
}

/// Field [V/m] from eps E / q in the material of a cell.
double field_in_cell(const DiscreteSystem& system, std::size_t cell, double displacement);

}  // namespace bandwright
