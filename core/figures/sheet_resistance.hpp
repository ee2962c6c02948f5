// Sheet resistance of each region between junctions. Not for: regions depleted by a bias.
// SPDX-License-Identifier: MIT
#pragma once

#include <vector>

#include "core/base/results.hpp"
#include "core/device/structure.hpp"

namespace bandwright {

/// Every region between neighbouring junctions (and the ends of the stack), top to bottom.
///
/// Sheet resistance R = 1 / integral of q mu(N_total) |N_net| dx, flat band: no depletion [ohm per square]
/// [SzeNg2007]. Dose = integral of |N_net| dx. Peak: largest |N_net|, by golden section around the largest of
/// many samples. Debye length sqrt(eps kT / (q^2 N)) at the peak. Depleting potential: q/eps times the
/// integral of |N_net| times the distance from the junction, over a region with one junction; with two, the
/// depletion regions meet where their potentials are equal, and that potential is given. It is a total
/// potential: the applied reverse bias is smaller by the built-in one. Quadratures to 1e-12. Errors: none; an
/// undoped region gives no_value. Tests: unit/figures/test_regions.cpp, unit/models/test_mobility.cpp
std::vector<SheetLine> sheet_resistances(const Structure& structure);

}  // namespace bandwright
