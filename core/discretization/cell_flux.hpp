// The Scharfetter-Gummel flux of one carrier through one cell, in the form that does not cancel, with its
// derivatives. Not for: the loop over cells (assemble.cpp).
//
// SPDX-License-Identifier: MIT
#pragma once

#include "core/discretization/bernoulli.hpp"

namespace bandwright {

/// Flux through a cell and its partial derivatives.
struct CellFlux {
    /// J/q [m^-2 s^-1], positive towards greater depth as a current.
    double value;
    /// With respect to u, to a, and to ln(density) of the left and right end.
    double by_u, by_a, by_log_left, by_log_right;
};

/// Electron current through one cell, divided by q [m^-2 s^-1].
///
/// u = change of (ln n + phi_n) from left to right (for Boltzmann statistics in one material: the change of
/// psi), a = change of phi_n, both in kT/q. Exact for constant field, mobility and current along the cell.
/// The branch keeps the argument of expm1 at or below zero: no cancellation, no overflow, zero when a = 0.
///     a >= 0:  (D/h) B(-u) n_left expm1(-a);      a < 0:  -(D/h) B(u) n_right expm1(a)
/// speed         D/h [m/s], > 0
/// left, right   densities at the ends [m^-3]
/// Errors: none. Source: [ScharfetterGummel1969]; excess-chemical-potential form [Koprucki2015].
/// Tests: unit/discretization/test_cell_flux.cpp
inline CellFlux electron_flux(double speed, const Bernoulli& b, double a, double left, double right) {
    if (a >= 0) {
        const double e = std::expm1(-a), scale = speed * left;
        const double value = scale * b.minus * e;
        return {value, -scale * b.slope_minus * e, -scale * b.minus * (e + 1), value, 0};
    }
    const double e = std::expm1(a), scale = speed * right;
    const double value = -scale * b.plus * e;
    return {value, -scale * b.slope_plus * e, -scale * b.plus * (e + 1), 0, value};
}

/// Hole current through one cell, divided by q [m^-2 s^-1].
///
/// u = change of (phi_p - ln p), a = change of phi_p.
///     a >= 0:  (D/h) B(-u) p_right expm1(-a);     a < 0:  -(D/h) B(u) p_left expm1(a)
/// Arguments explained at `electron_flux`.
inline CellFlux hole_flux(double speed, const Bernoulli& b, double a, double left, double right) {
    if (a >= 0) {
        const double e = std::expm1(-a), scale = speed * right;
        const double value = scale * b.minus * e;
        return {value, -scale * b.slope_minus * e, -scale * b.minus * (e + 1), 0, value};
    }
    const double e = std::expm1(a), scale = speed * left;
    const double value = -scale * b.plus * e;
    return {value, -scale * b.slope_plus * e, -scale * b.plus * (e + 1), value, 0};
}

}  // namespace bandwright
