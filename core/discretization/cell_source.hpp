// Net recombination of one half cell with its derivatives, free of cancellation. Not for: generation by
// light.
//
// SPDX-License-Identifier: MIT
#pragma once

#include <cmath>

#include "core/discretization/assemble.hpp"

namespace bandwright {

/// Shockley-Read-Hall, Auger and radiative recombination at one end of a cell [m^-3 s^-1].
///
/// With d = phi_p - phi_n (kT/q) and the excess product Pi = n p (1 - exp(-d)):
///     R = Pi / (tau_p (n + n1) + tau_n (p + p1)) + (C_n n + C_p p) Pi + B Pi.
/// Pi is never formed as n p - nie^2: for d < 0 it is gamma_n gamma_p nie^2 expm1(d), for d >= 0 -n p
/// expm1(-d), so leakage keeps its digits at any reverse bias. Source: [ShockleyRead1952], [Hall1952]; forms
/// of the excess product: derived. Tests: unit/discretization/test_assemble.cpp, contracts/ for the same
/// formulas on dual numbers.
inline HalfRate half_rate(const EndCoefficients& end, const EndState& s, double phi_n, double phi_p,
                          bool fermi_dirac) {
    const double d = phi_p - phi_n;
    const double e = std::expm1(-std::abs(d));
    const double np = s.n * s.p;
    double product, equilibrium;  // Pi and gamma_n gamma_p nie^2 = n p exp(-d)
    if (d < 0) {
        equilibrium = end.intrinsic_squared;
        if (fermi_dirac) equilibrium *= std::exp(s.log_gamma_n + s.log_gamma_p);
        product = equilibrium * e;
    } else {
        product = -np * e;
        equilibrium = np * (1 + e);
    }
    // Logarithmic derivatives: n grows with psi - phi_n at ratio_n, p with phi_p - psi at ratio_p.
    const double product_by_psi = product * (s.ratio_n - s.ratio_p);
    const double product_by_phi_n = -product * s.ratio_n - equilibrium;
    const double product_by_phi_p = product * s.ratio_p + equilibrium;
    const double dn = s.n * s.ratio_n, dp = s.p * s.ratio_p;

    double factor = end.auger_n * s.n + end.auger_p * s.p + end.radiative;
    double factor_by_psi = end.auger_n * dn - end.auger_p * dp;
    double factor_by_phi_n = -end.auger_n * dn, factor_by_phi_p = end.auger_p * dp;
    if (end.has_srh) {
        double n1 = end.n1, p1 = end.p1, dn1 = 0, dp1 = 0;
        if (fermi_dirac) {
            n1 *= std::exp(s.log_gamma_n);
            p1 *= std::exp(s.log_gamma_p);
            dn1 = n1 * (s.ratio_n - 1);  // d(ln gamma)/d(eta) = ratio - 1
            dp1 = p1 * (s.ratio_p - 1);
        }
        const double inverse = 1 / (end.tau_p * (s.n + n1) + end.tau_n * (s.p + p1));
        const double by_n = -inverse * inverse * end.tau_p * (dn + dn1),
                     by_p = -inverse * inverse * end.tau_n * (dp + dp1);
        factor += inverse;
        factor_by_psi += by_n - by_p;
        factor_by_phi_n -= by_n;
        factor_by_phi_p += by_p;
    }
    return {product * factor, product_by_psi * factor + product * factor_by_psi,
            product_by_phi_n * factor + product * factor_by_phi_n,
            product_by_phi_p * factor + product * factor_by_phi_p};
}

}  // namespace bandwright
