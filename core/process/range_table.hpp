// Projected range and straggle of an implanted ion in silicon, and how a film on top shifts them.
// Not for: the shape of the profile (implant.hpp) or moments that a user gives.
//
// SPDX-License-Identifier: MIT
#pragma once

#include <optional>
#include <string>
#include <string_view>

#include "core/base/sourced.hpp"

namespace bandwright {

/// Range and straggle [m] with where they come from.
struct ImplantRange {
    double range = 0, straggle = 0;
    std::string source;
    Status status = Status::estimate;
};

/// The four moments of a computed row: range and straggle [m], skewness, kurtosis (3 for a Gaussian).
struct ComputedMoments {
    double range = 0, straggle = 0, skewness = 0, kurtosis = 0;
};

/// Energies [eV] between which a table has rows.
struct EnergyLimits {
    double lowest = 0, highest = 0;
};

/// Energies for which the table answers; none for an ion without a table.
/// ion: "B", "P", "As", "Sb" or "BF2".
std::optional<EnergyLimits> energy_limits(std::string_view ion);

/// Range and straggle in silicon, logarithm linear in the logarithm of the energy between rows.
///
/// Where the published rows reach (B, P, As 10 to 300 keV, Sb 10 to 100 keV) they are used [Gibbons1975];
/// elsewhere the computed columns, each multiplied by the ratio published/computed at the nearest published
/// energy, so that neither jumps. BF2 breaks up at the surface: boron rows at the boron share of the energy.
/// energy: electronvolt. None: ion without a table, energy outside energy_limits, NaN.
std::optional<ImplantRange> projected_range(std::string_view ion, double energy);

/// The computed columns alone: logarithms of range and straggle, and skewness and kurtosis themselves, linear
/// in the logarithm of the energy. Arguments and missing results as in projected_range.
std::optional<ComputedMoments> computed_moments(std::string_view ion, double energy);

/// Thickness of silicon that stops the ion as one thickness of the film does: k = range in silicon / range in
/// the film, at the ion's energy [eV].
///
/// "SiO2": computed, k linear in the logarithm of the energy, the end row's beyond the rows (10 to 1000 keV).
/// "Si3N4": 1.3, an estimate for every ion. None: unknown film or ion, energy not above zero.
std::optional<Sourced> film_factor(std::string_view ion, std::string_view film, double energy);

}  // namespace bandwright
