// "Set A": the round material of the verification tests, and short ways to solve a structure and read the
// outcome. Not for: silicon as it is (io/materials) or structures drawn by chance (random_structure.hpp).
// SPDX-License-Identifier: MIT
#pragma once

#include <string>
#include <vector>

#include "core/base/constants.hpp"
#include "solvers/analyses/bias_points.hpp"

namespace bandwright::set_a {

/// Set A at 300 K: relative permittivity 11.7, intrinsic density 1e10 cm-3 (Nc = Nv = 1e19 cm-3 and a gap of
/// 2 kT ln(1e9)), Boltzmann statistics, full ionization, mobilities 1000 and 450 cm2/Vs that depend on
/// nothing.
inline constexpr double temperature = 300;
/// kT/q [V].
inline constexpr double thermal_voltage = constants::thermal_voltage(temperature);
/// [F/m]
inline constexpr double permittivity = 11.7 * constants::vacuum_permittivity;
/// [m^-3]
inline constexpr double intrinsic_density = 1e16;
/// Diffusion coefficients [m^2/s].
inline constexpr double electron_diffusivity = 0.1 * thermal_voltage,
                        hole_diffusivity = 0.045 * thermal_voltage;
/// One um in m, one cm^-3 in m^-3, one V/cm in V/m, one A/cm2 in A/m2.
inline constexpr double um = 1e-6, per_cm3 = 1e6, volt_per_cm = 1e2, ampere_per_cm2 = 1e4;

/// sqrt(eps kT/q / (q N)) of a doping [m]; doping in m^-3. Source: definition.
double debye_length(double doping);

/// What of set A a test replaces. Texts go into the structure file as they are.
struct Options {
    /// JSON object body of the material "A"; empty: set A.
    std::string material;
    /// "boltzmann" or "fermi-dirac".
    std::string statistics = "boltzmann";
    /// Lifetime of both carriers, for example "1 us"; empty: no recombination.
    std::string lifetime;
    /// JSON object of the contacts; empty: both ohmic.
    std::string contacts;
    /// mesh.tolerance
    double tolerance = 1e-4;
};

/// A uniformly doped layer of material "A".
struct UniformLayer {
    double thickness_um;
    /// Net doping [cm^-3], donors positive; 0 for an undoped layer.
    double net_doping;
};

/// JSON text of a stack of uniform layers, top to bottom.
std::string uniform_stack(const std::vector<UniformLayer>& layers, const Options& options = {});

/// JSON text of one layer with doping entries given as JSON texts.
std::string one_layer(double thickness_um, const std::vector<std::string>& doping,
                      const Options& options = {});

/// Reads the text and solves it at the biases [V]. Throws std::runtime_error with the outcome's message when
/// a bias was not reached, so that a test never judges half an outcome.
BiasOutcome solve(const std::string& structure_text, const std::vector<double>& biases);

/// Value and error of a point column at a point, memory units. Throws std::runtime_error for an unknown name.
double point(const BiasOutcome& outcome, const std::string& column, std::size_t index = 0);
double point_error(const BiasOutcome& outcome, const std::string& column, std::size_t index = 0);

/// Value of a figure, memory units.
double figure(const BiasOutcome& outcome, const std::string& name);

/// A variable over depth at a point, memory units, with the depths [m].
struct Curve {
    std::vector<double> depth, value;
    /// Value at the depth of the axis that is nearest to the one asked for [m]; of two equal ones the lower
    /// side.
    double at(double x) const;
};
Curve curve(const BiasOutcome& outcome, const std::string& variable, std::size_t index = 0);

}  // namespace bandwright::set_a
