#include "io/results/summary.hpp"

#include <cmath>
#include <nlohmann/json.hpp>

namespace bandwright {

namespace {

using Json = nlohmann::ordered_json;

Json number(double value) { return std::isfinite(value) ? Json(value) : Json(nullptr); }
Json in_unit(double value, Unit unit) { return number(shown(value, unit)); }

Json ledger_array(const Ledger& ledger) {
    Json lines = Json::array();
    for (const LedgerLine& line : ledger)
        lines.push_back({{"parameter", line.parameter},
                         {"where", line.where},
                         {"value", in_unit(line.number.value, line.number.unit)},
                         {"unit", info(line.number.unit).text},
                         {"source", line.number.source},
                         {"status", text(line.number.status)},
                         {"valid", line.number.valid}});
    return lines;
}

Json figures_of(const Results& results) {
    Json figures = Json::object();
    for (const Figure& figure : results.figures) {
        Json entry{{"value", in_unit(figure.value, figure.unit)},
                   {"unit", info(figure.unit).text},
                   {"error", in_unit(figure.error, figure.unit)}};
        if (!figure.state.empty()) entry["state"] = figure.state;
        figures[figure.name] = entry;
    }
    Json junctions = Json::array();
    for (const JunctionLine& junction : results.junctions)
        junctions.push_back({{"depth", in_unit(junction.depth, Unit::length)},
                             {"type", junction.p_above ? "p above n" : "n above p"},
                             {"gradient", in_unit(junction.gradient, Unit::density_gradient)}});
    figures["junctions"] = {
        {"value", junctions}, {"unit", {{"depth", "um"}, {"gradient", "cm-4"}}}, {"error", nullptr}};
    Json sheets = Json::array();
    for (const SheetLine& sheet : results.sheet_resistances)
        sheets.push_back({{"from", in_unit(sheet.from, Unit::length)},
                          {"to", in_unit(sheet.to, Unit::length)},
                          {"type", sheet.type},
                          {"value", in_unit(sheet.value, Unit::sheet_resistance)},
                          {"dose", in_unit(sheet.dose, Unit::areal_density)},
                          {"peak", in_unit(sheet.peak, Unit::density)},
                          {"peak_depth", in_unit(sheet.peak_depth, Unit::length)},
                          {"debye_length", in_unit(sheet.debye_length, Unit::length)},
                          {"depleting_potential", in_unit(sheet.depleting_potential, Unit::voltage)}});
    const Json units{
        {"from", "um"},   {"to", "um"},         {"value", "ohm"},       {"dose", "cm-2"},
        {"peak", "cm-3"}, {"peak_depth", "um"}, {"debye_length", "um"}, {"depleting_potential", "V"}};
    figures["sheet_resistances"] = {{"value", sheets}, {"unit", units}, {"error", nullptr}};
    return figures;
}

}  // namespace

std::string ledger_json(const Ledger& ledger) { return ledger_array(ledger).dump(1); }

std::string summary_json(const Results& results) {
    Json document{
        {"format", "bandwright-summary 1"}, {"command", results.command},
        {"title", results.title},           {"structure", results.structure_name},
        {"status", results.status},         {"temperature", {{"value", results.temperature}, {"unit", "K"}}},
        {"figures", figures_of(results)}};
    if (!results.points.columns.empty()) {
        Json points = Json::array(), units = Json::object();
        for (std::size_t row = 0; row < results.points.rows(); ++row) {
            Json point = Json::object();
            for (const Column& column : results.points.columns) {
                point[column.name] = in_unit(column.values[row], column.unit);
                if (!column.errors.empty())
                    point[column.name + "_error"] = in_unit(column.errors[row], column.unit);
            }
            points.push_back(point);
        }
        for (const Column& column : results.points.columns) units[column.name] = info(column.unit).text;
        document["points"] = points;
        document["units"] = units;
    }
    if (!results.readings.empty()) document["readings"] = results.readings;
    document["warnings"] = results.warnings;
    if (results.command == "ledger") document["ledger"] = ledger_array(results.ledger);
    return document.dump(1);
}

}  // namespace bandwright
