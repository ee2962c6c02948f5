// SPDX-License-Identifier: MIT
#include "io/input/read_doping.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <utility>

#include "core/base/text.hpp"
#include "io/input/csv.hpp"
#include "io/input/doping_fields.hpp"
#include "io/input/message_text.hpp"
#include "io/input/quantity.hpp"
#include "io/input/read_anneal.hpp"
#include "io/input/read_fields.hpp"
#include "io/input/read_file.hpp"

namespace bandwright {

namespace {

std::string depth_text(double depth) { return number_text(shown(depth, Unit::length)) + " um"; }

/// Rules between the keys of a shape; `is_good` tells that every single value was good, so that nothing is
/// said twice.
template <class S>
void check_shape(const Cursor&, S&, DopingContext&, bool) {}

void check_shape(const Cursor& place, StepDoping& shape, DopingContext&, bool is_good) {
    const auto from = place.find("from"), to = place.find("to");
    if (is_good && from && to && shape.to <= shape.from)
        to->complain(fmt::format("must be greater than from, {} (found {})", from->found(), to->found()));
}

void check_shape(const Cursor& place, GaussianDoping&, DopingContext&, bool) {
    const bool has_peak = place.find("peak").has_value(), has_dose = place.find("dose").has_value();
    if (has_peak && has_dose) place.complain("a gaussian doping takes either peak or dose; both are given");
    if (!has_peak && !has_dose) place.complain("a gaussian doping needs either peak or dose");
}

constexpr std::array film_fields{
    Field<Film>{"material", &Film::material, Unit::one, any_number, Presence::required, "SiO2 or Si3N4"},
    Field<Film>{"thickness", &Film::thickness, Unit::length, above_zero, Presence::required, "the thickness"},
};

void check_shape(const Cursor& place, ImplantDoping& shape, DopingContext&, bool) {
    if (shape.range.has_value() != shape.straggle.has_value())
        place.complain("range and straggle go together: give both or neither");
    if (shape.kurtosis && !shape.skewness)
        place.complain("a kurtosis needs a skewness beside it (0 for a symmetric profile)");
    if (const auto anneal = place.find("anneal")) shape.anneal = read_anneal(*anneal);
    const auto through = place.find("through");
    if (!through || !through->expect_list("through", R"([ { "material": "SiO2", "thickness": "20 nm" } ])"))
        return;
    for (const Cursor& item : through->items()) {
        Film film;
        if (item.expect_object("a film")) {
            item.refuse_other_keys("a film", keys_of(film_fields));
            read_fields(item, film_fields, film);
        }
        shape.films.push_back(film);
    }
}

/// A unit of the wanted kind as text, for the columns of a measured profile.
std::optional<std::string> column_unit(const Cursor& place, std::string_view key, Unit unit) {
    const auto member = place.find(key);
    if (!member) {
        place.complain(fmt::format("needs the key \"{}\", the unit of that column, for example \"{}\"", key,
                                   info(unit).text));
        return std::nullopt;
    }
    const auto text = member->text("a unit");
    if (!text) return std::nullopt;
    try {
        parse_quantity("1 " + *text, unit);
        return text;
    } catch (const QuantityError&) {
        member->complain_found(
            fmt::format("needs a unit of {}, for example \"{}\"", info(unit).quantity, info(unit).text));
        return std::nullopt;
    }
}

void check_shape(const Cursor& place, MeasuredDoping& shape, DopingContext& context, bool is_good) {
    const auto depth_unit = column_unit(place, "depth_unit", Unit::length);
    const auto concentration_unit = column_unit(place, "concentration_unit", Unit::density);
    const auto file = place.find("file");
    if (!is_good || !file || !depth_unit || !concentration_unit) return;
    const auto bytes = read_file(context.folder / shape.file);
    if (!bytes) {
        file->complain(fmt::format("cannot read the file {}", in_quotes(shape.file)));
        context.file_is_unreadable = true;
        return;
    }
    const CsvColumns columns = read_two_columns(*bytes);
    for (const std::string& trouble : columns.trouble) file->complain(shape.file + ", " + trouble);
    if (!columns.trouble.empty()) return;
    if (columns.rows.size() < 2) {
        file->complain(fmt::format("{}: needs at least two lines of depth and concentration", shape.file));
        return;
    }
    for (const CsvRow& row : columns.rows) {
        try {
            const double depth = parse_quantity(row.first + " " + *depth_unit, Unit::length);
            const double value = parse_quantity(row.second + " " + *concentration_unit, Unit::density);
            if (!shape.depth.empty() && depth <= shape.depth.back()) {
                file->complain(
                    fmt::format("{}, line {}: the depth must be greater than the one before (found {})",
                                shape.file, row.line, row.first));
                return;
            }
            shape.depth.push_back(depth);
            shape.concentration.push_back(value <= shape.floor ? 0 : value);
        } catch (const QuantityError& error) {
            file->complain(fmt::format("{}, line {}: {}", shape.file, row.line, error.what()));
            return;
        }
    }
    if (shape.depth.front() > 0)
        context.warnings.push_back(fmt::format("measured profile \"{}\": zero above its first point at {}",
                                               shape.file, depth_text(shape.depth.front())));
    if (shape.depth.back() < context.total_thickness && shape.concentration.back() > 0)
        context.warnings.push_back(fmt::format("measured profile \"{}\": zero beyond its last point at {}",
                                               shape.file, depth_text(shape.depth.back())));
}

/// Kinds that can be written: all but the last, which an anneal makes.
constexpr auto written_kinds = std::make_index_sequence<std::variant_size_v<DopingShape> - 1>{};
static_assert(std::is_same_v<std::variant_alternative_t<std::variant_size_v<DopingShape> - 1, DopingShape>,
                             DiffusedDoping>);

template <std::size_t... index>
std::vector<std::string> names_of_kinds(std::index_sequence<index...>) {
    return {std::string(std::variant_alternative_t<index, DopingShape>::name)...};
}

/// Keys of a kind in the order in which messages list them.
template <class S>
std::vector<std::string> keys_of_kind() {
    std::vector<std::string> keys;
    if constexpr (!std::is_same_v<S, LinearDoping>) keys.emplace_back("dopant");
    constexpr auto fields = detail::fields_of(static_cast<const S*>(nullptr));
    for (const std::string& key : keys_of(fields)) keys.push_back(key);
    if constexpr (std::is_same_v<S, MeasuredDoping>)
        keys.insert(keys.begin() + 2, {"depth_unit", "concentration_unit"});
    if constexpr (std::is_same_v<S, ImplantDoping>) keys.insert(keys.end(), {"through", "anneal"});
    keys.emplace_back("layer");
    return keys;
}

template <class S>
S read_shape(const Cursor& place, DopingContext& context) {
    static constexpr auto fields = detail::fields_of(static_cast<const S*>(nullptr));
    const std::vector<std::string> shown = keys_of_kind<S>();
    std::vector<std::string> known = shown;
    known.emplace_back("kind");
    place.refuse_other_keys(
        fmt::format("{} {} doping",
                    std::string_view("aeiou").find(S::name[0]) == std::string_view::npos ? "a" : "an",
                    S::name),
        known, shown);
    S shape;
    const std::size_t before = place.complaint_count();
    read_fields(place, fields, shape);
    check_shape(place, shape, context, place.complaint_count() == before);
    return shape;
}

template <std::size_t... index>
std::optional<DopingShape> read_kind(const std::string& kind, const Cursor& place, DopingContext& context,
                                     std::index_sequence<index...>) {
    std::optional<DopingShape> shape;
    const auto try_one = [&]<class S>(const S*) {
        if (kind == S::name) shape = read_shape<S>(place, context);
    };
    (try_one(static_cast<const std::variant_alternative_t<index, DopingShape>*>(nullptr)), ...);
    return shape;
}

void read_layer_limit(const Cursor& place, const DopingContext& context, DopingEntry& entry) {
    const auto layer = place.find("layer");
    if (!layer) return;
    const auto name = layer->text("the name of a layer");
    if (!name) return;
    const auto& names = context.layer_names;
    const auto found = std::find(names.begin(), names.end(), *name);
    if (found == names.end())
        layer->complain(unknown_name("layer", *name, names, "Layers"));
    else
        entry.layer = static_cast<std::size_t>(found - names.begin());
}

}  // namespace

std::optional<DopingEntry> read_doping_entry(const Cursor& place, DopingContext& context) {
    if (!place.expect_object("a doping")) return std::nullopt;
    constexpr auto kinds = written_kinds;
    const std::vector<std::string> names = names_of_kinds(kinds);
    const auto kind_place = place.find("kind");
    if (!kind_place) {
        place.complain(fmt::format("needs the key \"kind\", one of {}", joined(names)));
        return std::nullopt;
    }
    const auto kind = kind_place->text("a kind of doping");
    if (!kind) return std::nullopt;
    auto shape = read_kind(*kind, place, context, kinds);
    if (!shape) {
        kind_place->complain(unknown_name("kind of doping", *kind, names));
        return std::nullopt;
    }
    DopingEntry entry;
    if (!std::holds_alternative<LinearDoping>(*shape)) {
        if (const auto dopant = place.find("dopant"))
            entry.dopant = dopant->text("an element symbol, donor or acceptor").value_or("");
        else
            place.complain("needs the key \"dopant\", an element symbol, donor or acceptor");
    }
    read_layer_limit(place, context, entry);
    entry.shape = std::move(*shape);
    return entry;
}

}  // namespace bandwright
