// A mesh with every cell cut in two, for judging what an error bar says.
// SPDX-License-Identifier: MIT
#pragma once

#include "core/mesh/mesh.hpp"

namespace bandwright {

inline Mesh halved(const Mesh& mesh) {
    Mesh fine;
    for (std::size_t cell = 0; cell < mesh.cells(); ++cell) {
        fine.position.push_back(mesh.position[cell]);
        fine.position.push_back(0.5 * (mesh.position[cell] + mesh.position[cell + 1]));
        fine.layer_of_cell.insert(fine.layer_of_cell.end(), 2, mesh.layer_of_cell[cell]);
    }
    fine.position.push_back(mesh.position.back());
    for (const std::size_t node : mesh.fixed) fine.fixed.push_back(2 * node);
    return fine;
}

}  // namespace bandwright
