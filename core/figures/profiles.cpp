#include "core/figures/profiles.hpp"

#include <cmath>

#include "core/base/constants.hpp"
#include "core/base/error.hpp"
#include "core/figures/field.hpp"
#include "core/figures/terminal.hpp"

namespace bandwright {

namespace {

/// A place on the depth axis: one end of one cell.
struct Place {
    std::size_t cell;
    bool right;
    std::size_t node() const { return right ? cell + 1 : cell; }
};

double inside(const DiscreteSystem& system, const Place& place) {
    const double h = system.mesh.width(place.cell);
    return place.right ? system.mesh.position[place.cell + 1] - 1e-9 * h
                       : system.mesh.position[place.cell] + 1e-9 * h;
}

Doping doping_of(const DiscreteSystem& system, const Place& place) {
    return doping_at(system.structure, system.mesh.layer_of_cell[place.cell], inside(system, place));
}

// The places of the axis, top to bottom: each node once, a jump twice.
std::vector<Place> places(const DiscreteSystem& system) {
    std::vector<Place> list{{0, false}};
    const std::vector<std::size_t>& fixed = system.mesh.fixed;
    std::size_t next_fixed = 1;
    for (std::size_t node = 1; node + 1 < system.nodes(); ++node) {
        bool jumps = false;
        if (next_fixed < fixed.size() && fixed[next_fixed] == node) {
            ++next_fixed;
            const Doping above = doping_of(system, {node - 1, true}),
                         below = doping_of(system, {node, false});
            jumps = system.mesh.layer_of_cell[node - 1] != system.mesh.layer_of_cell[node] ||
                    std::abs(above.donors - below.donors) + std::abs(above.acceptors - below.acceptors) >
                        1e-6 * (above.total() + below.total());
        }
        if (jumps) list.push_back({node - 1, true});
        list.push_back({node, false});
    }
    list.push_back({system.cells() - 1, true});
    return list;
}

struct Description {
    const char* name;
    Unit unit;
    const char* meaning;
};
constexpr Description over_bias_and_depth[] = {
    {"conduction_band_edge", Unit::energy,
     "conduction band edge, electron energy, zero at the Fermi level of the bottom contact"},
    {"valence_band_edge", Unit::energy, "valence band edge"},
    {"intrinsic_level", Unit::energy, "intrinsic level"},
    {"electron_quasi_fermi_level", Unit::energy, "quasi-Fermi level of electrons"},
    {"hole_quasi_fermi_level", Unit::energy, "quasi-Fermi level of holes"},
    {"electrostatic_potential", Unit::voltage, "electrostatic potential, zero at the bottom contact"},
    {"electric_field", Unit::field, "electric field, positive towards greater depth"},
    {"electron_density", Unit::density, "electron density"},
    {"hole_density", Unit::density, "hole density"},
    {"space_charge_density", Unit::density, "space charge density in elementary charges"},
    {"electron_current_density", Unit::current_density,
     "electron current density, positive towards greater depth"},
    {"hole_current_density", Unit::current_density, "hole current density, positive towards greater depth"},
    {"net_recombination_rate", Unit::rate, "recombination minus generation of all kinds"},
};

}  // namespace

Profiles empty_profiles(const DiscreteSystem& system) {
    Profiles profiles;
    for (const Layer& layer : system.structure.layers) profiles.layer_names.push_back(layer.name);
    Variable donors{"donor_concentration", Unit::density, "donor concentration", false, {}};
    Variable acceptors{"acceptor_concentration", Unit::density, "acceptor concentration", false, {}};
    Variable net{"net_doping", Unit::density, "donors minus acceptors", false, {}};
    const std::vector<Place> axis = places(system);
    for (std::size_t k = 0; k < axis.size(); ++k) {
        const Place& place = axis[k];
        double depth = shown(system.mesh.position[place.node()], Unit::length);
        if (k + 1 < axis.size() && axis[k + 1].node() == place.node()) depth = std::nextafter(depth, -1.0);
        profiles.depth_um.push_back(depth);
        profiles.layer.push_back(static_cast<int>(system.mesh.layer_of_cell[place.cell]));
        const Doping doping = doping_of(system, place);
        donors.values.push_back(doping.donors);
        acceptors.values.push_back(doping.acceptors);
        net.values.push_back(doping.net());
    }
    for (std::size_t k = 1; k < profiles.depth_um.size(); ++k)
        require(profiles.depth_um[k] > profiles.depth_um[k - 1], "the depth axis does not increase");
    profiles.variables = {donors, acceptors, net};
    for (const Description& d : over_bias_and_depth)
        profiles.variables.push_back({d.name, d.unit, d.meaning, true, {}});
    return profiles;
}

void append_profiles(const DiscreteSystem& system, const State& state, const Equations& equations,
                     Profiles& profiles) {
    const std::vector<double> displacement = displacement_at_nodes(system, state, equations);
    const TerminalCurrent current = terminal_current(system, state, equations);
    const CurrentProfile currents = current_profile(system, equations, current);
    const double bottom = state.psi(system.nodes() - 1);
    const double kT = system.thermal_voltage, q = constants::elementary_charge;
    const std::vector<double>& net_doping = profiles.variables[2].values;  // in the order of empty_profiles()
    std::size_t index = 0;
    for (const Place& place : places(system)) {
        const std::size_t node = place.node();
        const EndCoefficients& end = system.of_cell(place.cell);
        const EndState s = place.right ? equations.right(place.cell) : equations.left(place.cell);
        const HalfRate rate =
            place.right ? equations.rate_right(place.cell) : equations.rate_left(place.cell);
        const double half = 0.5 * system.mesh.width(place.cell) * (place.right ? 1 : -1);
        const double vacuum = -state.psi(node) * kT;
        const double conduction = vacuum - end.affinity_energy, valence = conduction - end.bandgap;
        const double net = net_doping[index++];  // at the place itself, not a cell's end value
        const double values[] = {conduction,
                                 valence,
                                 0.5 * (conduction + valence) + 0.5 * kT * (end.log_Nv - end.log_Nc),
                                 -state.phi_n(node) * kT,
                                 -state.phi_p(node) * kT,
                                 (state.psi(node) - bottom) * kT,
                                 field_in_cell(system, place.cell, displacement[node]),
                                 s.n,
                                 s.p,
                                 s.p - s.n + net,
                                 q * (currents.electron[place.cell] + half * rate.value),
                                 q * (currents.hole[place.cell] - half * rate.value),
                                 rate.value};
        std::size_t next = 0;
        for (Variable& variable : profiles.variables)
            if (variable.over_bias) variable.values.push_back(values[next++]);
    }
}

}  // namespace bandwright
