// `bands`: band edges, potential, field and carriers at equilibrium or at given biases.
// SPDX-License-Identifier: MIT
#include <CLI/CLI.hpp>
#include <memory>

#include "apps/options.hpp"
#include "apps/run.hpp"

namespace bandwright {

Command bands_command() {
    return {"bands", "band edges, field and carriers at equilibrium, or at each --bias", [](CLI::App& app) {
                auto texts = std::make_shared<std::vector<std::string>>();
                app.add_option("--bias", *texts, "bias (V); repeatable, or a comma list")
                    ->allow_extra_args(false);
                return [texts](const CommonOptions& options) {
                    std::vector<double> biases;
                    for (const std::string& text : *texts)
                        for (const double bias : option_values("--bias", text, Unit::voltage))
                            biases.push_back(bias);
                    if (biases.empty()) biases.push_back(0);
                    const BiasRequest request = request_from(options, biases);
                    return solve_and_report("bands", options, read_structure(options.file, options.overrides),
                                            request);
                };
            }};
}

}  // namespace bandwright
