// Where a solution asks for smaller cells: local shares of the relative error of charge, flux and
// recombination. Not for: turning them into a mesh (core/mesh/refine.hpp).
//
// SPDX-License-Identifier: MIT
#pragma once

#include <vector>

#include "core/discretization/assemble.hpp"
#include "core/mesh/refine.hpp"

namespace bandwright {

/// Density range a cell has seen over several states; tells where a depletion edge has swept.
struct SeenDensities {
    std::vector<double> most, least;  // n + p [m^-3], per cell
    void add(const Equations& equations);
};

/// Demands of one state: charge (second derivative of the space charge, relative to the largest
/// displacement), recombination (its second derivative, relative to the current), and the flux of each
/// carrier (curvature of psi where that carrier's path resists most).
std::vector<Demand> demands_of(const DiscreteSystem& system, const State& state, const Equations& equations);

/// Largest widths [m] that do not depend on one state: Debye lengths where an edge sweeps, and the curvature
/// of the doping where a region is neutral.
std::vector<double> largest_widths(const DiscreteSystem& system, const SeenDensities& seen,
                                   const std::vector<double>& junction_depths, double tolerance);

}  // namespace bandwright
