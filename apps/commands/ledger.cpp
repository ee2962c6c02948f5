// `ledger`: every physical parameter that a run of this file would use.
// SPDX-License-Identifier: MIT
#include <fmt/format.h>

#include <CLI/CLI.hpp>

#include "apps/console.hpp"
#include "apps/run.hpp"
#include "io/results/summary.hpp"

namespace bandwright {

Command ledger_command() {
    return {"ledger", "every physical parameter in force, with unit, source and status", [](CLI::App&) {
                return [](const CommonOptions& options) {
                    const ReadResult input = read_structure(options.file, options.overrides);
                    Results results = results_of_input("ledger", options, input);
                    results.status = "complete";
                    results.warnings = remarks(input.structure);
                    for (const std::string& warning : results.warnings) warn(warning);
                    if (options.json) {
                        fmt::print("{}\n", summary_json(results));
                        return Exit::done;
                    }
                    if (options.quiet) return Exit::done;
                    TextTable table{{"parameter", "where", "value", "unit", "status", "source", "valid"},
                                    {},
                                    {true, true, false, true, true, true, true},
                                    {}};
                    for (const LedgerLine& line : results.ledger)
                        table.rows.push_back(
                            {line.parameter, line.where,
                             fmt::format("{:.9g}", shown(line.number.value, line.number.unit)),
                             std::string(info(line.number.unit).text), std::string(text(line.number.status)),
                             line.number.source, line.number.valid});
                    fmt::print("{}\n{} K, parameters in force\n\n{}", results.title, results.temperature,
                               table.text());
                    return Exit::done;
                };
            }};
}

}  // namespace bandwright
