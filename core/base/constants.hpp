// Physical constants in SI. Not for: material data (io/materials) or numerical tolerances.
// SPDX-License-Identifier: MIT
#pragma once

namespace bandwright::constants {

/// Elementary charge [C]. Exact. Source: [SI2019].
inline constexpr double elementary_charge = 1.602176634e-19;
/// Boltzmann constant [J/K]. Exact. Source: [SI2019].
inline constexpr double boltzmann = 1.380649e-23;
/// Planck constant [J s]. Exact. Source: [SI2019].
inline constexpr double planck = 6.62607015e-34;
/// Electron rest mass [kg]. Source: [CODATA2018].
inline constexpr double electron_mass = 9.1093837015e-31;
/// Vacuum permittivity [F/m]. Source: [CODATA2018].
inline constexpr double vacuum_permittivity = 8.8541878128e-12;
/// Speed of light [m/s]. Exact. Source: [SI2019].
inline constexpr double speed_of_light = 299792458.0;

/// Thermal voltage kT/q at a temperature [V].
/// temperature: kelvin, > 0. Source: definition.
constexpr double thermal_voltage(double temperature) { return boltzmann * temperature / elementary_charge; }

}  // namespace bandwright::constants
