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
/// fall          expm1(-|a|)
/// left, right   densities at the ends [m^-3]
/// Errors: none. Source: [ScharfetterGummel1969]; excess-chemical-potential form [Koprucki2015].
/// Tests: unit/discretization/test_cell_flux.cpp
inline CellFlux electron_flux(double speed, const Bernoulli& b, double a, double fall, double left,
                              double right) {
    const bool down = a >= 0;  // both lines in one, so that a loop over cells becomes vector instructions
    const double scale = speed * (down ? left : right), from = down ? b.minus : b.plus,
                 slope = down ? b.slope_minus : b.slope_plus;
    const double value = down ? scale * from * fall : -scale * from * fall;
    return {value, -scale * slope * fall, -scale * from * (fall + 1), down ? value : 0, down ? 0 : value};
}

/// Hole current through one cell, divided by q [m^-2 s^-1].
///
/// u = change of (phi_p - ln p), a = change of phi_p.
///     a >= 0:  (D/h) B(-u) p_right expm1(-a);     a < 0:  -(D/h) B(u) p_left expm1(a)
/// Arguments explained at `electron_flux`.
inline CellFlux hole_flux(double speed, const Bernoulli& b, double a, double fall, double left,
                          double right) {
    const bool down = a >= 0;
    const double scale = speed * (down ? right : left), from = down ? b.minus : b.plus,
                 slope = down ? b.slope_minus : b.slope_plus;
    const double value = down ? scale * from * fall : -scale * from * fall;
    return {value, -scale * slope * fall, -scale * from * (fall + 1), down ? 0 : value, down ? value : 0};
}

}  // namespace bandwright
