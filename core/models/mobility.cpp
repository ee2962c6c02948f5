#include "core/models/mobility.hpp"

#include <array>
#include <cmath>

namespace bandwright {

namespace {

constexpr double per_cm3 = 1e-6;   // m^-3 -> cm^-3
constexpr double from_cm2 = 1e-4;  // cm^2/Vs -> m^2/Vs

/// One column of Masetti's table I [cm^2/Vs, cm^-3].
struct MasettiSet {
    const char* species;
    double mu_0, mu_max, p_c, C_r, C_s, alpha, beta, mu_1;
};
constexpr MasettiSet arsenic{"arsenic", 52.2, 1417, 0, 9.68e16, 3.43e20, 0.680, 2.00, 43.4};
constexpr MasettiSet phosphorus{"phosphorus", 68.5, 1414, 0, 9.20e16, 3.41e20, 0.711, 1.98, 56.1};
constexpr MasettiSet boron{"boron", 44.9, 470.5, 9.23e16, 2.23e17, 6.10e20, 0.719, 2.00, 29.0};
constexpr double electron_exponent = 2.285, hole_exponent = 2.247;

double masetti(const MasettiSet& set, bool holes, double N, double temperature) {
    const double mu_max = set.mu_max * std::pow(300 / temperature, holes ? hole_exponent : electron_exponent);
    if (!(N > 0)) return mu_max;
    const double drop = set.mu_1 / (1 + std::pow(set.C_s / N, set.beta));
    const double share = 1 / (1 + std::pow(N / set.C_r, set.alpha));
    if (holes) return set.mu_0 * std::exp(-set.p_c / N) + mu_max * share - drop;
    return set.mu_0 + (mu_max - set.mu_0) * share - drop;
}

/// Arora's constants [cm^2/Vs, cm^-3].
struct AroraSet {
    double base, slope, power, reference;
};
constexpr AroraSet arora_electrons{88, 7.4e8, -2.33, 1.26e17}, arora_holes{54.3, 1.36e8, -2.23, 2.35e17};

}  // namespace

double ConstantMobility::operator()(Carrier carrier, const Material& material, const Doping&,
                                    double temperature) const {
    const bool electrons = carrier == Carrier::electron;
    const double value = material.value(electrons ? "electron_mobility" : "hole_mobility");
    const char* exponent = electrons ? "electron_mobility_exponent" : "hole_mobility_exponent";
    return material.has(exponent) ? value * std::pow(300 / temperature, material.value(exponent)) : value;
}

double AroraMobility::operator()(Carrier carrier, const Material&, const Doping& doping,
                                 double temperature) const {
    const AroraSet& set = carrier == Carrier::electron ? arora_electrons : arora_holes;
    const double t = temperature / 300, N = doping.total() * per_cm3;
    const double ratio = N / (set.reference * std::pow(t, 2.4));
    const double lattice = set.slope * std::pow(temperature, set.power);
    return from_cm2 *
           (set.base * std::pow(t, -0.57) + lattice / (1 + std::pow(ratio, 0.88 * std::pow(t, -0.146))));
}

double MasettiMobility::operator()(Carrier carrier, const Material&, const Doping& doping,
                                   double temperature) const {
    const double N = doping.total() * per_cm3;
    if (carrier == Carrier::hole) return from_cm2 * masetti(boron, true, N, temperature);
    const double share = doping.donors > 0 ? doping.arsenic / doping.donors : 0;
    double mu = (1 - share) * masetti(phosphorus, false, N, temperature);
    if (share > 0) mu += share * masetti(arsenic, false, N, temperature);
    return from_cm2 * mu;
}

Mobility mobility_of(MobilityModel model) {
    switch (model) {
        case MobilityModel::constant:
            return ConstantMobility{};
        case MobilityModel::arora:
            return AroraMobility{};
        case MobilityModel::masetti:
            return MasettiMobility{};
    }
    return ConstantMobility{};
}

std::string_view mobility_name(MobilityModel model) {
    return std::visit([](const auto& alternative) { return alternative.name; }, mobility_of(model));
}

std::optional<MobilityModel> mobility_named(std::string_view name) {
    for (const MobilityModel model : {MobilityModel::constant, MobilityModel::arora, MobilityModel::masetti})
        if (mobility_name(model) == name) return model;
    return std::nullopt;
}

double mobility(Carrier carrier, MobilityModel model, const Material& material, const Doping& doping,
                double temperature) {
    const char* key = carrier == Carrier::electron ? "electron_mobility" : "hole_mobility";
    if (material.is_own(key)) return material.value(key);
    return std::visit(
        [&](const auto& alternative) { return alternative(carrier, material, doping, temperature); },
        mobility_of(model));
}

Ledger mobility_ledger(MobilityModel model, const Material& material) {
    Ledger lines;
    const auto add = [&](const std::string& parameter, double shown_value, Unit unit,
                         const std::string& source, Status status, const std::string& valid) {
        lines.push_back(
            {parameter, material.name, {shown_value * per_shown_unit(unit), unit, source, status, valid}});
    };
    if (model == MobilityModel::masetti) {
        const std::string source = "Masetti1983, table I", valid = "300 K; 1e13 to 1e21 cm-3";
        for (const MasettiSet* set : {&phosphorus, &arsenic, &boron}) {
            const std::string prefix = std::string("masetti ") + set->species + " ";
            add(prefix + "mu_0", set->mu_0, Unit::mobility, source, Status::from_memory, valid);
            add(prefix + "mu_max", set->mu_max, Unit::mobility, source, Status::from_memory, valid);
            add(prefix + "C_r", set->C_r, Unit::density, source, Status::from_memory, valid);
            add(prefix + "alpha", set->alpha, Unit::one, source, Status::from_memory, valid);
            add(prefix + "mu_1", set->mu_1, Unit::mobility, source, Status::from_memory, valid);
            add(prefix + "C_s", set->C_s, Unit::density, source, Status::from_memory, valid);
            add(prefix + "beta", set->beta, Unit::one, source, Status::from_memory, valid);
            if (set->p_c > 0)
                add(prefix + "p_c", set->p_c, Unit::density, source, Status::from_memory, valid);
        }
        add("masetti electron temperature exponent", electron_exponent, Unit::one, "Klaassen1992",
            Status::from_memory, "");
        add("masetti hole temperature exponent", hole_exponent, Unit::one, "Klaassen1992",
            Status::from_memory, "");
    } else if (model == MobilityModel::arora) {
        const std::string source = "Arora1982", valid = "250 to 500 K; to 1e20 cm-3; 13 %";
        const std::array<std::pair<const char*, const AroraSet*>, 2> sets{
            {{"electron", &arora_electrons}, {"hole", &arora_holes}}};
        for (const auto& [carrier, set] : sets) {
            const std::string prefix = std::string("arora ") + carrier + " ";
            add(prefix + "base mobility", set->base, Unit::mobility, source, Status::from_memory, valid);
            add(prefix + "lattice mobility at 300 K", set->slope * std::pow(300.0, set->power),
                Unit::mobility, source, Status::from_memory, valid);
            add(prefix + "temperature power", set->power, Unit::one, source, Status::from_memory, valid);
            add(prefix + "reference density", set->reference, Unit::density, source, Status::from_memory,
                valid);
        }
    } else {
        for (const char* key :
             {"electron_mobility", "electron_mobility_exponent", "hole_mobility", "hole_mobility_exponent"})
            if (material.has(key))
                lines.push_back({key, material.name, material.parameters.find(key)->second});
    }
    return lines;
}

}  // namespace bandwright
