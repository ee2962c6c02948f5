// A material as the database or the user describes it, and its band parameters at one temperature.
// Not for: mobility and recombination formulas (core/models) or reading files (io).
// SPDX-License-Identifier: MIT
#pragma once

#include <map>
#include <optional>
#include <string>
#include <string_view>
#include <vector>

#include "core/base/sourced.hpp"

namespace bandwright {

enum class DopantType { donor, acceptor };

/// A dopant in one host: its type and ionization energy [eV].
struct DopantLevel {
    DopantType type = DopantType::donor;
    std::optional<Sourced> ionization_energy;
    bool operator==(const DopantLevel&) const = default;
};

/// A material: numbers by name, each with its source.
///
/// Names that core understands (unit in memory in brackets):
///   relative_permittivity [1], electron_affinity [eV, at 300 K],
///   bandgap [eV, as it stands] or bandgap_zero_kelvin [eV] + bandgap_slope [eV/K, kept as eV] +
///   bandgap_offset [K]:
///       Varshni E_g = E_0 - slope T^2/(T + offset);
///   conduction_band_effective_density, valence_band_effective_density [m^-3, at 300 K] with
///   conduction_band_exponent, valence_band_exponent [1]: N(T) = N(300) (T/300)^exponent;
///   electron_mobility, hole_mobility [m^2/Vs, at 300 K, low doping], electron_mobility_exponent,
///   hole_mobility_exponent; electron_lifetime, hole_lifetime [s], trap_level [eV from the intrinsic level],
///   radiative_coefficient [m^3/s], electron_auger, hole_auger [m^6/s].
/// A number that the user wrote has Status::yours and is used as it stands at the structure's temperature.
struct Material {
    /// Name that layers refer to.
    std::string name;
    /// Built-in material it rests on; equal to name for a built-in one, empty for a whole one of the user's.
    std::string based_on;
    std::map<std::string, Sourced, std::less<>> parameters;
    std::map<std::string, DopantLevel, std::less<>> dopants;
    /// Mobility models that exist for it; the first is the default.
    std::vector<std::string> mobility_models;

    bool has(std::string_view key) const { return parameters.contains(key); }
    /// Value in memory units; the caller has checked that it is there (ContractError otherwise).
    double value(std::string_view key) const;
    bool is_own(std::string_view key) const;
};

/// Band parameters of a material at one temperature.
struct Bands {
    double relative_permittivity = 1;
    /// Energy from the band edge to the vacuum level [eV].
    double electron_affinity = 0;
    double bandgap = 0;
    /// Effective densities of states [m^-3].
    double Nc = 1, Nv = 1;
    /// ln of the squared intrinsic density [m^-6], Boltzmann: ln Nc + ln Nv - Eg/kT.
    double log_intrinsic_squared = 0;
};

/// Bands of a material at a temperature [K]. The user's own values stand as they are (see Material).
/// electron_affinity(T) = electron_affinity(300) + (Eg(300) - Eg(T))/2, convention, no source.
/// Errors: ContractError where a needed parameter is missing (complaints() finds it first).
Bands bands_at(const Material& material, double temperature);

/// Band gap at a temperature [eV].
double bandgap_at(const Material& material, double temperature);

/// The parameters without which no run is possible, for messages.
const std::vector<std::string>& required_parameters();

}  // namespace bandwright
