#include "core/device/processing.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <numbers>
#include <set>

#include "core/process/diffusion.hpp"
#include "core/process/range_table.hpp"

namespace bandwright {

namespace {

constexpr double high_dose = 1e19;      // [m^-2] above it diffusion depends on concentration
constexpr double small_budget = 4e-16;  // [m^2] (20 nm)^2; below it transient diffusion dominates
constexpr std::string_view film_names = "SiO2, Si3N4";

bool is_silicon(const Material& material) { return material.name == "Si" || material.based_on == "Si"; }

bool is_all_silicon(const Structure& structure) {
    return std::all_of(structure.layers.begin(), structure.layers.end(),
                       [&](const Layer& layer) { return is_silicon(structure.materials[layer.material]); });
}

std::string shown_length(double value) { return fmt::format("{:.4g} um", shown(value, Unit::length)); }

/// What processing one structure needs at hand.
struct Process {
    Structure& structure;
    std::vector<Complaint> complaints;
    double thickness = 0;
    std::set<std::string> known_lines;

    void warn(std::string text) {
        auto& list = structure.warnings;
        if (std::find(list.begin(), list.end(), text) == list.end()) list.push_back(std::move(text));
    }
    void line(const std::string& parameter, const std::string& where, const Sourced& number) {
        if (known_lines.insert(parameter + "\n" + where).second)
            structure.process.push_back({parameter, where, number});
    }
};

std::optional<Moments> moments_of(Process& process, const std::string& place, const std::string& dopant,
                                  const ImplantDoping& implant) {
    const double along = std::cos(implant.tilt * std::numbers::pi / 180);
    Moments moments;
    moments.skewness = implant.skewness.value_or(0);
    moments.kurtosis = implant.kurtosis;
    const std::string where =
        "implant " + dopant + (implant.energy ? fmt::format(", {:.4g} keV", *implant.energy / 1e3) : "");
    if (implant.range && implant.straggle) {
        moments.range = *implant.range * along;
        moments.straggle = *implant.straggle * along;
        process.line("projected range", where,
                     {*implant.range, Unit::length, "structure file", Status::yours, ""});
        process.line("range straggle", where,
                     {*implant.straggle, Unit::length, "structure file", Status::yours, ""});
        return moments;
    }
    if (!implant.energy) {
        process.complaints.push_back(
            {place, "an implant needs its energy, or range and straggle of its own"});
        return std::nullopt;
    }
    const auto limits = energy_limits(dopant);
    if (!limits) {
        process.complaints.push_back(
            {place + "/dopant",
             fmt::format("there is no table of implant ranges for \"{}\" (B, BF2, P, As and Sb "
                         "have one); give range and straggle",
                         dopant)});
        return std::nullopt;
    }
    const auto range = projected_range(dopant, *implant.energy);
    if (!range) {
        process.complaints.push_back(
            {place + "/energy",
             fmt::format("the range table of {} reaches from {:.4g} to {:.4g} keV (found {:.6g} "
                         "keV); give range and straggle for other energies",
                         dopant, limits->lowest / 1e3, limits->highest / 1e3, *implant.energy / 1e3)});
        return std::nullopt;
    }
    moments.range = range->range * along;
    moments.straggle = range->straggle * along;
    const std::string valid = "amorphous silicon: no channelling";
    process.line("projected range", where, {range->range, Unit::length, range->source, range->status, valid});
    process.line("range straggle", where,
                 {range->straggle, Unit::length, range->source, range->status, valid});
    process.warn("implants: channelling is not modelled; a junction may lie deeper than shown");
    return moments;
}

double film_shift(Process& process, const std::string& place, const std::string& dopant,
                  const ImplantDoping& implant) {
    double shift = 0;
    for (std::size_t k = 0; k < implant.films.size(); ++k) {
        const Film& film = implant.films[k];
        const std::string here = fmt::format("{}/through/{}", place, k);
        if (!implant.energy) {
            process.complaints.push_back({here, "an implant through a film needs its energy"});
            return 0;
        }
        const auto factor = film_factor(dopant, film.material, *implant.energy);
        if (!factor) {
            process.complaints.push_back(
                {here + "/material", fmt::format("no stopping ratio is known for \"{}\" in \"{}\"; films: {}",
                                                 dopant, film.material, film_names)});
            return 0;
        }
        process.line(fmt::format("stopping of {} against silicon", film.material), "implant " + dopant,
                     *factor);
        shift += factor->value * film.thickness;
    }
    return shift;
}

void place_implant(Process& process, const std::string& place, DopingEntry& entry, ImplantDoping& implant) {
    for (const Layer& layer : process.structure.layers)
        if (!is_silicon(process.structure.materials[layer.material]) &&
            !(implant.range && implant.straggle)) {
            process.complaints.push_back({place,
                                          "ranges are known in silicon alone, and the stack has another "
                                          "material; give range and straggle"});
            return;
        }
    const auto moments = moments_of(process, place, entry.dopant, implant);
    if (!moments) return;
    std::vector<std::string> remarks;
    implant.shape = shape_from(*moments, remarks);
    for (const std::string& remark : remarks) process.warn(fmt::format("{}: {}", place, remark));
    implant.film_shift = film_shift(process, place, entry.dopant, implant);
    implant.retained_dose = implant.dose * share_below(implant.shape, implant.film_shift);
    if (moments->range - implant.film_shift > process.thickness)
        process.warn(fmt::format("{}: the range, {}, lies beyond the bottom of the stack", place,
                                 shown_length(moments->range)));
    if (implant.retained_dose < 0.5 * implant.dose)
        process.warn(fmt::format("{}: only {:.3g} % of the dose comes to rest below the films", place,
                                 100 * implant.retained_dose / implant.dose));
    if (entry.dopant == "BF2") entry.dopant = "B";
}

// Parts of a profile before an anneal, cut to where it reaches.
std::vector<StartingPiece> pieces_of(const DopingShape& shape, double from, double to) {
    if (const auto* uniform = std::get_if<UniformDoping>(&shape))
        return {ConstantPiece{uniform->concentration, from, to}};
    if (const auto* step = std::get_if<StepDoping>(&shape)) {
        const double top = std::max(from, step->from), bottom = std::min(to, step->to);
        if (bottom <= top) return {};
        return {ConstantPiece{step->concentration, top, bottom}};
    }
    if (const auto* gaussian = std::get_if<GaussianDoping>(&shape)) {
        if (gaussian->peak)
            return {GaussianPiece{*gaussian->peak, gaussian->depth, gaussian->straggle, from, to}};
        const double peak =
            gaussian->dose.value_or(0) / (std::sqrt(2 * std::numbers::pi) * gaussian->straggle);
        return {GaussianPiece{peak, gaussian->depth, gaussian->straggle, from, to},
                GaussianPiece{peak, -gaussian->depth, gaussian->straggle, from, to}};
    }
    if (const auto* implant = std::get_if<ImplantDoping>(&shape))
        return starting_pieces(implant->shape, implant->dose, implant->film_shift, from, to);
    AnyPiece piece;
    piece.profile = [shape](double x) { return concentration(shape, x); };
    piece.from = from;
    piece.to = to;
    piece.points = breakpoints(shape);
    for (const Scale& scale : scales(shape, to))
        for (const double steps : {-3.0, 0.0, 3.0})
            piece.points.push_back(scale.depth + steps * scale.length);
    return {piece};
}

void anneal_entry(Process& process, const std::string& place, DopingEntry& entry) {
    auto* implant = std::get_if<ImplantDoping>(&entry.shape);
    std::vector<AnnealStep> steps = implant ? implant->anneal : std::vector<AnnealStep>{};
    steps.insert(steps.end(), process.structure.anneal.begin(), process.structure.anneal.end());
    if (steps.empty()) return;
    const auto diffusivity = intrinsic_diffusivity(entry.dopant);
    if (!diffusivity || !is_all_silicon(process.structure)) {
        process.warn(fmt::format("{}: {} does not move in the anneal; no diffusivity is known for it{}",
                                 place, entry.dopant.empty() ? "net doping" : entry.dopant,
                                 is_all_silicon(process.structure) ? "" : " in this stack"));
        return;
    }
    process.line("diffusivity D0", entry.dopant,
                 {diffusivity->D0 * 1e4, Unit::one, diffusivity->source + " (cm2 s-1)", diffusivity->status,
                  "intrinsic silicon"});
    process.line(
        "diffusivity activation energy", entry.dopant,
        {diffusivity->Ea, Unit::energy, diffusivity->source, diffusivity->status, "intrinsic silicon"});
    process.warn(
        "anneals: transient and concentration-enhanced diffusion, oxidation and segregation are not "
        "modelled");
    const double budget = thermal_budget(steps, *diffusivity);
    if (implant && budget < small_budget)
        process.warn(
            fmt::format("{}: sqrt(D t) of {} is only {:.3g} nm; transient diffusion after an implant moves "
                        "it further than that",
                        place, entry.dopant, 1e9 * std::sqrt(budget)));
    if (implant && implant->dose > high_dose)
        process.warn(
            fmt::format("{}: the dose is above 1e15 cm-2; its diffusion will exceed the intrinsic one "
                        "used here",
                        place));
    const std::vector<double> boundaries = layer_boundaries(process.structure);
    const double from = entry.layer ? boundaries[*entry.layer] : 0,
                 to = entry.layer ? boundaries[*entry.layer + 1] : process.thickness;
    const std::vector<StartingPiece> pieces = pieces_of(entry.shape, from, to);
    std::vector<double> points = breakpoints(entry.shape);
    const double spread = std::sqrt(2 * budget);
    for (const Scale& scale : scales(entry.shape, process.thickness))
        for (const double steps_away : {-4.0, 0.0, 4.0})
            points.push_back(scale.depth + steps_away * std::hypot(scale.length, spread));
    for (const double end : {from, to})
        for (const double steps_away : {-4.0, 0.0, 4.0}) points.push_back(end + steps_away * spread);
    TabulatedProfile table = tabulated(
        [&](double x) { return diffused(pieces, x, budget, process.thickness); }, process.thickness, points);
    if (implant)
        implant->table = std::move(table);
    else
        entry.shape = DiffusedDoping{kind_of(entry.shape), std::move(table)};
    entry.layer.reset();
}

}  // namespace

std::vector<Complaint> process(Structure& structure) {
    Process process{structure, {}, layer_boundaries(structure).back(), {}};
    for (std::size_t k = 0; k < structure.doping.size(); ++k) {
        const std::string place = fmt::format("/doping/{}", k);
        DopingEntry& entry = structure.doping[k];
        if (auto* implant = std::get_if<ImplantDoping>(&entry.shape))
            place_implant(process, place, entry, *implant);
        if (process.complaints.empty()) anneal_entry(process, place, entry);
    }
    return process.complaints;
}

}  // namespace bandwright
