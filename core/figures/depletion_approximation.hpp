// The hand estimate of a junction: depletion approximation in closed form and by quadrature on a true
// profile. Not for: the solved junction, whose carriers are not switched off (junction.hpp).
// SPDX-License-Identifier: MIT
#pragma once

#include <functional>
#include <optional>
#include <vector>

namespace bandwright {

/// A junction in the depletion approximation: no carriers between two sharp edges, neutrality outside.
struct DepletionEstimate {
    /// Extents of the depleted layer on the p side and on the n side of the junction [m], > 0.
    double p_extent = 0, n_extent = 0;
    /// Largest |field|, at the junction [V/m].
    double peak_field = 0;
    /// Capacitance per area, permittivity / width [F/m^2].
    double capacitance = 0;
    /// p_extent + n_extent [m].
    double width() const { return p_extent + n_extent; }
};

/// Built-in potential of an abrupt junction, V_bi = U_T ln(Na Nd / ni^2) [V].
/// acceptors, donors, intrinsic_density [m^-3], > 0; thermal_voltage [V]. Errors: none. Source: [SzeNg2007]
/// ch. 2. Tests: unit/figures/test_depletion_approximation.cpp
double abrupt_built_in_potential(double acceptors, double donors, double intrinsic_density,
                                 double thermal_voltage);

/// Abrupt junction of two uniform sides at a total potential (built-in minus applied forward voltage).
///
/// W = sqrt(2 eps V (1/Na + 1/Nd) / q), shared as Na : Nd, peak field 2 V / W, C = eps / W.
/// permittivity [F/m], total_potential [V] > 0. Errors: ContractError where a value is not positive.
/// Source: [SzeNg2007] ch. 2. Tests: as above and verification/test_abrupt_junction.cpp
DepletionEstimate abrupt_depletion(double acceptors, double donors, double permittivity,
                                   double total_potential);

/// Built-in potential of a linearly graded junction, V_bi = 2 U_T ln(a W / (2 ni)) with W at zero bias [V];
/// the pair is iterated to 1e-14. gradient a [m^-4], > 0. Errors: ContractError where there is no positive
/// solution (a gradient too small for a depleted layer). Source: [SzeNg2007] ch. 2.
double linear_built_in_potential(double gradient, double permittivity, double intrinsic_density,
                                 double thermal_voltage);

/// Linearly graded junction: W = (12 eps V / (q a))^(1/3), half on each side, peak field q a W^2 / (8 eps), C
/// = eps / W. Arguments and errors as in abrupt_depletion. Source: [SzeNg2007] ch. 2.
DepletionEstimate linear_depletion(double gradient, double permittivity, double total_potential);

/// A doping profile around a junction, for the quadrature.
struct JunctionProfile {
    /// Net doping, donors positive [m^-3], at a depth [m].
    std::function<double(double)> net;
    /// Depth of the junction and ends of the profile [m]; top < junction < bottom.
    double junction = 0, top = 0, bottom = 0;
    /// Depths of steps and kinks [m]; the quadrature does not cross them.
    std::vector<double> breakpoints;
};

/// Depletion approximation on a true profile: the edges with equal and opposite charge whose dipole moment
/// gives the total potential, V = (q/eps) |int (x - junction) net dx|.
///
/// Gauss-Legendre quadrature on panels that shrink towards the junction; edges to 1e-13 relative.
/// None where the layer reaches an end of the profile or a change of sign of the net doping (reached
/// through). Errors: ContractError where the total potential is not positive or the sides do not have
/// opposite signs. Source: definition; first tabulated for diffused junctions by [LawrenceWarner1960].
std::optional<DepletionEstimate> profile_depletion(const JunctionProfile& profile, double permittivity,
                                                   double total_potential);

}  // namespace bandwright
