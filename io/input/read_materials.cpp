// SPDX-License-Identifier: MIT
#include "io/input/read_materials.hpp"

#include <fmt/format.h>

#include <algorithm>

#include "core/base/text.hpp"
#include "io/input/material_database.hpp"
#include "io/input/material_keys.hpp"
#include "io/input/message_text.hpp"
#include "io/input/not_available.hpp"

namespace bandwright {

namespace {

constexpr std::string_view own_source = "structure file";
constexpr std::string_view dopant_types[] = {"donor", "acceptor"};
/// Keys of the file format whose models do not exist yet.
constexpr std::string_view later_keys[] = {"electron_saturation_velocity", "hole_saturation_velocity",
                                           "electron_ionization", "hole_ionization"};

std::vector<std::string> user_keys() {
    std::vector<std::string> keys{"based_on"};
    for (const MaterialKey& entry : material_keys)
        if (entry.writer != Writer::material_file) keys.emplace_back(entry.key);
    keys.emplace_back("dopant_levels");
    return keys;
}

Sourced own_number(double value, Unit unit) {
    return {value, unit, std::string(own_source), Status::yours, ""};
}

void read_dopant_levels(const Cursor& place, Material& material) {
    if (!place.expect_object("dopant_levels")) return;
    for (const auto& [name, entry] : place.members()) {
        if (name == "donor" || name == "acceptor") {
            entry.complain(
                "donor and acceptor name a generic impurity that is always ionized; choose another name");
            continue;
        }
        if (!entry.expect_object("a dopant level")) continue;
        entry.refuse_other_keys("a dopant level", {"type", "energy"});
        DopantLevel level;
        const auto type = entry.find("type");
        if (!type) {
            entry.complain("needs the key \"type\", donor or acceptor");
            continue;
        }
        if (const auto index = type->choice("type of dopant", dopant_types))
            level.type = *index == 0 ? DopantType::donor : DopantType::acceptor;
        if (const auto energy = entry.find("energy"))
            if (const auto value = energy->quantity(Unit::energy, zero_or_more))
                level.ionization_energy = own_number(*value, Unit::energy);
        material.dopants[name] = level;
    }
}

/// Parameters that a whole material of the user's lacks, in the words of the structure file.
void complain_about_missing(const Cursor& place, const Material& material) {
    std::vector<std::string> missing;
    for (const std::string& key : required_parameters()) {
        const bool is_law = std::find(std::begin(bandgap_law_keys), std::end(bandgap_law_keys), key) !=
                            std::end(bandgap_law_keys);
        const std::string wanted = is_law ? "bandgap" : key;
        const bool listed = std::find(missing.begin(), missing.end(), wanted) != missing.end();
        if (place.find(wanted) || material.has(wanted) || listed) continue;
        missing.push_back(wanted);
    }
    if (!missing.empty())
        place.complain(
            fmt::format("a material without based_on gives all its values; missing: {}", joined(missing)));
}

Material read_own(const std::string& name, const Cursor& place) {
    Material material;
    material.mobility_models = {"constant"};
    if (!place.expect_object("a material")) return material;
    for (std::string_view key : later_keys)
        if (const auto later = place.find(key))
            later->complain(not_available_yet(key, "no model uses it; remove the key"));
    std::vector<std::string> known = user_keys();
    const std::vector<std::string> shown = known;
    known.insert(known.end(), std::begin(later_keys), std::end(later_keys));
    place.refuse_other_keys("a material", known, shown);

    const auto base = place.find("based_on");
    if (base) {
        if (const auto base_name = base->text("the name of a built-in material")) {
            if (const auto built_in = find_material(*base_name))
                material = *built_in;
            else
                base->complain(unknown_material_text(*base_name, {}));
        }
    }
    for (const MaterialKey& entry : material_keys) {
        if (entry.writer == Writer::material_file) continue;
        const auto member = place.find(entry.key);
        if (!member) continue;
        const auto value = member->quantity(entry.unit, entry.range);
        if (!value) continue;
        material.parameters.insert_or_assign(std::string(entry.key), own_number(*value, entry.unit));
        if (entry.key == "bandgap")
            for (std::string_view law : bandgap_law_keys) material.parameters.erase(std::string(law));
    }
    if (const auto levels = place.find("dopant_levels")) read_dopant_levels(*levels, material);
    material.name = name;
    if (!base) complain_about_missing(place, material);
    return material;
}

}  // namespace

std::map<std::string, Material, std::less<>> read_own_materials(const Cursor& place) {
    std::map<std::string, Material, std::less<>> result;
    if (!place.expect_object("materials")) return result;
    for (const auto& [name, entry] : place.members()) {
        if (find_material(name)) {
            entry.complain(
                fmt::format("{} is built in; give your own material a name of its own", in_quotes(name)));
            continue;
        }
        if (name.empty()) {
            entry.complain("needs a name that is not empty");
            continue;
        }
        result.emplace(name, read_own(name, entry));
    }
    return result;
}

}  // namespace bandwright
