#include <cmath>
#include <set>

#include "core/base/constants.hpp"
#include "core/device/structure.hpp"
#include "core/models/mobility.hpp"

namespace bandwright {

namespace {

void add_constants(Ledger& lines) {
    const auto add = [&](const char* name, double value, Unit unit, const char* source, Status status,
                         const char* note) {
        lines.push_back({name, "constants", {value, unit, source, status, note}});
    };
    add("elementary_charge (1e-19 C)", constants::elementary_charge * 1e19, Unit::one, "SI2019",
        Status::published, "exact");
    add("boltzmann_constant (1e-23 J K-1)", constants::boltzmann * 1e23, Unit::one, "SI2019",
        Status::published, "exact");
    add("vacuum_permittivity (1e-12 F m-1)", constants::vacuum_permittivity * 1e12, Unit::one, "CODATA2018",
        Status::from_memory, "");
}

void add_bands(const Structure& structure, const Material& material, Ledger& lines) {
    for (const char* key :
         {"relative_permittivity", "electron_affinity", "bandgap", "bandgap_zero_kelvin", "bandgap_slope",
          "bandgap_offset", "conduction_band_effective_density", "conduction_band_exponent",
          "valence_band_effective_density", "valence_band_exponent"})
        if (material.has(key)) lines.push_back({key, material.name, material.parameters.find(key)->second});
    const Bands bands = bands_at(material, structure.temperature);
    const auto derived = [&](const char* name, double value, Unit unit) {
        lines.push_back({name,
                         material.name,
                         {value, unit, "from the lines above, at this temperature", Status::computed, ""}});
    };
    derived("bandgap at this temperature", bands.bandgap, Unit::energy);
    derived("intrinsic_density at this temperature", std::exp(0.5 * bands.log_intrinsic_squared),
            Unit::density);
}

void add_recombination(const Structure& structure, const Material& material, Ledger& lines) {
    const auto add = [&](const char* key) {
        if (material.has(key)) lines.push_back({key, material.name, material.parameters.find(key)->second});
    };
    for (const std::string& kind : recombination_in_force(structure, material)) {
        if (kind == "srh") {
            add("electron_lifetime");
            add("hole_lifetime");
            if (material.has("trap_level"))
                add("trap_level");
            else
                lines.push_back({"trap_level",
                                 material.name,
                                 {0, Unit::energy, "at the intrinsic level, common practice, no source",
                                  Status::estimate, ""}});
        }
        if (kind == "auger") {
            add("electron_auger");
            add("hole_auger");
        }
        if (kind == "radiative") add("radiative_coefficient");
    }
}

void add_contact(const char* where, const Contact& contact, Ledger& lines) {
    const auto yours = [&](const char* name, double value, Unit unit) {
        lines.push_back({name, where, {value, unit, "structure file", Status::yours, ""}});
    };
    if (contact.electron_velocity) yours("electron_velocity", *contact.electron_velocity, Unit::velocity);
    if (contact.hole_velocity) yours("hole_velocity", *contact.hole_velocity, Unit::velocity);
    if (contact.series_resistance > 0)
        yours("series_resistance", contact.series_resistance, Unit::resistance_area);
}

}  // namespace

Ledger ledger(const Structure& structure) {
    Ledger lines;
    add_constants(lines);
    std::set<std::size_t> seen;
    for (const Layer& layer : structure.layers) {
        if (!seen.insert(layer.material).second) continue;
        const Material& material = structure.materials[layer.material];
        add_bands(structure, material, lines);
        const bool own_n = material.is_own("electron_mobility"), own_p = material.is_own("hole_mobility");
        for (const LedgerLine& line : mobility_ledger(mobility_model(structure, material), material)) {
            const bool of_electrons = line.parameter.find("electron") != std::string::npos ||
                                      line.parameter.find("phosphorus") != std::string::npos ||
                                      line.parameter.find("arsenic") != std::string::npos;
            if (of_electrons ? !own_n : !own_p) lines.push_back(line);
        }
        for (const char* key : {"electron_mobility", "hole_mobility"})
            if (material.is_own(key))
                lines.push_back({key, material.name, material.parameters.find(key)->second});
        add_recombination(structure, material, lines);
    }
    lines.insert(lines.end(), structure.process.begin(), structure.process.end());
    add_contact("top contact", structure.top, lines);
    add_contact("bottom contact", structure.bottom, lines);
    return lines;
}

}  // namespace bandwright
