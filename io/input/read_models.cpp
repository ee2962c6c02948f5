// SPDX-License-Identifier: MIT
#include "io/input/read_models.hpp"

#include <fmt/format.h>

#include <algorithm>

#include "io/input/message_text.hpp"
#include "io/input/not_available.hpp"
#include "io/input/read_fields.hpp"

namespace bandwright {

namespace {

constexpr std::string_view contact_kinds[] = {"ohmic"};
constexpr std::string_view statistics_names[] = {"boltzmann", "fermi-dirac"};
constexpr std::string_view mobility_names[] = {"constant", "arora", "masetti", "default"};
constexpr std::string_view recombination_names[] = {"srh", "auger", "radiative"};

constexpr std::array contact_fields{
    Field<Contact>{"electron_velocity", &Contact::electron_velocity, Unit::velocity, above_zero,
                   Presence::optional, "the surface recombination velocity of electrons"},
    Field<Contact>{"hole_velocity", &Contact::hole_velocity, Unit::velocity, above_zero, Presence::optional,
                   "the surface recombination velocity of holes"},
    Field<Contact>{"series_resistance", &Contact::series_resistance, Unit::resistance_area, zero_or_more,
                   Presence::optional, "the resistance between terminal and surface"},
};

constexpr Range tolerance_range{1e-9, 0.1, true, "1e-9 to 0.1"};
// The upper end only keeps a slip of the keyboard from asking for all memory.
constexpr Range nodes_range{11, 1e7, true, "11 to 10000000"};

constexpr std::array mesh_fields{
    Field<MeshRequest>{"tolerance", &MeshRequest::tolerance, Unit::one, tolerance_range, Presence::optional,
                       "the relative error aimed at in every figure"},
    Field<MeshRequest>{"nodes", WholeNumber<MeshRequest>{&MeshRequest::nodes}, Unit::one, nodes_range,
                       Presence::optional, "the number of nodes, in place of a tolerance"},
};

constexpr std::array model_fields{
    Field<Models>{"statistics",
                  Choice<Models>{"statistics", statistics_names,
                                 [](Models& models, std::size_t index) {
                                     models.statistics =
                                         index == 0 ? Statistics::boltzmann : Statistics::fermi_dirac;
                                 }},
                  Unit::one, any_number, Presence::optional, "how densities follow from energies"},
    Field<Models>{"mobility",
                  Choice<Models>{"mobility", mobility_names,
                                 [](Models& models, std::size_t index) {
                                     constexpr MobilityModel in_order[] = {MobilityModel::constant,
                                                                           MobilityModel::arora,
                                                                           MobilityModel::masetti};
                                     models.mobility.reset();
                                     if (index < std::size(in_order)) models.mobility = in_order[index];
                                 }},
                  Unit::one, any_number, Presence::optional, "the low-field mobility"},
};

/// A key of the file format with the only choices that exist in this version; none of them changes anything.
struct SettledModel {
    std::string_view key;
    std::array<std::string_view, 2> names;
    std::size_t count;
};

constexpr SettledModel settled_models[] = {
    {"velocity_saturation", {"off", "default"}, 2},
    {"lifetime", {"constant"}, 1},
    {"auger", {"constant"}, 1},
    {"bandgap_narrowing", {"off"}, 1},
    {"ionization", {"complete"}, 1},
    {"avalanche", {"off"}, 1},
    {"band_to_band", {"off"}, 1},
    {"trap_assisted", {"off"}, 1},
};

void read_recombination(const Cursor& place, Models& models) {
    if (!place.expect_list("recombination", "[\"srh\", \"auger\"]")) return;
    std::vector<std::string> kinds;
    for (const Cursor& item : place.items()) {
        const auto index = item.choice("recombination", recombination_names);
        if (!index) continue;
        const std::string kind(recombination_names[*index]);
        if (std::find(kinds.begin(), kinds.end(), kind) != kinds.end())
            item.complain(fmt::format("{} appears twice; keep one", in_quotes(kind)));
        else
            kinds.push_back(kind);
    }
    models.recombination = kinds;
}

void read_contact(const Cursor& place, Contact& contact) {
    if (!place.expect_object("a contact")) return;
    if (const auto kind = place.find("kind")) {
        if (kind->value().kind == JsonValue::Kind::string && kind->value().text == "schottky") {
            kind->complain(not_available_yet("schottky", "the kind of contact that exists is ohmic"));
            return;
        }
        kind->choice("kind of contact", contact_kinds);
    }
    const std::vector<std::string> shown = keys_of(contact_fields);
    std::vector<std::string> known = shown;
    known.emplace_back("kind");
    place.refuse_other_keys("an ohmic contact", known, shown);
    read_fields(place, contact_fields, contact);
}

}  // namespace

void read_contacts(const Cursor& place, Structure& structure) {
    if (!place.expect_object("contacts")) return;
    place.refuse_other_keys("contacts", {"top", "bottom"});
    if (const auto top = place.find("top")) read_contact(*top, structure.top);
    if (const auto bottom = place.find("bottom")) read_contact(*bottom, structure.bottom);
}

void read_models(const Cursor& place, Models& models) {
    if (!place.expect_object("models")) return;
    std::vector<std::string> known = keys_of(model_fields);
    known.emplace_back("recombination");
    for (const SettledModel& model : settled_models) known.emplace_back(model.key);
    place.refuse_other_keys("models", known);
    read_fields(place, model_fields, models);
    if (const auto recombination = place.find("recombination")) read_recombination(*recombination, models);
    for (const SettledModel& model : settled_models)
        if (const auto member = place.find(model.key))
            member->choice(fmt::format("{} model", model.key), std::span(model.names).first(model.count));
}

void read_mesh(const Cursor& place, MeshRequest& mesh) {
    if (!place.expect_object("mesh")) return;
    place.refuse_other_keys("mesh", keys_of(mesh_fields));
    read_fields(place, mesh_fields, mesh);
    if (place.find("tolerance") && place.find("nodes"))
        place.complain("takes either tolerance or nodes; both are given");
}

}  // namespace bandwright
