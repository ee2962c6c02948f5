// Sheet resistance of each region between junctions. Not for: regions depleted by a bias.
// SPDX-License-Identifier: MIT
#pragma once

#include <vector>

#include "core/base/results.hpp"
#include "core/device/structure.hpp"

namespace bandwright {

/// Sheet resistance of every region between neighbouring junctions (and the ends of the stack), top to
/// bottom.
///
/// R = 1 / integral of q mu(N_total) |N_net| dx, flat band: no depletion [ohm per square]. Gauss-Legendre
/// quadrature on stretches halved until two halves agree to 1e-10. Errors: none; an undoped region gives
/// no_value. Source: definition [SzeNg2007]. Tests: verification of published definitions in
/// unit/figures/test_sheet_resistance.cpp
std::vector<SheetLine> sheet_resistances(const Structure& structure);

}  // namespace bandwright
