// The visible loop: solve, ask where the error is, make the next mesh, until one mesh serves the whole sweep.
// Not for: error bars (analyses read them off nested meshes).
// SPDX-License-Identifier: MIT
#pragma once

#include <functional>
#include <string>
#include <vector>

#include "core/mesh/spacing.hpp"
#include "solvers/sweep.hpp"

namespace bandwright {

/// What came of meshing.
struct AdaptedMesh {
    Mesh mesh;
    /// The widths and fixed depths it was made from, for meshes of the same shape.
    Spacing spacing;
    FixedDepths fixed;
    /// Newton iterations and rejected steps on the way.
    long iterations = 0, rejected = 0;
    bool ok = true;
    std::string message;
};

/// Mesh for all biases between the extremes of a list [V], zero included.
///
/// Every pass solves on the present mesh at equilibrium and at a few biases up to both extremes, collects
/// demands and lays the next mesh. The last passes compare figures with those of the coarsened mesh and scale
/// all widths until the estimated relative errors meet the tolerance. A bias that cannot be reached, or lies
/// beyond the current limit, is left out: the mesh then serves the biases that were reached.
AdaptedMesh adapted_mesh(const Structure& structure, const std::vector<double>& biases, double max_current,
                         const std::function<bool()>& should_stop = {});

}  // namespace bandwright
