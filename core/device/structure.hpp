// Structure: what the user described, without mesh or unknowns, and its doping at a depth.
// Not for: reading it from a file (io) or discretizing it (core/discretization).
// SPDX-License-Identifier: MIT
#pragma once

#include <optional>
#include <string>
#include <vector>

#include "core/base/error.hpp"
#include "core/device/doping.hpp"
#include "core/device/material.hpp"

namespace bandwright {

/// One layer of the stack, top to bottom.
struct Layer {
    std::string name;
    /// Index into Structure::materials.
    std::size_t material = 0;
    /// [m], > 0.
    double thickness = 0;
};

/// Ohmic contact: neutral, in equilibrium, unless the minority carrier recombines at a finite surface
/// velocity [m/s].
struct Contact {
    std::optional<double> electron_velocity, hole_velocity;
    /// [ohm m^2], >= 0; lies inside the terminal voltage.
    double series_resistance = 0;
};

enum class Statistics { boltzmann, fermi_dirac };
enum class MobilityModel { constant, arora, masetti };

/// Model choices in force (defaults already filled in by the reader).
struct Models {
    Statistics statistics = Statistics::fermi_dirac;
    /// None: each material's default (Material::mobility_models.front()).
    std::optional<MobilityModel> mobility;
    /// None: every kind whose parameters the material has; a listed kind must have its parameters.
    std::optional<std::vector<std::string>> recombination;
};

/// What is asked of the mesh: a tolerance (relative error aimed at), or a fixed node count.
struct MeshRequest {
    double tolerance = 1e-4;
    std::optional<std::size_t> nodes;
};

/// A layered structure as described by the user, in memory units (SI; energies in eV).
struct Structure {
    std::string title;
    double temperature = 300;
    /// [m^2]; without it only densities are given.
    std::optional<double> area;
    std::vector<Material> materials;
    std::vector<Layer> layers;
    std::vector<DopingEntry> doping;
    /// Common anneals after all others; process() applies them.
    std::vector<AnnealStep> anneal;
    /// Ranges and diffusivities that process() used.
    Ledger process;
    Contact top, bottom;
    Models models;
    MeshRequest mesh;
    /// Remarks found while reading (points beyond a measured profile, a temperature outside a range, ...).
    std::vector<std::string> warnings;
};

/// Depth of the top of each layer and, last, of the bottom of the stack [m], size layers + 1. The sum of
/// thicknesses is rounded once per layer, the same way everywhere.
std::vector<double> layer_boundaries(const Structure& structure);

/// Donor and acceptor concentrations [m^-3].
struct Doping {
    double donors = 0, acceptors = 0;
    /// Part of `donors` that is arsenic (Masetti's mobility differs for it).
    double arsenic = 0;
    double net() const { return donors - acceptors; }
    double total() const { return donors + acceptors; }
};

/// Doping at a depth inside a layer [m^-3]; `layer` says which side a boundary depth belongs to.
Doping doping_at(const Structure& structure, std::size_t layer, double x);

/// Type of a dopant in a host, or none when the host does not know it. "donor" and "acceptor" name
/// themselves.
std::optional<DopantType> dopant_type(const Material& host, const std::string& dopant);

/// Mobility model in force in a material.
MobilityModel mobility_model(const Structure& structure, const Material& material);

/// Kinds of recombination in force in a material ("srh", "auger", "radiative").
std::vector<std::string> recombination_in_force(const Structure& structure, const Material& material);

/// A crossing of the net doping through zero.
struct Metallurgical {
    /// [m]
    double depth = 0;
    /// True when the material above is p-type.
    bool p_above = true;
    /// d(net doping)/dx [m^-4]; infinite for an abrupt step is given as none.
    std::optional<double> gradient;
};

/// Junctions from top to bottom: zeros of the net doping, by bracketing on the profile and bisection to 1e-12
/// relative. A stretch without net doping between a p and an n region counts as one junction at its middle.
std::vector<Metallurgical> metallurgical_junctions(const Structure& structure);

/// What makes a structure impossible to run although each value alone is allowed (a missing material
/// parameter, a model that a material lacks, a dopant unknown to its host). Empty = good. `where` is a JSON
/// Pointer.
std::vector<Complaint> complaints(const Structure& structure);

/// Remarks about a structure that is solved all the same (no junction, undoped contact layer, layer thinner
/// than its Debye length, temperature outside a model's range).
std::vector<std::string> remarks(const Structure& structure);

/// Every physical parameter that a run of this structure would use.
Ledger ledger(const Structure& structure);

}  // namespace bandwright
