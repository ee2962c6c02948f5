// Diffusivities of dopants in silicon and the thermal budget of a sequence of anneals.
// Not for: what a budget does to a profile (diffusion.hpp).
//
// SPDX-License-Identifier: MIT
#pragma once

#include <optional>
#include <span>
#include <string>
#include <string_view>

#include "core/base/sourced.hpp"

namespace bandwright {

/// D = D0 exp(-Ea / kT): D0 [m^2/s], Ea [eV], and where they come from.
struct Diffusivity {
    double D0 = 0, Ea = 0;
    std::string source;
    Status status = Status::estimate;
};

/// The intrinsic diffusivity in silicon of B, P, As, Sb, Al, Ga, In, and of BF2 (that of B); none for other
/// names. Source: [Plummer2000], from memory. Other published sets differ by a factor of 1.5 to 2.
///
/// Not in it: transient enhanced diffusion, enhancement above the intrinsic density, oxidation enhancement
/// and segregation.
std::optional<Diffusivity> intrinsic_diffusivity(std::string_view dopant);

/// D at a temperature [m^2/s]. temperature: kelvin, > 0.
double value(const Diffusivity& diffusivity, double temperature);

/// One anneal: time [s] at a temperature [K], and the time [s] that heating up takes, which cooling takes
/// again. Both ramps are linear between 600 degC (873.15 K), below which no dopant moves noticeably, and the
/// temperature; at or below 600 degC they add nothing.
struct AnnealStep {
    double temperature = 0, time = 0;
    double ramp = 0;
};

/// Sum of D t over the steps [m^2]; ramps by the trapezoidal rule with steps of at most 1 s.
/// A Gaussian that stays away from the surfaces gains twice this in variance.
double thermal_budget(std::span<const AnnealStep> steps, const Diffusivity& diffusivity);

}  // namespace bandwright
