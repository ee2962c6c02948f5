// The first mesh of a structure, from its doping alone: Debye lengths at jumps and junctions, doping
// gradients elsewhere. Not for: refinement from a solution (refine.hpp).
//
// SPDX-License-Identifier: MIT
#pragma once

#include "core/device/structure.hpp"
#include "core/mesh/spacing.hpp"

namespace bandwright {

/// Layer boundaries, jumps of the doping and junctions of a structure.
FixedDepths fixed_depths(const Structure& structure);

/// Wanted widths for a first solve that shall bear biases up to a magnitude [V]: within the depletion width
/// that such a bias makes in the local doping, sqrt(2 eps (V + 1 V) / (q N)), no cell exceeds the local Debye
/// length, because on a mesh that steps over a depletion edge Newton's method cycles. Debye length: sqrt(eps
/// kT / (q^2 N)), [SzeNg2007] ch. 2.
Spacing first_spacing(const Structure& structure, const FixedDepths& fixed, double largest_bias = 0);

}  // namespace bandwright
