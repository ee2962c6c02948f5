// `inspect`: what the file describes: layers, dopants, junctions, sheet resistances, models in force.
// SPDX-License-Identifier: MIT
#include <fmt/format.h>

#include <CLI/CLI.hpp>
#include <algorithm>
#include <cmath>

#include "apps/console.hpp"
#include "apps/run.hpp"
#include "core/base/text.hpp"
#include "core/figures/sheet_resistance.hpp"
#include "core/models/mobility.hpp"
#include "core/process/quadrature.hpp"
#include "io/results/summary.hpp"

namespace bandwright {

namespace {

// Dose of one entry over the part of the stack that it reaches [m^-2], and its largest concentration there.
struct EntryFigures {
    double dose, peak;
};
EntryFigures figures_of(const Structure& structure, const DopingEntry& entry) {
    const std::vector<double> boundaries = layer_boundaries(structure);
    const double from = entry.layer ? boundaries[*entry.layer] : 0,
                 to = entry.layer ? boundaries[*entry.layer + 1] : boundaries.back();
    std::vector<double> cuts = breakpoints(entry.shape);
    for (const Scale& scale : scales(entry.shape, boundaries.back()))
        for (int k = -16; k <= 16; ++k) cuts.push_back(scale.depth + 0.5 * k * scale.length);
    const auto profile = [&](double x) { return concentration(entry.shape, x); };
    double peak = std::max(profile(from), profile(std::nextafter(to, from)));
    for (const double x : cuts)
        if (x >= from && x < to) peak = std::max(peak, profile(x));
    return {integral(profile, from, to, cuts), peak};
}

void print_layers(const Structure& structure) {
    const std::vector<double> boundaries = layer_boundaries(structure);
    TextTable table{{"layer", "material", "from", "to", "net doping, top", "middle", "bottom"},
                    {"", "", "um", "um", "cm-3", "cm-3", "cm-3"},
                    {true, true},
                    {}};
    for (std::size_t k = 0; k < structure.layers.size(); ++k) {
        const double thickness = structure.layers[k].thickness;
        const auto net = [&](double share) {
            const double x = boundaries[k] + thickness * share;
            const double value = doping_at(structure, k, x).net();
            return value == 0 ? std::string("0")
                              : fmt::format("{}{:.4g}", value > 0 ? "n " : "p ",
                                            shown(std::abs(value), Unit::density));
        };
        table.rows.push_back({structure.layers[k].name,
                              structure.materials[structure.layers[k].material].name,
                              fmt::format("{:.6g}", shown(boundaries[k], Unit::length)),
                              fmt::format("{:.6g}", shown(boundaries[k + 1], Unit::length)), net(1e-9),
                              net(0.5), net(1 - 1e-9)});
    }
    fmt::print("Layers, top to bottom\n{}\n", table.text());
}

void print_doping(const Structure& structure) {
    if (structure.doping.empty()) return;
    TextTable table{{"#", "dopant", "kind", "layer", "dose in the stack", "largest"},
                    {"", "", "", "", "cm-2", "cm-3"},
                    {false, true, true, true},
                    {}};
    for (std::size_t k = 0; k < structure.doping.size(); ++k) {
        const DopingEntry& entry = structure.doping[k];
        const bool linear = std::holds_alternative<LinearDoping>(entry.shape);
        const EntryFigures figures = figures_of(structure, entry);
        table.rows.push_back({std::to_string(k), linear ? "net" : entry.dopant, kind_of(entry.shape),
                              entry.layer ? structure.layers[*entry.layer].name : "all",
                              linear ? "-" : fmt::format("{:.6g}", shown(figures.dose, Unit::areal_density)),
                              linear ? "-" : fmt::format("{:.4g}", shown(figures.peak, Unit::density))});
    }
    fmt::print("Doping, after all anneals\n{}", table.text());
    for (std::size_t k = 0; k < structure.doping.size(); ++k)
        if (const auto* implant = std::get_if<ImplantDoping>(&structure.doping[k].shape))
            fmt::print("  {}: {:.5g} cm-2 implanted, {:.5g} cm-2 came to rest below the films\n", k,
                       shown(implant->dose, Unit::areal_density),
                       shown(implant->retained_dose, Unit::areal_density));
    fmt::print("\n");
}

void print_junctions(const Results& results) {
    if (results.junctions.empty())
        fmt::print("No junction: the net doping never changes sign.\n\n");
    else {
        TextTable table{{"depth", "type", "doping gradient", "forward when"},
                        {"um", "", "cm-4", ""},
                        {false, true, false, true},
                        {}};
        for (const JunctionLine& junction : results.junctions)
            table.rows.push_back(
                {fmt::format("{:.9g}", shown(junction.depth, Unit::length)),
                 junction.p_above ? "p above n" : "n above p",
                 std::isnan(junction.gradient)
                     ? "abrupt"
                     : fmt::format("{:.5g}", shown(junction.gradient, Unit::density_gradient)),
                 junction.p_above ? "V_top > V_bottom" : "V_top < V_bottom"});
        fmt::print("Junctions\n{}\n", table.text());
    }
    TextTable table{{"from", "to", "type", "sheet resistance", "net dose", "largest", "at",
                     "Debye length there", "emptied by"},
                    {"um", "um", "", "ohm per square", "cm-2", "cm-3", "um", "nm", "V"},
                    {false, false, true},
                    {}};
    const auto number = [](double value, const char* format = "{:.6g}") {
        return std::isnan(value) ? std::string("-") : fmt::format(fmt::runtime(format), value);
    };
    for (const SheetLine& sheet : results.sheet_resistances)
        table.rows.push_back(
            {fmt::format("{:.6g}", shown(sheet.from, Unit::length)),
             fmt::format("{:.6g}", shown(sheet.to, Unit::length)), sheet.type, number(sheet.value),
             number(shown(sheet.dose, Unit::areal_density)), number(shown(sheet.peak, Unit::density)),
             number(shown(sheet.peak_depth, Unit::length)), number(1e9 * sheet.debye_length, "{:.4g}"),
             number(sheet.depleting_potential, "{:.5g}")});
    fmt::print(
        "Regions between junctions (sheet resistance at flat band; \"emptied by\" is the total junction "
        "potential)\n{}\n",
        table.text());
}

void print_models(const Structure& structure) {
    fmt::print("Models in force\n");
    fmt::print(
        "  statistics: {}; ionization: complete; bandgap narrowing: off; velocity saturation: off; "
        "avalanche, tunnelling: off\n",
        structure.models.statistics == Statistics::boltzmann ? "boltzmann" : "fermi-dirac");
    std::vector<std::size_t> seen;
    for (const Layer& layer : structure.layers) {
        if (std::find(seen.begin(), seen.end(), layer.material) != seen.end()) continue;
        seen.push_back(layer.material);
        const Material& material = structure.materials[layer.material];
        const std::vector<std::string> kinds = recombination_in_force(structure, material);
        const auto own = [&](const char* key) { return material.is_own(key) ? " (yours)" : ""; };
        fmt::print("  {}: mobility {}, electrons{}, holes{}; recombination {}\n", material.name,
                   mobility_name(mobility_model(structure, material)), own("electron_mobility"),
                   own("hole_mobility"), kinds.empty() ? "off" : joined(kinds));
    }
    const auto contact = [](const char* where, const Contact& c) {
        std::string text = fmt::format("  {} contact: ohmic", where);
        if (c.electron_velocity)
            text += fmt::format(", electrons {:.4g} cm s-1", shown(*c.electron_velocity, Unit::velocity));
        if (c.hole_velocity)
            text += fmt::format(", holes {:.4g} cm s-1", shown(*c.hole_velocity, Unit::velocity));
        if (c.series_resistance > 0)
            text +=
                fmt::format(", {:.4g} ohm cm2 in series", shown(c.series_resistance, Unit::resistance_area));
        fmt::print("{}\n", text);
    };
    contact("top", structure.top);
    contact("bottom", structure.bottom);
    if (structure.mesh.nodes)
        fmt::print("  mesh: about {} nodes\n", *structure.mesh.nodes);
    else
        fmt::print("  mesh: relative error aimed at {:.2g}\n", structure.mesh.tolerance);
}

}  // namespace

Command inspect_command() {
    return {"inspect", "check the file; layers, doses, junctions, sheet resistances, models", [](CLI::App&) {
                return [](const CommonOptions& options) {
                    const ReadResult input = read_structure(options.file, options.overrides);
                    Results results = results_of_input("inspect", options, input);
                    results.status = "complete";
                    for (const Metallurgical& junction : metallurgical_junctions(input.structure))
                        results.junctions.push_back(
                            {junction.depth, junction.p_above, junction.gradient.value_or(no_value)});
                    results.sheet_resistances = sheet_resistances(input.structure);
                    results.warnings = input.structure.warnings;
                    for (const std::string& remark : remarks(input.structure))
                        results.warnings.push_back(remark);
                    for (const std::string& caution : cautions(input.structure, 0))
                        results.warnings.push_back(caution);
                    for (const std::string& warning : results.warnings) warn(warning);
                    if (options.json) {
                        fmt::print("{}\n", summary_json(results));
                    } else if (!options.quiet) {
                        fmt::print("{}\n{} K\n\n", results.title, results.temperature);
                        print_layers(input.structure);
                        print_doping(input.structure);
                        print_junctions(results);
                        print_models(input.structure);
                    }
                    return Exit::done;
                };
            }};
}

}  // namespace bandwright
