// Structures no one would build, drawn by chance from a seed, to ask whether anything in the file format's
// reach breaks the solver. Not for: error bars of reasonable structures (random_structure.hpp).
// SPDX-License-Identifier: MIT
#pragma once

#include <string>
#include <vector>

namespace bandwright {

/// A structure file and, when it has a measured profile, the CSV file beside it.
struct TortureCase {
    std::string structure, measured_name, measured;
    /// Two terminal voltages [V]: one of each sign, 1 mV to 50 V, log-uniform.
    std::vector<double> biases;
};

/// Case of a seed. Everything is log-uniform: temperature 77 to 500 K; 1 to 6 layers of 5 nm to 500 um; one
/// to three materials, of which the first is silicon (chance 1/3) or the user's own, the others the user's
/// own: gap 0.3 to 6 eV, affinity 1 to 5 eV, permittivity 3 to 30, effective densities 1e17 to 1e21 cm-3,
/// mobilities 1 to 1e4 cm2/Vs, lifetimes 1 ns to 1 ms, and with chance 1/2 each a trap level, Auger and
/// radiative coefficients; one to six dopings of every kind, 1e12 to 1e21 cm-3; contacts with surface
/// velocities or series resistance (chance 1/5); Boltzmann or Fermi-Dirac statistics; tolerance 1e-3. Errors:
/// none.
TortureCase torture_case(unsigned seed);

}  // namespace bandwright
