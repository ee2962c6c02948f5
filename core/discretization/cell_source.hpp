// Net recombination of one half cell with its derivatives, free of cancellation. Not for: generation by
// light.
//
// SPDX-License-Identifier: MIT
#pragma once

#include "core/discretization/discrete_system.hpp"

namespace bandwright {

/// What a half cell's rate depends on. `change` = expm1(-|phi_p - phi_n|), `level_split` = phi_p - phi_n
/// [kT/q]; gammas and ratios are 1 for Boltzmann statistics.
struct SourceState {
    double n, p, level_split, change;
    double gamma_n = 1, gamma_p = 1, ratio_n = 1, ratio_p = 1;
};

/// Rate [m^-3 s^-1] and derivatives with respect to psi, phi_n and phi_p; their sum is zero.
struct SourceRate {
    double value, by_psi, by_phi_n, by_phi_p;
};

/// Shockley-Read-Hall, Auger and radiative recombination at one end of a cell [m^-3 s^-1].
///
/// With d = phi_p - phi_n (kT/q) and the excess product Pi = n p (1 - exp(-d)):
///     R = Pi / (tau_p (n + n1) + tau_n (p + p1)) + (C_n n + C_p p) Pi + B Pi.
/// Pi is never formed as n p - nie^2: for d < 0 it is gamma_n gamma_p nie^2 expm1(d), for d >= 0 -n p
/// expm1(-d), so leakage keeps its digits at any reverse bias. Written without branches, so that a loop over
/// ends becomes vector instructions. Source: [ShockleyRead1952], [Hall1952]; forms of the excess product:
/// derived. Tests: unit/discretization/test_cell_source.cpp (against core/models/recombination.hpp),
/// test_assemble.cpp (derivatives).
inline SourceRate half_rate(const EndCoefficients& end, const SourceState& s) {
    const double np = s.n * s.p;
    const bool reverse = s.level_split < 0;
    // n p exp(-d), which is nie^2 times both gammas.
    const double equilibrium = reverse ? end.intrinsic_squared * s.gamma_n * s.gamma_p : np * (1 + s.change);
    const double product = reverse ? equilibrium * s.change : -np * s.change;
    // Logarithmic derivatives: n grows with psi - phi_n at ratio_n, p with phi_p - psi at ratio_p.
    const double product_by_psi = product * (s.ratio_n - s.ratio_p);
    const double product_by_phi_n = -product * s.ratio_n - equilibrium;
    const double product_by_phi_p = product * s.ratio_p + equilibrium;
    const double dn = s.n * s.ratio_n, dp = s.p * s.ratio_p;

    const double n1 = end.n1 * s.gamma_n, p1 = end.p1 * s.gamma_p;
    const double dn1 = n1 * (s.ratio_n - 1), dp1 = p1 * (s.ratio_p - 1);  // d(ln gamma)/d(eta) = ratio - 1
    const double inverse = 1 / (end.tau_p * (s.n + n1) + end.tau_n * (s.p + p1));
    // inverse * tau is large where carriers are few, inverse * density is not: no square of the former.
    const double by_n = end.auger_n * dn - end.srh * (inverse * end.tau_p) * (inverse * (dn + dn1)),
                 by_p = end.auger_p * dp - end.srh * (inverse * end.tau_n) * (inverse * (dp + dp1));
    const double factor = end.auger_n * s.n + end.auger_p * s.p + end.radiative + end.srh * inverse;
    return {product * factor, product_by_psi * factor + product * (by_n - by_p),
            product_by_phi_n * factor - product * by_n, product_by_phi_p * factor + product * by_p};
}

}  // namespace bandwright
