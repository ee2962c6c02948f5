#include "core/device/structure.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>

#include "core/base/constants.hpp"
#include "core/base/text.hpp"
#include "core/models/mobility.hpp"

namespace bandwright {

std::vector<double> layer_boundaries(const Structure& structure) {
    std::vector<double> boundaries{0.0};
    for (const Layer& layer : structure.layers) boundaries.push_back(boundaries.back() + layer.thickness);
    return boundaries;
}

std::optional<DopantType> dopant_type(const Material& host, const std::string& dopant) {
    if (dopant == "donor") return DopantType::donor;
    if (dopant == "acceptor") return DopantType::acceptor;
    const auto found = host.dopants.find(dopant);
    if (found == host.dopants.end()) return std::nullopt;
    return found->second.type;
}

Doping doping_at(const Structure& structure, std::size_t layer, double x) {
    Doping doping;
    const Material& host = structure.materials[structure.layers[layer].material];
    for (const DopingEntry& entry : structure.doping) {
        if (entry.layer && *entry.layer != layer) continue;
        const double value = concentration(entry.shape, x);
        if (std::holds_alternative<LinearDoping>(entry.shape)) {
            (value > 0 ? doping.donors : doping.acceptors) += std::abs(value);
            continue;
        }
        if (value == 0) continue;
        const std::optional<DopantType> type = dopant_type(host, entry.dopant);
        if (!type) continue;
        if (*type == DopantType::acceptor) {
            doping.acceptors += value;
        } else {
            doping.donors += value;
            if (entry.dopant == "As") doping.arsenic += value;
        }
    }
    return doping;
}

MobilityModel mobility_model(const Structure& structure, const Material& material) {
    if (structure.models.mobility) return *structure.models.mobility;
    if (material.mobility_models.empty()) return MobilityModel::constant;
    return mobility_named(material.mobility_models.front()).value_or(MobilityModel::constant);
}

namespace {

/// The parameters that a kind of recombination needs.
std::vector<std::string> needs_of(const std::string& kind) {
    if (kind == "srh") return {"electron_lifetime", "hole_lifetime"};
    if (kind == "auger") return {"electron_auger", "hole_auger"};
    return {"radiative_coefficient"};
}

bool has_all(const Material& material, const std::vector<std::string>& keys) {
    return std::all_of(keys.begin(), keys.end(), [&](const std::string& key) { return material.has(key); });
}

}  // namespace

std::vector<std::string> recombination_in_force(const Structure& structure, const Material& material) {
    if (structure.models.recombination) return *structure.models.recombination;
    std::vector<std::string> kinds;
    for (const char* kind : {"srh", "auger", "radiative"})
        if (has_all(material, needs_of(kind))) kinds.push_back(kind);
    return kinds;
}

std::vector<Complaint> complaints(const Structure& structure) {
    std::vector<Complaint> list;
    const auto complain = [&](std::string where, std::string text) {
        const auto same = [&](const Complaint& other) { return other.text == text; };
        if (std::none_of(list.begin(), list.end(), same)) list.push_back({std::move(where), std::move(text)});
    };
    for (std::size_t k = 0; k < structure.layers.size(); ++k) {
        const Material& material = structure.materials[structure.layers[k].material];
        const std::string where = "/layers/" + std::to_string(k) + "/material";
        const auto need = [&](const std::string& key) {
            if (!material.has(key))
                complain(where,
                         fmt::format("{}: no value for {}, and this run needs one; give it under /materials",
                                     material.name, key));
        };
        for (const std::string& key : required_parameters()) {
            if (key == "bandgap" && material.has("bandgap_zero_kelvin")) continue;
            need(key);
        }
        if (structure.models.recombination)
            for (const std::string& kind : *structure.models.recombination)
                for (const std::string& key : needs_of(kind)) need(key);
        if (structure.models.mobility) {
            const std::string name(mobility_name(*structure.models.mobility));
            const auto& known = material.mobility_models;
            const bool both_own = material.is_own("electron_mobility") && material.is_own("hole_mobility");
            if (!both_own && std::find(known.begin(), known.end(), name) == known.end())
                complain("/models/mobility", fmt::format("\"{}\" has no mobility model \"{}\"; it has {}",
                                                         material.name, name, joined(known)));
        }
    }
    for (std::size_t k = 0; k < structure.doping.size(); ++k) {
        const DopingEntry& entry = structure.doping[k];
        if (std::holds_alternative<LinearDoping>(entry.shape)) continue;
        for (std::size_t layer = 0; layer < structure.layers.size(); ++layer) {
            if (entry.layer && *entry.layer != layer) continue;
            const Material& host = structure.materials[structure.layers[layer].material];
            if (dopant_type(host, entry.dopant)) continue;
            std::vector<std::string> known;
            for (const auto& [name, level] : host.dopants) known.push_back(name);
            known.insert(known.end(), {"donor", "acceptor"});
            complain("/doping/" + std::to_string(k) + "/dopant",
                     fmt::format("\"{}\" is not known as a donor or an acceptor in {}; known there: {}; or "
                                 "give its level under "
                                 "/materials as dopant_levels",
                                 entry.dopant, host.name, joined(known)));
        }
    }
    return list;
}

std::vector<std::string> remarks(const Structure& structure) {
    std::vector<std::string> list;
    if (metallurgical_junctions(structure).empty())
        list.push_back("the structure has no junction: the net doping never changes sign");
    const std::vector<double> boundaries = layer_boundaries(structure);
    const double thermal = constants::thermal_voltage(structure.temperature);
    const auto net_inside = [&](std::size_t layer, double x) { return doping_at(structure, layer, x).net(); };
    const std::size_t last = structure.layers.size() - 1;
    if (net_inside(0, boundaries[0] + 1e-9 * structure.layers[0].thickness) == 0)
        list.push_back(
            fmt::format("layer \"{}\" is undoped at the top contact; the contact is taken as intrinsic",
                        structure.layers[0].name));
    if (net_inside(last, boundaries.back() - 1e-9 * structure.layers[last].thickness) == 0)
        list.push_back(
            fmt::format("layer \"{}\" is undoped at the bottom contact; the contact is taken as intrinsic",
                        structure.layers[last].name));
    for (std::size_t layer = 0; layer < structure.layers.size(); ++layer) {
        const Material& material = structure.materials[structure.layers[layer].material];
        const double middle = 0.5 * (boundaries[layer] + boundaries[layer + 1]);
        const double density = std::abs(net_inside(layer, middle));
        if (density > 0) {
            const double debye =
                std::sqrt(material.value("relative_permittivity") * constants::vacuum_permittivity * thermal /
                          (constants::elementary_charge * density));
            if (structure.layers[layer].thickness < debye)
                list.push_back(fmt::format(
                    "layer \"{}\" ({:.4g} um) is thinner than its Debye length ({:.4g} um)",
                    structure.layers[layer].name, shown(structure.layers[layer].thickness, Unit::length),
                    shown(debye, Unit::length)));
        }
    }
    if (structure.temperature < 250 || structure.temperature > 500)
        for (const Material& material : structure.materials)
            if (!material.based_on.empty()) {
                list.push_back(fmt::format(
                    "{:.4g} K lies outside the 250 to 500 K in which the parameters of {} are meant to hold",
                    structure.temperature, material.based_on));
                break;
            }
    if (structure.temperature < 200)
        list.push_back("below 200 K dopants freeze out in part; this run takes all of them as ionized");
    return list;
}

}  // namespace bandwright
