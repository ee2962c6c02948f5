// `handcheck`: hand estimates of a junction beside the full solution, and which of them to trust.
// SPDX-License-Identifier: MIT
#include <fmt/format.h>

#include <CLI/CLI.hpp>
#include <cmath>
#include <memory>

#include "apps/console.hpp"
#include "apps/options.hpp"
#include "apps/run.hpp"
#include "solvers/analyses/hand_check.hpp"

namespace bandwright {

namespace {

/// A quantity with its hand values and the solved figure of the same meaning.
struct Line {
    const char* name;
    Unit unit;
    double HandEstimate::*hand;
    /// Point column, or figure where there is no column of that name.
    const char* solved;
    const char* heading;
};
constexpr Line lines[] = {
    {"built_in_potential", Unit::voltage, &HandEstimate::built_in_potential, "built_in_potential",
     "built-in potential"},
    {"depletion_top_edge", Unit::length, &HandEstimate::top_edge, "depletion_top_edge", "upper edge"},
    {"depletion_bottom_edge", Unit::length, &HandEstimate::bottom_edge, "depletion_bottom_edge",
     "lower edge"},
    {"depletion_width", Unit::length, &HandEstimate::width, "depletion_width", "width"},
    {"peak_field", Unit::field, &HandEstimate::field, "extrapolated_field", "peak field (extrapolated)"},
    {"capacitance", Unit::capacitance, &HandEstimate::capacitance, "zero_bias_capacitance", "capacitance"},
};

struct Estimator {
    const char* name;
    HandEstimate HandPoint::*estimate;
    const char* meaning;
};
constexpr Estimator estimators[] = {
    {"abrupt", &HandPoint::abrupt, "equivalent abrupt junction"},
    {"linear", &HandPoint::linear, "equivalent linearly graded junction"},
    {"profile", &HandPoint::profile, "depletion approximation on the true profile"},
};

/// Solved value and error at a row; a figure of equilibrium counts at 0 V alone.
std::pair<double, double> solved_at(const Results& results, const Line& line, std::size_t row) {
    if (const Column* column = results.points.find(line.solved))
        return {column->values[row], column->errors.empty() ? no_value : column->errors[row]};
    const bool at_zero = results.points.find("bias")->values[row] == 0;
    for (const Figure& figure : results.figures)
        if (at_zero && figure.name == line.solved) return {figure.value, figure.error};
    return {no_value, no_value};
}

void add_hand_values(const HandCheck& check, Results& results) {
    for (const Estimator& estimator : estimators)
        for (const Line& line : lines) {
            Column column{fmt::format("hand_{}_{}", estimator.name, line.name),
                          line.unit,
                          fmt::format("{}, {}", line.heading, estimator.meaning),
                          {},
                          {}};
            for (const HandPoint& point : check.points)
                column.values.push_back((point.*estimator.estimate).*line.hand);
            results.points.columns.push_back(std::move(column));
        }
    for (const HandPoint& point : check.points)
        for (const std::string& text : {point.verdict, point.spill_over})
            if (!text.empty()) results.readings.push_back(text);
}

void print_point(const HandCheck& check, const Results& results, std::size_t row) {
    const HandPoint& point = check.points[row];
    TextTable table{
        {"", "unit", "abrupt", "off by", "graded", "off by", "profile", "off by", "full solution"},
        {"", "", "", "%", "", "%", "", "%", ""},
        {true, true},
        {}};
    for (const Line& line : lines) {
        const auto [solved, error] = solved_at(results, line, row);
        std::vector<std::string> cells{line.heading, std::string(info(line.unit).text)};
        bool has_value = !std::isnan(solved);
        for (const Estimator& estimator : estimators) {
            const double hand = (point.*estimator.estimate).*line.hand;
            has_value = has_value || !std::isnan(hand);
            cells.push_back(std::isnan(hand) ? "-" : fmt::format("{:.5g}", shown(hand, line.unit)));
            // An edge is judged by how far it lies off in widths.
            const bool is_edge = line.unit == Unit::length && line.hand != &HandEstimate::width;
            const Column* width = results.points.find("depletion_width");
            const double scale = is_edge && width ? width->values[row] : solved;
            cells.push_back(std::isnan(hand) || std::isnan(solved) || std::isnan(scale)
                                ? "-"
                                : fmt::format("{:+.2f}", 100 * (hand - solved) / scale));
        }
        cells.push_back(
            std::isnan(solved) ? "-" : value_with_error(shown(solved, line.unit), shown(error, line.unit)));
        if (has_value) table.rows.push_back(cells);
    }
    fmt::print("At {:.6g} V", point.bias);
    if (!std::isnan(point.light))
        fmt::print(" (abrupt: {:.3g} and {:.3g} cm-3)", shown(point.heavy, Unit::density),
                   shown(point.light, Unit::density));
    fmt::print("\n{}", table.text());
    for (const std::string& text : {point.verdict, point.spill_over})
        if (!text.empty()) fmt::print("  {}\n", text);
    fmt::print("\n");
}

}  // namespace

Command handcheck_command() {
    return {"handcheck", "hand estimates of a junction beside the full solution, at 0 V and at each --bias",
            [](CLI::App& app) {
                auto texts = std::make_shared<std::vector<std::string>>();
                app.add_option("--bias", *texts, "bias (V); repeatable, or a comma list")
                    ->allow_extra_args(false);
                return [texts](const CommonOptions& options) {
                    std::vector<double> biases{0};
                    for (const std::string& text : *texts)
                        for (const double bias : option_values("--bias", text, Unit::voltage))
                            if (bias != 0) biases.push_back(bias);
                    const ReadResult input = read_structure(options.file, options.overrides);
                    if (metallurgical_junctions(input.structure).empty())
                        throw InputError(
                            options.file,
                            {{"", "handcheck needs a junction: the net doping never changes sign"}});
                    auto check = std::make_shared<HandCheck>();
                    Job job;
                    job.solve = [&](const BiasRequest& request, const Hooks& hooks) {
                        *check = run_hand_check(input.structure, request, hooks);
                        return check->outcome;
                    };
                    job.add = [check](Results& results) { add_hand_values(*check, results); };
                    job.print = [check](const Results& results) {
                        for (std::size_t row = 0; row < check->points.size(); ++row)
                            print_point(*check, results, row);
                    };
                    return solve_and_report("handcheck", options, input, request_from(options, biases), job);
                };
            }};
}

}  // namespace bandwright
