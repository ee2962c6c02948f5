// DiscreteSystem: a structure on a mesh, ready to be assembled: coefficients of cells, ends and contacts.
// Not for: the equations themselves (assemble.hpp).
// SPDX-License-Identifier: MIT
#pragma once

#include <optional>
#include <vector>

#include "core/device/structure.hpp"
#include "core/discretization/state.hpp"
#include "core/mesh/mesh.hpp"

namespace bandwright {

/// Coefficients of a material in scaled form (energies in kT).
struct EndCoefficients {
    /// chi/kT and -(chi + Eg)/kT: eta_n = psi - phi_n + affinity; eta_p = phi_p - psi + negative_ionization.
    double affinity, negative_ionization;
    double log_Nc, log_Nv;
    /// ln nie^2 and nie^2 [m^-6] (Boltzmann); the latter may underflow to zero, which is harmless.
    double log_intrinsic_squared, intrinsic_squared;
    /// nie exp(+-e_t/kT) [m^-3].
    double n1, p1;
    /// Recombination; `srh` is 1 where Shockley-Read-Hall is on, else 0.
    double tau_n, tau_p, srh;
    double auger_n, auger_p, radiative;
    /// kT-free band numbers for output: relative permittivity, chi [eV], Eg [eV].
    double relative_permittivity, affinity_energy, bandgap;
};

/// What holds at a contact.
struct ContactCoefficients {
    /// psi - contact voltage at neutrality [kT/q].
    double neutral_psi;
    /// Equilibrium densities at the contact [m^-3] and their logarithms.
    double log_n, log_p;
    /// Surface recombination velocities of the minority carrier [m/s]; none: the carrier is in equilibrium.
    std::optional<double> electron_velocity, hole_velocity;
};

/// Created only by discretize(); owns copies of what it needs.
struct DiscreteSystem {
    Structure structure;
    Mesh mesh;
    double thermal_voltage = 0;
    bool fermi_dirac = false;
    /// Series resistance of both contacts [ohm m^2].
    double series_resistance = 0;

    /// Bands per material, with affinities counted from the neutral bottom contact: psi is about zero there,
    /// so that it keeps its digits.
    std::vector<Bands> bands;
    std::vector<EndCoefficients> materials;
    /// Index into materials, per cell (size n - 1).
    std::vector<std::size_t> material_of_cell;
    /// eps kT/q / (q h) [m^-2], D_n/h and D_p/h [m/s], size n - 1.
    std::vector<double> dielectric, electron_speed, hole_speed;
    /// Net doping of the left and the right end of each cell [m^-3], size n - 1; their mean times the width
    /// is the cell's dose.
    std::vector<double> net_left, net_right;
    /// Runs of cells of one material: first cell of each, and the number of cells at the end.
    std::vector<std::size_t> runs;
    ContactCoefficients top, bottom;

    std::size_t nodes() const { return mesh.nodes(); }
    std::size_t cells() const { return mesh.cells(); }
    const EndCoefficients& of_cell(std::size_t cell) const { return materials[material_of_cell[cell]]; }
};

/// Puts a structure on a mesh. Each cell keeps its dose, integrated by the three-point Gauss rule on both
/// halves (exact to fifth degree); mobilities are evaluated at both ends of a cell from inside it and
/// averaged. Errors: ContractError for a structure with complaints or a broken mesh.
DiscreteSystem discretize(const Structure& structure, Mesh mesh);

/// First guess: local neutrality at every node, zero quasi-Fermi potentials.
State neutral_state(const DiscreteSystem& system);

}  // namespace bandwright
