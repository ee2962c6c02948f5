// Spacing: the wanted cell width as a function of depth, and a mesh that keeps it. Knows no physics.
// Not for: deciding what width is needed (first_spacing.hpp, refine.hpp).
// SPDX-License-Identifier: MIT
#pragma once

#include <vector>

#include "core/mesh/mesh.hpp"

namespace bandwright {

/// Wanted cell width at depths; piecewise linear between them.
struct Spacing {
    /// [m], increasing (equal neighbours allowed, the smaller width counts).
    std::vector<double> depth;
    /// [m], > 0.
    std::vector<double> width;
};

/// Lowers widths so that the width grows by no more than `growth` per unit of depth: w(x) <= w(y) + growth |x
/// - y|. A smooth mesh is what keeps the scheme at second order and nested meshes comparable.
void limit_growth(Spacing& spacing, double growth);

/// Fixed depths of a mesh: layer boundaries, jumps of the doping, junctions. One layer index per stretch.
struct FixedDepths {
    std::vector<double> depth;
    std::vector<std::size_t> layer_of_stretch;
};

/// Mesh whose cells follow the wanted widths between fixed depths. Each stretch gets a multiple of `multiple`
/// cells (4 serves two coarsenings), at least `multiple`. `factor` scales all widths.
Mesh mesh_from_spacing(const FixedDepths& fixed, const Spacing& spacing, double factor = 1,
                       std::size_t multiple = 4);

}  // namespace bandwright
