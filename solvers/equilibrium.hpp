// Equilibrium: Poisson's equation alone, both quasi-Fermi potentials at zero. Not for: any other bias
// (newton.hpp).
//
// SPDX-License-Identifier: MIT
#pragma once

#include "solvers/newton.hpp"

namespace bandwright {

/// Solves equilibrium from a guess of the potential; `state` is updated when the report says converged, and
/// `equations` are then those of the solution.
///
/// The problem is the minimum of a convex energy: Newton's step is shortened until the energy no longer falls
/// along it, so this converges from any guess.
NewtonReport solve_equilibrium(const DiscreteSystem& system, State& state, Equations& equations);

}  // namespace bandwright
