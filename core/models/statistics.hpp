// Densities from potentials and back: the neutral potential of a doped region.
// Not for: the Fermi-Dirac integral itself (fermi_integral.hpp).
// SPDX-License-Identifier: MIT
#pragma once

#include "core/device/material.hpp"
#include "core/device/structure.hpp"

namespace bandwright {

/// Potential psi [V], relative to zero quasi-Fermi potentials, at which p - n + net_doping = 0.
///
/// n = Nc F((psi + chi)/U_T), p = Nv F(-(psi + chi + Eg)/U_T), F = exp for Boltzmann statistics. Carried in
/// logarithms, so it holds where the intrinsic density underflows (77 K, 6 eV). net_doping [m^-3], either
/// sign; temperature [K] > 0. Errors: none. Source: [SzeNg2007] ch. 1. Tests: unit/models/test_statistics.cpp
double neutral_potential(const Bands& bands, Statistics statistics, double temperature, double net_doping);

}  // namespace bandwright
