// SPDX-License-Identifier: MIT
#include "tests/support/random_structure.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cstdlib>

#include "tests/support/dice.hpp"

namespace bandwright {

namespace {

std::string number(double value) { return fmt::format("{:.3e}", value); }

std::string quantity(double value, const char* unit) { return fmt::format("\"{} {}\"", number(value), unit); }

double rounded(double value) { return std::strtod(number(value).c_str(), nullptr); }

std::string dopant(Dice& dice, bool donor) {
    static constexpr const char* donors[] = {"P", "As", "Sb", "donor"};
    static constexpr const char* acceptors[] = {"B", "acceptor"};
    return donor ? donors[dice.below(4)] : acceptors[dice.below(2)];
}

struct RandomLayer {
    bool other_material = false;
    double thickness = 0, top = 0, concentration = 0;
    bool donor = false;
};

std::string layer_doping(Dice& dice, const RandomLayer& layer, std::size_t index) {
    const std::string name = dopant(dice, layer.donor);
    if (dice.chance(0.8))
        return fmt::format(
            R"({{"kind": "uniform", "dopant": "{}", "concentration": {}, "layer": "layer {}"}})", name,
            quantity(layer.concentration, "cm-3"), index);
    const double from = layer.top + layer.thickness * dice.between(0, 0.4);
    const double to = layer.top + layer.thickness * dice.between(0.6, 1);
    return fmt::format(R"({{"kind": "step", "dopant": "{}", "concentration": {}, "from": {}, "to": {}}})",
                       name, quantity(layer.concentration, "cm-3"), quantity(from, "um"), quantity(to, "um"));
}

/// A shape from the top surface downwards: gaussian, erfc, exponential or step.
std::string shape_from_top(Dice& dice, bool donor, double concentration, double total) {
    const std::string name = dopant(dice, donor);
    const double length = dice.log_between(0.01, 0.15) * total;
    switch (dice.below(4)) {
        case 0:
            return fmt::format(
                R"({{"kind": "gaussian", "dopant": "{}", "peak": {}, "depth": {}, "straggle": {}}})", name,
                quantity(concentration, "cm-3"), quantity(length * dice.between(0, 1), "um"),
                quantity(length, "um"));
        case 1:
            return fmt::format(R"({{"kind": "erfc", "dopant": "{}", "surface": {}, "length": {}}})", name,
                               quantity(concentration, "cm-3"), quantity(length, "um"));
        case 2:
            return fmt::format(
                R"({{"kind": "exponential", "dopant": "{}", "surface": {}, "decay_length": {}}})", name,
                quantity(concentration, "cm-3"), quantity(length, "um"));
        default:
            return fmt::format(
                R"({{"kind": "step", "dopant": "{}", "concentration": {}, "from": "0 um", "to": {}}})", name,
                quantity(concentration, "cm-3"), quantity(length, "um"));
    }
}

/// A shape of any kind anywhere in the stack.
std::string shape_anywhere(Dice& dice, double total) {
    const bool donor = dice.chance(0.5);
    const double concentration = dice.log_between(1e14, 1e20);
    const double place = total * dice.unit();
    const double length = dice.log_between(0.01, 0.3) * total;
    const char* direction = dice.chance(0.5) ? "down" : "up";
    const std::string name = dopant(dice, donor);
    switch (dice.below(5)) {
        case 0:
            return fmt::format(
                R"({{"kind": "gaussian", "dopant": "{}", "peak": {}, "depth": {}, "straggle": {}}})", name,
                quantity(concentration, "cm-3"), quantity(place, "um"), quantity(length, "um"));
        case 1:
            return fmt::format(
                R"({{"kind": "erfc", "dopant": "{}", "surface": {}, "length": {}, "origin": {}, "direction": "{}"}})",
                name, quantity(concentration, "cm-3"), quantity(length, "um"), quantity(place, "um"),
                direction);
        case 2:
            return fmt::format(
                R"({{"kind": "exponential", "dopant": "{}", "surface": {}, "decay_length": {}, "origin": {}, "direction": "{}"}})",
                name, quantity(concentration, "cm-3"), quantity(length, "um"), quantity(place, "um"),
                direction);
        case 3: {
            const double gradient = (donor ? 1 : -1) * concentration / (total * 1e-4);
            return fmt::format(R"({{"kind": "linear", "gradient": {}, "zero_depth": {}}})",
                               quantity(gradient, "cm-4"), quantity(place, "um"));
        }
        default:
            return fmt::format(
                R"({{"kind": "step", "dopant": "{}", "concentration": {}, "from": {}, "to": {}}})", name,
                quantity(concentration, "cm-3"), quantity(0.9 * place, "um"),
                quantity(0.9 * place + 0.1 * total, "um"));
    }
}

std::string joined(const std::vector<std::string>& items) {
    std::string text;
    for (const auto& item : items) text += (text.empty() ? "\n    " : ",\n    ") + item;
    return text + "\n  ";
}

}  // namespace

std::string random_structure(unsigned seed) {
    Dice dice{(static_cast<std::uint64_t>(seed) + 1) * golden_step};
    const char* statistics = dice.chance(0.5) ? "fermi-dirac" : "boltzmann";
    const double temperature = dice.between(250, 450);
    const double electron_lifetime = dice.log_between(1e-8, 1e-4);
    const double hole_lifetime = dice.log_between(1e-8, 1e-4);
    const int layer_count = 1 + dice.below(4);
    const bool has_other = dice.chance(0.3);

    std::string materials =
        fmt::format(R"("house silicon": {{"based_on": "Si", "electron_lifetime": {}, "hole_lifetime": {}}})",
                    quantity(electron_lifetime, "s"), quantity(hole_lifetime, "s"));
    if (has_other) {
        const double bandgap = dice.between(0.9, 1.3);
        const double permittivity = dice.between(9, 14);
        materials += fmt::format(
            ",\n    "
            R"("other silicon": {{"based_on": "Si", "bandgap": {}, "relative_permittivity": {}}})",
            quantity(bandgap, "eV"), number(permittivity));
    }

    std::vector<RandomLayer> layers;
    double total = 0;
    for (int index = 0; index < layer_count; ++index) {
        RandomLayer layer;
        layer.other_material = has_other && dice.chance(0.5);
        layer.thickness = rounded(dice.log_between(0.2, 50));
        layer.top = total;
        layer.donor = dice.chance(0.5);
        layer.concentration = dice.log_between(1e14, 1e20);
        total += layer.thickness;
        layers.push_back(layer);
    }

    std::vector<std::string> layer_texts, doping;
    for (std::size_t index = 0; index < layers.size(); ++index) {
        layer_texts.push_back(fmt::format(R"({{"name": "layer {}", "material": "{}", "thickness": {}}})",
                                          index,
                                          layers[index].other_material ? "other silicon" : "house silicon",
                                          quantity(layers[index].thickness, "um")));
        doping.push_back(layer_doping(dice, layers[index], index));
    }
    if (dice.chance(0.85)) {
        const double concentration = std::min(1e20, layers.front().concentration * dice.log_between(3, 300));
        doping.push_back(shape_from_top(dice, !layers.front().donor, concentration, total));
    }
    const int more = dice.below(3);
    for (int index = 0; index < more; ++index) doping.push_back(shape_anywhere(dice, total));

    return fmt::format(R"({{
  "format": "bandwright-structure 1",
  "title": "drawn from seed {}",
  "temperature": {},
  "materials": {{
    {}
  }},
  "layers": [{}],
  "doping": [{}],
  "models": {{"statistics": "{}"}}
}}
)",
                       seed, quantity(temperature, "K"), materials, joined(layer_texts), joined(doping),
                       statistics);
}

std::vector<double> random_biases(unsigned seed) {
    constexpr std::uint64_t other_stream = 0x5851f42d4c957f2dULL;
    Dice dice{((static_cast<std::uint64_t>(seed) + 1) * golden_step) ^ other_stream};
    const double forward = dice.between(0, 0.6);
    const double small_reverse = dice.between(-3, 0);
    const double large_reverse = dice.between(-30, -3);
    return {rounded(forward), rounded(small_reverse), rounded(large_reverse)};
}

}  // namespace bandwright
