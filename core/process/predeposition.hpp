// Closed-form diffusion profiles that start from a surface or from a junction between two layers.
// Not for: implanted profiles (implant.hpp) or any other starting profile (diffusion.hpp).
//
// SPDX-License-Identifier: MIT
#pragma once

namespace bandwright {

/// Concentrations in m^-3, doses in m^-2, depths x >= 0 and thicknesses in m, budgets (integrals of D over
/// time) in m^2 and above zero. The silicon is deep; its surface lets nothing out unless said otherwise.

/// Concentration below a surface that was kept at a concentration: surface erfc(x / (2 sqrt(budget))).
double predeposited(double x, double surface, double budget);

/// Dose that this leaves in the silicon: 2 surface sqrt(budget / pi).
double predeposited_dose(double surface, double budget);

/// A dose that began in a thin sheet at the surface: dose exp(-x^2 / (4 budget)) / sqrt(pi budget).
double driven_in(double x, double dose, double budget);

/// A predeposition with its first budget, then a drive-in with the second and no further supply:
/// (2 surface / pi) integral from 0 to sqrt(first/second) of exp(-b (1 + m^2)) / (1 + m^2) dm with
/// b = x^2 / (4 (first + second)). Source: [Smith1958].
double two_step(double x, double surface, double first, double second);

/// Dopant of the substrate, concentration everywhere below a layer of a thickness, that moved up into the
/// layer: half the concentration times erfc((thickness - x) / (2 sqrt(budget))) plus its image at the
/// surface.
double up_diffused(double x, double thickness, double concentration, double budget);

/// Dopant of the layer itself that moved down into the substrate: with equal concentrations and budgets this
/// and up_diffused add up to the concentration.
double down_diffused(double x, double thickness, double concentration, double budget);

}  // namespace bandwright
