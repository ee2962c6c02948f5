// Structures built in memory for unit tests of the core, without the reader.
// Not for: verification against closed forms (set_a.hpp).
// SPDX-License-Identifier: MIT
#pragma once

#include <string>
#include <vector>

#include "core/device/structure.hpp"

namespace bandwright::plain {

/// A material with given gap [eV]; densities of states 2.8e19 and 2.5e19 cm^-3, mobilities 1000 and 450
/// cm2/Vs, lifetimes 1e-7 s, Auger and radiative coefficients of silicon's size. All numbers invented for
/// tests.
inline Material material(const std::string& name, double gap, double affinity = 4.05,
                         double permittivity = 11.7) {
    Material m;
    m.name = name;
    const auto put = [&](const char* key, double value, Unit unit) {
        m.parameters[key] = Sourced{value, unit, "test", Status::yours, ""};
    };
    put("relative_permittivity", permittivity, Unit::one);
    put("electron_affinity", affinity, Unit::energy);
    put("bandgap", gap, Unit::energy);
    put("conduction_band_effective_density", 2.8e25, Unit::density);
    put("valence_band_effective_density", 2.5e25, Unit::density);
    put("electron_mobility", 0.1, Unit::mobility);
    put("hole_mobility", 0.045, Unit::mobility);
    put("electron_lifetime", 1e-7, Unit::time);
    put("hole_lifetime", 3e-7, Unit::time);
    put("electron_auger", 2.8e-43, Unit::auger_coefficient);
    put("hole_auger", 9.9e-44, Unit::auger_coefficient);
    put("radiative_coefficient", 4.7e-21, Unit::radiative_coefficient);
    m.mobility_models = {"constant"};
    return m;
}

/// One layer of a uniform stack: thickness [m] and net doping [m^-3].
struct Part {
    double thickness, net;
    std::size_t material = 0;
};

/// A stack of uniform layers.
inline Structure stack(const std::vector<Part>& parts,
                       std::vector<Material> materials = {material("test", 1.12)},
                       Statistics statistics = Statistics::boltzmann) {
    Structure s;
    s.title = "test";
    s.materials = std::move(materials);
    s.models.statistics = statistics;
    for (std::size_t k = 0; k < parts.size(); ++k) {
        s.layers.push_back({"layer " + std::to_string(k), parts[k].material, parts[k].thickness});
        if (parts[k].net > 0) s.doping.push_back({"donor", UniformDoping{parts[k].net}, k});
        if (parts[k].net < 0) s.doping.push_back({"acceptor", UniformDoping{-parts[k].net}, k});
    }
    return s;
}

}  // namespace bandwright::plain
