// SPDX-License-Identifier: MIT
#include "io/input/read_structure.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <utility>

#include "core/device/processing.hpp"
#include "io/input/cursor.hpp"
#include "io/input/material_database.hpp"
#include "io/input/message_text.hpp"
#include "io/input/overrides.hpp"
#include "io/input/read_anneal.hpp"
#include "io/input/read_doping.hpp"
#include "io/input/read_fields.hpp"
#include "io/input/read_file.hpp"
#include "io/input/read_materials.hpp"
#include "io/input/read_models.hpp"

namespace bandwright {

namespace {

constexpr std::string_view format_name = "bandwright-structure 1";

constexpr std::array structure_fields{
    Field<Structure>{"title", &Structure::title, Unit::one, any_number, Presence::optional, "a title"},
    Field<Structure>{"temperature", &Structure::temperature, Unit::temperature, above_zero,
                     Presence::optional, "the temperature of the whole structure"},
    Field<Structure>{"area", &Structure::area, Unit::area, above_zero, Presence::optional,
                     "the area through which current flows"},
};

/// A layer as written; its material is still a name.
struct WrittenLayer {
    std::string name, material;
    double thickness = 0;
};

constexpr std::array layer_fields{
    Field<WrittenLayer>{"name", &WrittenLayer::name, Unit::one, any_number, Presence::required, "a name"},
    Field<WrittenLayer>{"material", &WrittenLayer::material, Unit::one, any_number, Presence::required,
                        "the name of a material"},
    Field<WrittenLayer>{"thickness", &WrittenLayer::thickness, Unit::length, above_zero, Presence::required,
                        "the thickness"},
};

using OwnMaterials = std::map<std::string, Material, std::less<>>;

/// Index of a material in the structure, which receives it when it is not there yet.
std::optional<std::size_t> material_index(const std::string& name, const OwnMaterials& own,
                                          Structure& structure) {
    for (std::size_t index = 0; index < structure.materials.size(); ++index)
        if (structure.materials[index].name == name) return index;
    const auto own_place = own.find(name);
    if (own_place != own.end())
        structure.materials.push_back(own_place->second);
    else if (auto built_in = find_material(name))
        structure.materials.push_back(std::move(*built_in));
    else
        return std::nullopt;
    return structure.materials.size() - 1;
}

void read_layer(const Cursor& place, const OwnMaterials& own, Structure& structure) {
    WrittenLayer written;
    if (place.expect_object("a layer")) {
        const std::vector<std::string> shown = keys_of(layer_fields);
        std::vector<std::string> known = shown;
        known.emplace_back("composition");
        place.refuse_other_keys("a layer", known, shown);
        read_fields(place, layer_fields, written);
    }
    Layer layer{written.name, 0, written.thickness};
    const auto material = place.find("material");
    if (material && !written.material.empty()) {
        if (const auto index = material_index(written.material, own, structure)) {
            layer.material = *index;
        } else {
            std::vector<std::string> own_names;
            for (const auto& [name, entry] : own) own_names.push_back(name);
            material->complain(unknown_material_text(written.material, own_names));
        }
        if (const auto composition = place.find("composition"))
            composition->complain(fmt::format("{} is not an alloy and has no composition; remove the key",
                                              in_quotes(written.material)));
    }
    for (std::size_t index = 0; index < structure.layers.size(); ++index)
        if (!layer.name.empty() && structure.layers[index].name == layer.name)
            place.find("name")->complain(fmt::format("the name {} is taken by /layers/{}; names are unique",
                                                     in_quotes(layer.name), index));
    structure.layers.push_back(layer);
}

void read_layers(const Cursor& whole, const OwnMaterials& own, Structure& structure) {
    const auto layers = whole.find("layers");
    if (!layers) {
        whole.complain("needs the key \"layers\", a list with at least one layer");
        return;
    }
    constexpr std::string_view example =
        R"([ { "name": "substrate", "material": "Si", "thickness": "20 um" } ])";
    if (!layers->expect_list("layers", example)) return;
    for (const Cursor& layer : layers->items()) read_layer(layer, own, structure);
    if (structure.layers.empty())
        layers->complain(fmt::format("needs at least one layer, for example {}", example));
}

void check_format(const Cursor& whole) {
    const auto format = whole.find("format");
    if (!format)
        whole.complain(fmt::format("needs the key \"format\", \"{}\"", format_name));
    else if (format->value().kind != JsonValue::Kind::string || format->value().text != format_name)
        format->complain_found(fmt::format("must be \"{}\"", format_name));
}

/// Reads the whole document; true when the only trouble is a file that cannot be read.
bool read_document(const Cursor& whole, const std::filesystem::path& folder, Structure& structure) {
    if (!whole.expect_object("a structure file")) return false;
    std::vector<std::string> shown{"format"};
    for (const std::string& key : keys_of(structure_fields)) shown.push_back(key);
    shown.insert(shown.end(), {"materials", "layers", "doping", "anneal", "contacts", "models", "mesh"});
    std::vector<std::string> known = shown;
    known.emplace_back("$schema");
    whole.refuse_other_keys("a structure file", known, shown);

    check_format(whole);
    read_fields(whole, structure_fields, structure);
    OwnMaterials own;
    if (const auto materials = whole.find("materials")) own = read_own_materials(*materials);
    read_layers(whole, own, structure);

    DopingContext context;
    context.folder = folder;
    for (const Layer& layer : structure.layers) {
        context.layer_names.push_back(layer.name);
        context.total_thickness += layer.thickness;
    }
    if (const auto doping = whole.find("doping")) {
        constexpr std::string_view example =
            R"([ { "kind": "uniform", "dopant": "P", "concentration": "1e15 cm-3" } ])";
        if (doping->expect_list("doping", example))
            for (const Cursor& entry : doping->items())
                if (auto read = read_doping_entry(entry, context))
                    structure.doping.push_back(std::move(*read));
    }
    if (const auto anneal = whole.find("anneal")) structure.anneal = read_anneal(*anneal);
    if (const auto contacts = whole.find("contacts")) read_contacts(*contacts, structure);
    if (const auto models = whole.find("models")) read_models(*models, structure.models);
    if (const auto mesh = whole.find("mesh")) read_mesh(*mesh, structure.mesh);
    structure.warnings = context.warnings;
    return context.file_is_unreadable;
}

}  // namespace

ReadResult read_structure(const std::filesystem::path& file, const std::vector<std::string>& overrides) {
    auto bytes = read_file(file);
    if (!bytes) throw FileError(fmt::format("{}: cannot be read", file.string()));
    return read_structure_text(std::move(*bytes), file.string(), file.parent_path(), overrides);
}

ReadResult read_structure_text(std::string bytes, const std::string& shown_name,
                               const std::filesystem::path& folder,
                               const std::vector<std::string>& overrides) {
    ParsedJson parsed = parse_json(bytes);
    std::vector<Complaint> found = std::move(parsed.complaints);
    if (!parsed.value) throw InputError(shown_name, found);
    for (const std::string& assignment : overrides) apply_override(*parsed.value, assignment, found);

    ReadResult result;
    result.structure.title = std::filesystem::path(shown_name).stem().string();
    const bool file_is_unreadable = read_document(Cursor(*parsed.value, "", found), folder, result.structure);
    if (file_is_unreadable && found.size() == 1) throw FileError(InputError(shown_name, found).what());
    if (found.empty()) found = process(result.structure);
    if (found.empty()) found = complaints(result.structure);
    if (!found.empty()) throw InputError(shown_name, found);
    result.used = json_text(*parsed.value);
    result.bytes = std::move(bytes);
    return result;
}

}  // namespace bandwright
