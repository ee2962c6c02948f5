// What a local model may look at, at one end of one cell. Not for: the unknowns (discretization/state.hpp).
// SPDX-License-Identifier: MIT
#pragma once

namespace bandwright {

/// Densities at a point, templated on the scalar (double, Dual, complex).
template <class S>
struct LocalState {
    /// Electron and hole density [m^-3].
    S n, p;
    /// n p (1 - exp(-(phi_p - phi_n) q/kT)) [m^-6], evaluated without cancellation.
    S excess_product;
    /// Densities that the trap level would have [m^-3]: gamma_n nie exp(e_t/kT), gamma_p nie exp(-e_t/kT).
    S n1, p1;
};

}  // namespace bandwright
