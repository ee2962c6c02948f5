// State: the unknowns and what drives them. The choice of unknowns is written here and nowhere else.
// Not for: quantities derived from them (figures).
// SPDX-License-Identifier: MIT
#pragma once

#include <cstddef>
#include <span>
#include <vector>

namespace bandwright {

/// The unknowns of a node, in units of kT/q: electrostatic potential psi and the two quasi-Fermi potentials.
/// All three are continuous everywhere, across material steps too. The zero of all three is the Fermi level
/// of the bottom contact (inside its series resistance); psi is the vacuum level with its sign turned.
struct State {
    /// psi, phi_n, phi_p of node 0, then node 1, ...; size 3 n nodes.
    std::vector<double> unknowns;
    /// Voltage between the contacts, inside their series resistances [kT/q].
    double contact_voltage = 0;

    std::size_t nodes() const { return unknowns.size() / 3; }
    double psi(std::size_t node) const { return unknowns[3 * node]; }
    double phi_n(std::size_t node) const { return unknowns[3 * node + 1]; }
    double phi_p(std::size_t node) const { return unknowns[3 * node + 2]; }
};

}  // namespace bandwright
