// SPDX-License-Identifier: MIT
#include "tests/support/torture_structure.hpp"

#include <fmt/format.h>

#include <cstdlib>

#include "tests/support/dice.hpp"

namespace bandwright {

namespace {

std::string number(double value) { return fmt::format("{:.3e}", value); }
double rounded(double value) { return std::strtod(number(value).c_str(), nullptr); }
std::string quantity(double value, const char* unit) { return fmt::format("\"{} {}\"", number(value), unit); }

std::string list_of(const std::vector<std::string>& items) {
    std::string text;
    for (const std::string& item : items) text += (text.empty() ? "\n    " : ",\n    ") + item;
    return text + "\n  ";
}

// An energy that lies in every gap [eV below the vacuum level], silicon's too. Gaps that do not overlap at
// all would call for densities of 1e90 cm-3 at their interface: the equations end there.
constexpr double common_level = 5;

std::string own_material(Dice& dice, const std::string& name) {
    const double gap = dice.log_between(0.3, 6);
    std::string text = fmt::format(
        R"("{}": {{"relative_permittivity": {}, "electron_affinity": {}, "bandgap": {}, )"
        R"("conduction_band_effective_density": {}, "valence_band_effective_density": {}, )"
        R"("electron_mobility": {}, "hole_mobility": {}, "electron_lifetime": {}, "hole_lifetime": {})",
        name, number(dice.log_between(3, 30)), quantity(common_level - gap * dice.between(0.2, 0.8), "eV"),
        quantity(gap, "eV"), quantity(dice.log_between(1e17, 1e21), "cm-3"),
        quantity(dice.log_between(1e17, 1e21), "cm-3"), quantity(dice.log_between(1, 1e4), "cm2 V-1 s-1"),
        quantity(dice.log_between(1, 1e4), "cm2 V-1 s-1"), quantity(dice.log_between(1e-9, 1e-3), "s"),
        quantity(dice.log_between(1e-9, 1e-3), "s"));
    if (dice.chance(0.5))
        text += fmt::format(R"(, "trap_level": {})", quantity(gap * dice.between(-0.4, 0.4), "eV"));
    if (dice.chance(0.5))
        text += fmt::format(R"(, "electron_auger": {}, "hole_auger": {})",
                            quantity(dice.log_between(1e-32, 1e-28), "cm6 s-1"),
                            quantity(dice.log_between(1e-32, 1e-28), "cm6 s-1"));
    if (dice.chance(0.5))
        text += fmt::format(R"(, "radiative_coefficient": {})",
                            quantity(dice.log_between(1e-15, 1e-9), "cm3 s-1"));
    return text + "}";
}

/// What a doping may refer to.
struct Stack {
    std::vector<double> thickness;
    double total = 0;
};

std::string measured_file(Dice& dice, double total) {
    std::string text = "depth_um,concentration_per_cm3\n";
    const int points = 2 + dice.below(12);
    double depth = total * dice.between(0, 0.2);
    double level = dice.log_between(1e12, 1e21);
    for (int k = 0; k < points; ++k) {
        text += fmt::format("{},{}\n", number(depth), dice.chance(0.1) ? "0" : number(level));
        depth = rounded(depth) + total * dice.log_between(0.002, 0.2);
        level = level * dice.log_between(0.05, 20);
        if (level > 1e21) level = 1e21;
        if (level < 1e12) level = 1e12;
    }
    return text;
}

std::string doping(Dice& dice, const Stack& stack, std::size_t index, TortureCase& made) {
    const char* dopant = dice.chance(0.5) ? "donor" : "acceptor";
    const std::string concentration = quantity(dice.log_between(1e12, 1e21), "cm-3");
    const double place = stack.total * dice.unit(), length = stack.total * dice.log_between(1e-3, 1);
    const char* direction = dice.chance(0.5) ? "down" : "up";
    const bool limited = dice.chance(0.3);
    const int layer = dice.below(static_cast<int>(stack.thickness.size()));
    const std::string limit = limited ? fmt::format(R"(, "layer": "layer {}")", layer) : "";
    const std::string head = fmt::format(R"("dopant": "{}")", dopant);
    switch (dice.below(7)) {
        case 0:
            return fmt::format(R"({{"kind": "uniform", {}, "concentration": {}{}}})", head, concentration,
                               limit);
        case 1:
            return fmt::format(R"({{"kind": "step", {}, "concentration": {}, "from": {}, "to": {}{}}})", head,
                               concentration, quantity(place, "um"), quantity(place + length, "um"), limit);
        case 2:
            return fmt::format(R"({{"kind": "gaussian", {}, "peak": {}, "depth": {}, "straggle": {}{}}})",
                               head, concentration, quantity(place, "um"), quantity(length, "um"), limit);
        case 3:
            return fmt::format(
                R"({{"kind": "erfc", {}, "surface": {}, "length": {}, "origin": {}, "direction": "{}"{}}})",
                head, concentration, quantity(length, "um"), quantity(place, "um"), direction, limit);
        case 4:
            return fmt::format(
                R"({{"kind": "exponential", {}, "surface": {}, "decay_length": {}, "origin": {}, "direction": "{}"{}}})",
                head, concentration, quantity(length, "um"), quantity(place, "um"), direction, limit);
        case 5:
            return fmt::format(
                R"({{"kind": "linear", "gradient": {}, "zero_depth": {}{}}})",
                quantity((dice.chance(0.5) ? 1 : -1) * dice.log_between(1e12, 1e21) / (stack.total * 1e-4),
                         "cm-4"),
                quantity(place, "um"), limit);
        default:
            if (!made.measured.empty())
                return fmt::format(R"({{"kind": "uniform", {}, "concentration": {}{}}})", head, concentration,
                                   limit);
            made.measured_name = fmt::format("measured-{}.csv", index);
            made.measured = measured_file(dice, stack.total);
            return fmt::format(
                R"({{"kind": "measured", {}, "file": "{}", "depth_unit": "um", "concentration_unit": "cm-3"{}}})",
                head, made.measured_name, limit);
    }
}

std::string contact(Dice& dice) {
    std::string text = R"({"kind": "ohmic")";
    if (dice.chance(0.2))
        text += fmt::format(R"(, "electron_velocity": {}, "hole_velocity": {})",
                            quantity(dice.log_between(1, 1e7), "cm s-1"),
                            quantity(dice.log_between(1, 1e7), "cm s-1"));
    if (dice.chance(0.2))
        text +=
            fmt::format(R"(, "series_resistance": {})", quantity(dice.log_between(1e-7, 1e-1), "ohm cm2"));
    return text + "}";
}

}  // namespace

TortureCase torture_case(unsigned seed) {
    constexpr std::uint64_t stream = 0x2545f4914f6cdd1dULL;
    Dice dice{((static_cast<std::uint64_t>(seed) + 1) * golden_step) ^ stream};
    TortureCase made;
    const double temperature = dice.log_between(77, 500);
    const char* statistics = dice.chance(0.5) ? "fermi-dirac" : "boltzmann";

    std::vector<std::string> names, materials, layers, dopings;
    const int material_count = 1 + dice.below(3);
    for (int k = 0; k < material_count; ++k) {
        if (k == 0 && dice.chance(1.0 / 3)) {
            names.emplace_back("Si");
            continue;
        }
        names.push_back(fmt::format("own {}", k));
        materials.push_back(own_material(dice, names.back()));
    }
    Stack stack;
    const int layer_count = 1 + dice.below(6);
    for (int k = 0; k < layer_count; ++k) {
        stack.thickness.push_back(rounded(dice.log_between(0.005, 500)));
        stack.total += stack.thickness.back();
        layers.push_back(fmt::format(R"({{"name": "layer {}", "material": "{}", "thickness": {}}})", k,
                                     names[static_cast<std::size_t>(dice.below(material_count))],
                                     quantity(stack.thickness.back(), "um")));
    }
    const int doping_count = 1 + dice.below(6);
    for (int k = 0; k < doping_count; ++k)
        dopings.push_back(doping(dice, stack, static_cast<std::size_t>(k), made));
    const std::string top = contact(dice), bottom = contact(dice);
    made.biases = {rounded(dice.log_between(1e-3, 50)), -rounded(dice.log_between(1e-3, 50))};
    made.structure = fmt::format(R"({{
  "format": "bandwright-structure 1",
  "title": "torture {}",
  "temperature": {},
  "materials": {{{}}},
  "layers": [{}],
  "doping": [{}],
  "contacts": {{"top": {}, "bottom": {}}},
  "models": {{"statistics": "{}"}},
  "mesh": {{"tolerance": 1e-3}}
}}
)",
                                 seed, quantity(temperature, "K"), list_of(materials), list_of(layers),
                                 list_of(dopings), top, bottom, statistics);
    return made;
}

}  // namespace bandwright
