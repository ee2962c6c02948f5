// Everything over depth for the result file: band edges, potential, field, densities, currents,
// recombination. Not for: single figures (junction.hpp, terminal.hpp).
//
// SPDX-License-Identifier: MIT
#pragma once

#include "core/base/results.hpp"
#include "core/discretization/assemble.hpp"

namespace bandwright {

/// The depth axis and what does not depend on bias. A node where the layer or the doping jumps stands twice.
Profiles empty_profiles(const DiscreteSystem& system);

/// Appends one bias to the variables over (bias, depth). `equations` filled for `state`.
void append_profiles(const DiscreteSystem& system, const State& state, const Equations& equations,
                     Profiles& profiles);

}  // namespace bandwright
