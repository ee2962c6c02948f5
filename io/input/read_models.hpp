// The parts of a structure file that choose how it is solved: contacts, models and mesh.
// Not for: which models a material has (core/device/structure.hpp).
// SPDX-License-Identifier: MIT
#pragma once

#include "core/device/structure.hpp"
#include "io/input/cursor.hpp"

namespace bandwright {

/// Reads /contacts. Errors: complaints.
void read_contacts(const Cursor& place, Structure& structure);

/// Reads /models. Errors: complaints; a model of the file format that this version lacks is answered with
/// those it has.
void read_models(const Cursor& place, Models& models);

/// Reads /mesh. Errors: complaints.
void read_mesh(const Cursor& place, MeshRequest& mesh);

}  // namespace bandwright
