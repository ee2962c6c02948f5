// The hand estimates of a junction beside its full solution. Not for: the estimates themselves
// (core/figures/depletion_approximation.hpp).
// SPDX-License-Identifier: MIT
#pragma once

#include <string>
#include <vector>

#include "solvers/analyses/bias_points.hpp"

namespace bandwright {

/// One hand estimate at one bias, memory units; no_value where the estimate does not exist.
struct HandEstimate {
    double built_in_potential = no_value, top_edge = no_value, bottom_edge = no_value, width = no_value,
           field = no_value, capacitance = no_value;
};

/// Estimates at one bias.
struct HandPoint {
    double bias = 0;
    /// Equivalent abrupt junction: heavy side, the largest |net doping| of its region; light side, the net
    /// doping at the solved depletion edge at this bias. Equivalent linearly graded junction: the gradient at
    /// the junction. Depletion approximation on the true profile.
    HandEstimate abrupt, linear, profile;
    /// Doping of the equivalent abrupt junction [m^-3].
    double heavy = no_value, light = no_value;
    /// One sentence: which hand formula to trust here, and one on the peak that spill-over makes; may be
    /// empty.
    std::string verdict, spill_over;
};

/// The solved outcome with its hand estimates, a point each.
struct HandCheck {
    BiasOutcome outcome;
    std::vector<HandPoint> points;
};

/// Solves at 0 V and at the requested biases, and estimates by hand at each (figures of
/// request.junction_depth's junction). Hand values use the Boltzmann intrinsic density of the junction's
/// material and no carriers in the depletion layer. Errors: as run_bias_points. Tests:
/// unit/solvers/test_hand_check.cpp
HandCheck run_hand_check(const Structure& structure, const BiasRequest& request, const Hooks& hooks = {});

}  // namespace bandwright
