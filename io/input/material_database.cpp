// SPDX-License-Identifier: MIT
#include "io/input/material_database.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <map>
#include <optional>

#include "core/base/error.hpp"
#include "core/base/text.hpp"
#include "io/input/cursor.hpp"
#include "io/input/embedded_materials.hpp"
#include "io/input/material_keys.hpp"
#include "io/input/message_text.hpp"

namespace bandwright {

namespace {

constexpr std::string_view dopant_types[] = {"donor", "acceptor"};
constexpr Status stored_status[] = {Status::published, Status::from_memory, Status::computed,
                                    Status::estimate};
constexpr std::string_view stored_status_names[] = {text(Status::published), text(Status::from_memory),
                                                    text(Status::computed), text(Status::estimate)};

/// A material with the name that people may write in its place.
struct Entry {
    Material material;
    std::string long_name;
};

std::string text_or_empty(const Cursor& place, std::string_view key) {
    const auto member = place.find(key);
    return member ? member->text(key).value_or("") : "";
}

std::optional<Sourced> read_sourced(const Cursor& place, Unit unit, const Range& range) {
    if (!place.expect_object("a parameter")) return std::nullopt;
    place.refuse_other_keys("a parameter", {"value", "source", "status", "valid", "note"});
    const auto value = place.find("value"), source = place.find("source"), status = place.find("status");
    if (!value || !source || !status) {
        place.complain("needs value, source and status");
        return std::nullopt;
    }
    Sourced number;
    number.unit = unit;
    number.value = value->quantity(unit, range).value_or(0);
    number.source = source->text("a source").value_or("");
    if (const auto index = status->choice("status", stored_status_names))
        number.status = stored_status[*index];
    number.valid = text_or_empty(place, "valid");
    const std::string note = text_or_empty(place, "note");
    if (!note.empty()) number.valid += number.valid.empty() ? note : "; " + note;
    return number;
}

void read_dopant(const std::string& name, const Cursor& place, Material& material) {
    if (!place.expect_object("a dopant")) return;
    place.refuse_other_keys("a dopant", {"type", "energy"});
    DopantLevel level;
    if (const auto type = place.find("type")) {
        if (const auto index = type->choice("type of dopant", dopant_types))
            level.type = *index == 0 ? DopantType::donor : DopantType::acceptor;
    } else {
        place.complain("needs a type");
    }
    if (const auto energy = place.find("energy"))
        level.ionization_energy = read_sourced(*energy, Unit::energy, any_number);
    material.dopants[name] = level;
}

Entry read_entry(std::string_view text) {
    ParsedJson parsed = parse_json(text);
    std::vector<Complaint> complaints = parsed.complaints;
    Entry entry;
    if (parsed.value) {
        const Cursor whole(*parsed.value, "", complaints);
        whole.refuse_other_keys("a material",
                                {"name", "long_name", "parameters", "dopants", "mobility_models"});
        entry.material.name = entry.material.based_on = text_or_empty(whole, "name");
        entry.long_name = text_or_empty(whole, "long_name");
        if (const auto parameters = whole.find("parameters"))
            for (const auto& [key, place] : parameters->members()) {
                const auto known =
                    std::find_if(std::begin(material_keys), std::end(material_keys),
                                 [&key = key](const MaterialKey& entry) { return entry.key == key; });
                if (known == std::end(material_keys))
                    place.complain("is no parameter of a material");
                else if (const auto number = read_sourced(place, known->unit, known->range))
                    entry.material.parameters[key] = *number;
            }
        if (const auto dopants = whole.find("dopants"))
            for (const auto& [name, place] : dopants->members()) read_dopant(name, place, entry.material);
        if (const auto models = whole.find("mobility_models"))
            for (const Cursor& model : models->items())
                entry.material.mobility_models.push_back(model.text("a mobility model").value_or(""));
        if (entry.material.name.empty()) whole.complain("needs a name");
        if (entry.material.mobility_models.empty()) whole.complain("needs a list of mobility_models");
    }
    const std::string trouble = InputError("material " + entry.material.name, complaints).what();
    require(complaints.empty(), trouble);
    return entry;
}

const std::map<std::string, Entry, std::less<>>& database() {
    static const auto entries = [] {
        std::map<std::string, Entry, std::less<>> result;
        for (std::string_view text : detail::embedded_materials()) {
            Entry entry = read_entry(text);
            result.emplace(entry.material.name, std::move(entry));
        }
        return result;
    }();
    return entries;
}

}  // namespace

Material read_material_file(std::string_view text) { return read_entry(text).material; }

std::optional<Material> find_material(std::string_view name) {
    const auto place = database().find(name);
    if (place == database().end()) return std::nullopt;
    return place->second.material;
}

std::vector<std::string> material_names() {
    std::vector<std::string> names;
    for (const auto& [name, entry] : database()) names.push_back(name);
    return names;
}

std::string unknown_material_text(std::string_view found, const std::vector<std::string>& own_names) {
    std::vector<std::string> candidates = own_names;
    std::map<std::string, std::string> meant;
    for (const auto& [name, entry] : database()) {
        candidates.push_back(name);
        candidates.push_back(entry.long_name);
        meant[entry.long_name] = name;
    }
    std::string near = nearest_name(found, candidates);
    if (meant.contains(near)) near = meant[near];
    return fmt::format("there is no material {}; {} in: {}{}", in_quotes(found),
                       near.empty() ? "built" : fmt::format("did you mean \"{}\"? Built", near),
                       joined(material_names()),
                       own_names.empty() ? "" : ". Of your own: " + joined(own_names));
}

}  // namespace bandwright
