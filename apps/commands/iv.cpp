// `iv`: current against bias.
// SPDX-License-Identifier: MIT
#include <fmt/format.h>

#include <CLI/CLI.hpp>
#include <cmath>
#include <memory>

#include "apps/options.hpp"
#include "apps/run.hpp"
#include "core/base/error.hpp"

namespace bandwright {

namespace {

struct IvOptions {
    std::string from, to, step, points, biases;
};

[[noreturn]] void refuse(const std::string& text) { throw InputError("", {{"", text}}); }

std::vector<double> sweep_of(const IvOptions& o) {
    if (!o.biases.empty()) {
        if (!o.from.empty() || !o.to.empty() || !o.step.empty() || !o.points.empty())
            refuse("iv: --biases lists the biases by itself; leave out --from, --to, --step and --points");
        return option_values("--biases", o.biases, Unit::voltage);
    }
    if (o.from.empty() || o.to.empty() || o.step.empty() == o.points.empty())
        refuse("iv: say which biases: --from V --to V with --step V or --points N, or --biases V,V,...");
    const double from = option_value("--from", o.from, Unit::voltage),
                 to = option_value("--to", o.to, Unit::voltage);
    std::size_t intervals = 0;
    if (!o.step.empty()) {
        const double step = std::abs(option_value("--step", o.step, Unit::voltage));
        if (!(step > 0)) refuse("iv: --step must not be 0");
        const double count = std::abs(to - from) / step;
        if (count > 1e6) refuse(fmt::format("iv: --step {} gives more than a million biases", o.step));
        std::vector<double> biases;
        // Multiples of the step from the start; the end is always there.
        for (std::size_t k = 0; static_cast<double>(k) <= count * (1 + 1e-12); ++k)
            biases.push_back(from + std::copysign(step, to - from) * static_cast<double>(k));
        if (std::abs(biases.back() - to) > 1e-9 * step)
            biases.push_back(to);
        else
            biases.back() = to;
        for (double& bias : biases)
            if (std::abs(bias) < 1e-9 * step) bias = 0;
        return biases;
    }
    const double points = option_value("--points", o.points, Unit::one);
    if (!(points >= 2) || points != std::floor(points) || points > 1e6)
        refuse(fmt::format("iv: --points must be a whole number from 2 to 1000000 (found \"{}\")", o.points));
    intervals = static_cast<std::size_t>(points) - 1;
    std::vector<double> biases;
    for (std::size_t k = 0; k <= intervals; ++k) {
        const double share = static_cast<double>(k) / static_cast<double>(intervals);
        double bias = k == intervals ? to : from + share * (to - from);
        if (std::abs(bias) < 1e-12 * std::abs(to - from)) bias = 0;
        biases.push_back(bias);
    }
    return biases;
}

}  // namespace

Command iv_command() {
    return {"iv", "current against bias, with bands, field and carriers at every bias", [](CLI::App& app) {
                auto own = std::make_shared<IvOptions>();
                app.add_option("--from", own->from, "first bias (V)");
                app.add_option("--to", own->to, "last bias (V)");
                app.add_option("--step", own->step, "distance of biases (V)");
                app.add_option("--points", own->points, "number of biases");
                app.add_option("--biases", own->biases, "comma-separated biases (V)");
                return [own](const CommonOptions& options) {
                    const std::vector<double> biases = sweep_of(*own);
                    const BiasRequest request = request_from(options, biases);
                    return solve_and_report("iv", options, read_structure(options.file, options.overrides),
                                            request);
                };
            }};
}

}  // namespace bandwright
