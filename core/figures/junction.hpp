// Figures of one junction read off a solved state: edges, width, peak and extrapolated field, barrier.
// Not for: the hand formulas beside them (depletion_approximation.hpp).
// SPDX-License-Identifier: MIT
#pragma once

#include <optional>
#include <string>
#include <vector>

#include "core/device/structure.hpp"
#include "core/discretization/assemble.hpp"

namespace bandwright {

/// What one junction looks like in one state. A missing number has its reason in `state`.
struct JunctionFigures {
    /// Half-depletion points: outward from n = p, the first upward crossing of majority density / net doping
    /// through one half [m]; where a side is nowhere half depleted, the place where its doping begins. None
    /// where the layer is depleted through.
    std::optional<double> top_edge, bottom_edge;
    /// Largest field of the junction, signed [V/m], at a node or, where the field is smooth, at the summit
    /// between two; the depth [m] of the node nearest to it.
    std::optional<double> peak_field, peak_depth;
    /// How far from that node the summit may lie [m]: one cell where the field is smooth, as far as it stays
    /// within a thousandth of the mesh's tolerance where it is flat, 0 at a jump of the doping.
    double peak_depth_resolution = 0;
    /// The lightly doped side's field where it holds fewest carriers, carried to the junction by its doping
    /// alone, signed [V/m]: the figure that a hand estimate means.
    std::optional<double> extrapolated_field;
    /// What the carriers that are left there may hide of it [V/m]: their share of the doping times the
    /// doping's dose between that place and the junction.
    double extrapolated_doubt = 0;
    /// Potential between the neutral neighbours, n side minus p side [V].
    std::optional<double> barrier;
    /// "reached through" and the like; empty when every figure is there.
    std::string state;
};

/// Reads the figures of a junction off a state. `equations` filled for `state`.
/// Errors: none; a figure that does not exist is none.
JunctionFigures junction_figures(const DiscreteSystem& system, const State& state, const Equations& equations,
                                 const std::vector<Metallurgical>& junctions, std::size_t which);

/// Index of the junction whose barrier differs most between two states (of two of the same mesh).
std::size_t most_biased_junction(const DiscreteSystem& system, const std::vector<Metallurgical>& junctions,
                                 const State& equilibrium, const State& biased);

}  // namespace bandwright
