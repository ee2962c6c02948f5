// SPDX-License-Identifier: MIT
#include "tests/support/set_a.hpp"

#include <fmt/format.h>

#include <cmath>
#include <stdexcept>

#include "io/input/read_structure.hpp"

namespace bandwright::set_a {

namespace {

constexpr const char* material_a = R"(
      "relative_permittivity": 11.7, "electron_affinity": "4.05 eV", "bandgap": "1.0714757279819708 eV",
      "conduction_band_effective_density": "1e19 cm-3", "valence_band_effective_density": "1e19 cm-3",
      "electron_mobility": "1000 cm2 V-1 s-1", "hole_mobility": "450 cm2 V-1 s-1")";

std::string document(const std::string& layers, const std::string& doping, const Options& options) {
    std::string material = options.material.empty() ? material_a : options.material;
    if (!options.lifetime.empty())
        material +=
            fmt::format(R"(, "electron_lifetime": "{0}", "hole_lifetime": "{0}", "trap_level": "0 eV")",
                        options.lifetime);
    const std::string contacts =
        options.contacts.empty() ? "" : fmt::format(R"("contacts": {},)", options.contacts);
    return fmt::format(R"({{
  "format": "bandwright-structure 1", "temperature": "300 K",
  "materials": {{ "A": {{ {} }} }},
  "layers": [ {} ],
  "doping": [ {} ],
  {}
  "models": {{ "statistics": "{}", "mobility": "constant", "recombination": [{}] }},
  "mesh": {{ "tolerance": {} }}
}})",
                       material, layers, doping, contacts, options.statistics,
                       options.lifetime.empty() ? "" : R"("srh")", options.tolerance);
}

const Column& column_of(const BiasOutcome& outcome, const std::string& name) {
    const Column* column = outcome.points.find(name);
    if (!column) throw std::runtime_error("no column " + name);
    return *column;
}

}  // namespace

double debye_length(double doping) {
    return std::sqrt(permittivity * thermal_voltage / (constants::elementary_charge * doping));
}

std::string uniform_stack(const std::vector<UniformLayer>& layers, const Options& options) {
    std::string layer_text, doping_text;
    for (std::size_t k = 0; k < layers.size(); ++k) {
        layer_text += fmt::format(R"({}{{"name": "layer {}", "material": "A", "thickness": "{} um"}})",
                                  k ? ", " : "", k, layers[k].thickness_um);
        if (layers[k].net_doping == 0) continue;
        doping_text += fmt::format(
            R"({}{{"kind": "uniform", "dopant": "{}", "concentration": "{} cm-3", "layer": "layer {}"}})",
            doping_text.empty() ? "" : ", ", layers[k].net_doping > 0 ? "donor" : "acceptor",
            std::abs(layers[k].net_doping), k);
    }
    return document(layer_text, doping_text, options);
}

std::string one_layer(double thickness_um, const std::vector<std::string>& doping, const Options& options) {
    std::string text;
    for (const std::string& entry : doping) text += (text.empty() ? "" : ", ") + entry;
    return document(fmt::format(R"({{"name": "bulk", "material": "A", "thickness": "{} um"}})", thickness_um),
                    text, options);
}

BiasOutcome solve(const std::string& structure_text, const std::vector<double>& biases) {
    const ReadResult read = read_structure_text(structure_text, "test.json", {});
    BiasRequest request;
    request.biases = biases;
    BiasOutcome outcome = run_bias_points(read.structure, request);
    if (outcome.end != EndReason::complete || outcome.points.rows() != biases.size())
        throw std::runtime_error("not solved: " + outcome.message);
    return outcome;
}

double point(const BiasOutcome& outcome, const std::string& column, std::size_t index) {
    return column_of(outcome, column).values.at(index);
}

double point_error(const BiasOutcome& outcome, const std::string& column, std::size_t index) {
    return column_of(outcome, column).errors.at(index);
}

double figure(const BiasOutcome& outcome, const std::string& name) {
    for (const Figure& entry : outcome.figures)
        if (entry.name == name) return entry.value;
    throw std::runtime_error("no figure " + name);
}

double Curve::at(double x) const {
    std::size_t best = 0;
    for (std::size_t k = 1; k < depth.size(); ++k)
        if (std::abs(depth[k] - x) <= std::abs(depth[best] - x) + 1e-12 * x) best = k;
    return value.at(best);
}

Curve curve(const BiasOutcome& outcome, const std::string& variable, std::size_t index) {
    Curve result;
    for (double depth : outcome.profiles.depth_um) result.depth.push_back(depth * um);
    for (const Variable& entry : outcome.profiles.variables) {
        if (entry.name != variable) continue;
        const auto begin = entry.values.begin() + static_cast<std::ptrdiff_t>(index * result.depth.size());
        result.value.assign(begin, begin + static_cast<std::ptrdiff_t>(result.depth.size()));
        return result;
    }
    throw std::runtime_error("no variable " + variable);
}

}  // namespace bandwright::set_a
