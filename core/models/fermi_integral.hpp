// The Fermi-Dirac integral of order one half, its derivative and inverse, with stated accuracy.
// Not for: densities of a material (statistics.hpp).
// SPDX-License-Identifier: MIT
#pragma once

namespace bandwright {

/// Below exp(eta) = this the short alternating series is used instead of the Chebyshev fit.
inline constexpr double short_series_limit = 0.0024787521766663585;  // exp(-6)

/// How far a density departs from Boltzmann's: gamma = F_1/2(eta) / exp(eta).
struct Degeneracy {
    /// ln gamma, <= 0, without cancellation; tends to 0 for eta -> -infinity.
    double log_gamma;
    /// F_-1/2 / F_1/2 = d(ln F_1/2)/d(eta), <= 1; tends to 1 for eta -> -infinity.
    double ratio;
};

/// Both degeneracy numbers at one reduced energy [1].
///
/// Normalised integral F_j(eta) = 1/Gamma(j+1) integral t^j / (1 + exp(t - eta)) dt, tending to exp(eta).
/// Ranges: eta <= 0 in z = exp(eta); (0, 4]; (4, 12]; (12, 40]; Sommerfeld's expansion above. Relative error
/// of F_1/2 below 1e-15, of its derivative below 2e-14, for -700 < eta < 1e4. Source: definition
/// [Blakemore1982]; fit computed for this program. Tests: unit/models/test_fermi_integral.cpp
Degeneracy degeneracy(double eta);

/// F_1/2 itself beside its degeneracy numbers.
struct Occupation {
    double integral, log_gamma, ratio;
};

/// The same as `degeneracy`, with exp(eta) given (as it comes from a loop over many). Errors and source
/// there.
Occupation occupation(double eta, double exp_eta);

/// F_1/2(eta) [1]; accuracy at `degeneracy`.
double fermi_half(double eta);

/// F_-1/2(eta) [1], the exact derivative of the same series; accuracy at `degeneracy`.
double fermi_minus_half(double eta);

/// eta with F_1/2(eta) = u, u > 0. First guess [Nilsson1973], then Newton on the logarithm to rounding.
double inverse_fermi_half(double u);

}  // namespace bandwright
