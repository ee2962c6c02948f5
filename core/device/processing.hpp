// From recipes to profiles: implants get their ranges, anneals spread what they reach.
// Not for: the physics of either (core/process).
// SPDX-License-Identifier: MIT
#pragma once

#include "core/device/structure.hpp"

namespace bandwright {

/// Turns the recipes of a structure into profiles, in place.
///
/// Implants: range and straggle from the user or the tables of core/process, cut at the surface, films taken
/// as the silicon that stops as much. An implant's own anneal and then the structure's act in silicon on
/// every dopant with a known diffusivity, between a reflecting surface and a reflecting bottom; others stay,
/// with a warning. Adds warnings and ledger lines (Structure::warnings, Structure::process). Returns
/// complaints (an energy outside the tables, an ion or film without a table); the structure is then without
/// meaning. Tests: unit/device/test_processing.cpp
std::vector<Complaint> process(Structure& structure);

}  // namespace bandwright
