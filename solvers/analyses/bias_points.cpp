#include "solvers/analyses/bias_points.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <memory>
#include <numeric>

#include "core/base/constants.hpp"
#include "core/figures/profiles.hpp"
#include "core/figures/sheet_resistance.hpp"
#include "core/mesh/refine.hpp"
#include "solvers/adaptive.hpp"
#include "solvers/point_figures.hpp"

namespace bandwright {

namespace {

/// One of the nested meshes, finest first: its system, the walk on it, and the equilibrium to start from.
struct Level {
    std::unique_ptr<DiscreteSystem> system;
    std::unique_ptr<BiasWalk> walk;
    std::optional<State> equilibrium;
    bool usable = true;
};

/// A solved bias: figures on every level and the finest level's fields.
struct SolvedPoint {
    std::size_t request;  // index into BiasRequest::biases
    PointFigures figures;
    std::array<double, point_figure_count> errors;
};

/// Everything a run carries along.
struct Run {
    const Structure& structure;
    const BiasRequest& request;
    const Hooks& hooks;
    std::vector<Metallurgical> junctions;
    std::size_t which = 0;
    std::vector<Level> levels;
    std::vector<SolvedPoint> points;
    Profiles profiles_empty;
    std::vector<Profiles> profiles;  // one bias each, beside `points`
    BiasOutcome outcome;
    long meshing_iterations = 0, meshing_rejected = 0;

    bool stop() const { return hooks.should_stop && hooks.should_stop(); }
    void tell(double share, const std::string& text) const {
        if (hooks.progress) hooks.progress(share, text);
    }
};

std::vector<Level> nested_levels(const Structure& structure, Mesh mesh, bool error_bars) {
    std::vector<Level> levels;
    for (int k = 0; k < (error_bars ? 3 : 1); ++k) {
        Level level;
        level.system = std::make_unique<DiscreteSystem>(discretize(structure, mesh));
        level.walk = std::make_unique<BiasWalk>(*level.system);
        levels.push_back(std::move(level));
        if (k < 2 && error_bars) mesh = coarsened(mesh);
    }
    return levels;
}

// Requests from zero outward, first down, then up; each bias is passed once.
std::vector<std::size_t> outward(const std::vector<double>& biases) {
    std::vector<std::size_t> order(biases.size());
    std::iota(order.begin(), order.end(), std::size_t{0});
    std::stable_sort(order.begin(), order.end(), [&](std::size_t a, std::size_t b) {
        const bool down_a = biases[a] < 0, down_b = biases[b] < 0;
        if (down_a != down_b) return down_a;
        return std::abs(biases[a]) < std::abs(biases[b]);
    });
    return order;
}

// Solves the coarser levels at the finest level's bias: the fine state at their own nodes is the guess.
void solve_nested(Run& run) {
    State guess = run.levels[0].walk->state();
    for (std::size_t k = 1; k < run.levels.size(); ++k) {
        Level& level = run.levels[k];
        guess.unknowns = injected(run.levels[k - 1].system->mesh, guess.unknowns, 3);
        level.usable = level.walk->start_from(guess, run.levels[0].walk->voltage());
    }
}

void store_point(Run& run, std::size_t request) {
    std::vector<PointFigures> nested;
    for (Level& level : run.levels) {
        if (!level.usable) break;
        nested.push_back(point_figures(*level.system, level.walk->state(), level.walk->equations(),
                                       run.junctions, run.which, level.walk->report().iteration_error));
    }
    Level& finest = run.levels.front();
    Profiles one = run.profiles_empty;
    append_profiles(*finest.system, finest.walk->state(), finest.walk->equations(), one);
    run.points.push_back({request, nested.front(), nested_errors(nested)});
    run.profiles.push_back(std::move(one));
}

void count_iterations(Run& run) {
    run.outcome.counts.newton_iterations = run.meshing_iterations;
    run.outcome.counts.rejected_steps = run.meshing_rejected;
    for (const Level& level : run.levels) {
        run.outcome.counts.newton_iterations += level.walk->iterations();
        run.outcome.counts.rejected_steps += level.walk->rejected();
    }
    run.outcome.counts.nodes = run.levels.front().system->nodes();
}

// Turns the points solved so far into the outcome's table and profiles, in the order of the request.
void fill_outcome(Run& run) {
    std::vector<std::size_t> order(run.points.size());
    std::iota(order.begin(), order.end(), std::size_t{0});
    std::sort(order.begin(), order.end(),
              [&](std::size_t a, std::size_t b) { return run.points[a].request < run.points[b].request; });
    Column bias{"bias", Unit::voltage, "terminal voltage, top minus bottom", {}, {}};
    for (const std::size_t k : order) bias.values.push_back(run.request.biases[run.points[k].request]);
    Table table{{bias}};
    for (const PointFigure figure :
         {PointFigure::current_density, PointFigure::junction_voltage, PointFigure::peak_field,
          PointFigure::peak_field_depth, PointFigure::extrapolated_field, PointFigure::depletion_top_edge,
          PointFigure::depletion_bottom_edge, PointFigure::depletion_width}) {
        const bool of_junction =
            figure != PointFigure::current_density && figure != PointFigure::junction_voltage;
        if (of_junction && run.junctions.empty()) continue;
        Column column{info(figure).name, info(figure).unit, info(figure).meaning, {}, {}};
        for (const std::size_t k : order) {
            column.values.push_back(run.points[k].figures[figure]);
            column.errors.push_back(run.points[k].errors[static_cast<std::size_t>(figure)]);
        }
        if (figure == PointFigure::current_density && run.structure.area) {
            Column current{"current", Unit::current, "current into the top contact", column.values,
                           column.errors};
            for (double& value : current.values) value *= *run.structure.area;
            for (double& value : current.errors) value *= *run.structure.area;
            table.columns.push_back(std::move(column));
            table.columns.push_back(std::move(current));
            continue;
        }
        table.columns.push_back(std::move(column));
    }
    run.outcome.points = std::move(table);
    run.outcome.profiles = run.profiles_empty;
    for (std::size_t v = 0; v < run.outcome.profiles.variables.size(); ++v) {
        Variable& variable = run.outcome.profiles.variables[v];
        if (!variable.over_bias) continue;
        for (const std::size_t k : order) {
            const std::vector<double>& row = run.profiles[k].variables[v].values;
            variable.values.insert(variable.values.end(), row.begin(), row.end());
        }
    }
    count_iterations(run);
}

void add_equilibrium_figures(Run& run) {
    std::vector<PointFigures> nested;
    for (Level& level : run.levels) {
        if (!level.usable) break;
        nested.push_back(point_figures(*level.system, level.walk->state(), level.walk->equations(),
                                       run.junctions, run.which, level.walk->report().iteration_error));
        const auto capacitance = static_cast<std::size_t>(PointFigure::zero_bias_capacitance);
        nested.back().values[capacitance] = level.walk->capacitance();
        nested.back().floors[capacitance] = 1e-13 * nested.back().values[capacitance];
    }
    const auto errors = nested_errors(nested);
    for (const PointFigure figure : {PointFigure::built_in_potential, PointFigure::contact_potential,
                                     PointFigure::zero_bias_capacitance}) {
        if (figure == PointFigure::built_in_potential && run.junctions.empty()) continue;
        Figure out;
        out.name = info(figure).name;
        out.unit = info(figure).unit;
        out.meaning = info(figure).meaning;
        out.value = nested.front()[figure];
        out.error = errors[static_cast<std::size_t>(figure)];
        if (std::isnan(out.value))
            out.state = nested.front().state.empty() ? "no neutral region on one side" : nested.front().state;
        run.outcome.figures.push_back(out);
    }
}

// The junction that per-junction figures speak of.
std::size_t chosen_junction(const Run& run, double farthest_voltage) {
    if (run.junctions.size() < 2) return 0;
    if (run.request.junction_depth) {
        std::size_t best = 0;
        for (std::size_t k = 1; k < run.junctions.size(); ++k)
            if (std::abs(run.junctions[k].depth - *run.request.junction_depth) <
                std::abs(run.junctions[best].depth - *run.request.junction_depth))
                best = k;
        return best;
    }
    const DiscreteSystem& system = *run.levels.back().system;
    BiasWalk walk(system);
    if (!walk.start()) return 0;
    const State equilibrium = walk.state();
    walk.walk_to(farthest_voltage, run.request.max_current / constants::elementary_charge);
    return most_biased_junction(system, run.junctions, equilibrium, walk.state());
}

// Goes through all requests; returns how it ended.
EndReason walk_through(Run& run) {
    const double thermal = run.levels[0].system->thermal_voltage;
    const double most_flux = run.request.max_current / constants::elementary_charge;
    const std::vector<std::size_t> order = outward(run.request.biases);
    BiasWalk& walk = *run.levels[0].walk;
    const State equilibrium = walk.state();
    bool was_down = true, limited_down = false, limited_up = false;
    for (std::size_t k = 0; k < order.size(); ++k) {
        if (run.stop()) return EndReason::interrupted;
        if (!run.request.skip.empty() && run.request.skip[order[k]]) continue;
        const double bias = run.request.biases[order[k]];
        const bool down = bias < 0;
        if (!down && was_down && walk.voltage() != 0) walk.start_from(equilibrium, 0);
        was_down = down;
        if (down ? limited_down : limited_up) continue;
        const BiasWalk::Arrival arrival = walk.walk_to(bias / thermal, most_flux, [&] { return run.stop(); });
        if (arrival == BiasWalk::Arrival::interrupted) return EndReason::interrupted;
        if (arrival == BiasWalk::Arrival::stopped) {
            run.outcome.message = walk.message();
            return EndReason::stopped_short;
        }
        if (arrival == BiasWalk::Arrival::current_limit) {
            (down ? limited_down : limited_up) = true;
            if (run.outcome.message.empty())
                run.outcome.message = fmt::format(
                    "at {:.6g} V the current density reaches {:.3g} A cm-2, the limit of {:.3g}; the sweep "
                    "ends there",
                    walk.voltage() * thermal,
                    shown(std::abs(walk.flux()) * constants::elementary_charge, Unit::current_density),
                    shown(run.request.max_current, Unit::current_density));
            if (walk.voltage() != bias / thermal) continue;
        }
        solve_nested(run);
        store_point(run, order[k]);
        run.tell((static_cast<double>(k) + 1) / static_cast<double>(order.size()),
                 fmt::format("{:.4g} V", bias));
        if (run.hooks.wants_checkpoint && run.hooks.checkpoint && run.hooks.wants_checkpoint()) {
            fill_outcome(run);
            run.hooks.checkpoint(run.outcome);
        }
    }
    return limited_down || limited_up ? EndReason::current_limit : EndReason::complete;
}

}  // namespace

BiasOutcome run_bias_points(const Structure& structure, const BiasRequest& request, const Hooks& hooks) {
    require(complaints(structure).empty(), "a structure with complaints is not solved");
    require(!request.biases.empty(), "no bias is asked for");
    Run run{structure, request, hooks, metallurgical_junctions(structure), 0, {}, {}, {}, {}, {}, 0, 0};
    run.outcome.warnings = remarks(structure);
    run.outcome.warnings.insert(run.outcome.warnings.begin(), structure.warnings.begin(),
                                structure.warnings.end());
    for (const Metallurgical& junction : run.junctions)
        run.outcome.junctions.push_back(
            {junction.depth, junction.p_above, junction.gradient.value_or(no_value)});
    run.outcome.sheet_resistances = sheet_resistances(structure);

    run.tell(0, "laying the mesh");
    AdaptedMesh adapted;
    if (request.mesh)
        adapted.mesh = *request.mesh;
    else
        adapted = adapted_mesh(structure, request.biases, request.max_current, [&] { return run.stop(); });
    run.meshing_iterations = adapted.iterations;
    run.meshing_rejected = adapted.rejected;
    run.outcome.mesh = adapted.mesh;
    run.levels = nested_levels(structure, std::move(adapted.mesh), request.error_bars);
    run.profiles_empty = empty_profiles(*run.levels[0].system);
    if (!adapted.ok || !run.levels[0].walk->start()) {
        run.outcome.end = EndReason::stopped_short;
        run.outcome.message = adapted.ok ? run.levels[0].walk->message() : adapted.message;
        fill_outcome(run);
        return run.outcome;
    }
    if (run.stop()) {
        run.outcome.end = EndReason::interrupted;
        fill_outcome(run);
        return run.outcome;
    }
    double farthest = 0;
    for (const double bias : request.biases)
        if (std::abs(bias) > std::abs(farthest)) farthest = bias;
    run.which = chosen_junction(run, farthest / run.levels[0].system->thermal_voltage);
    run.outcome.junction = run.which;
    solve_nested(run);
    add_equilibrium_figures(run);
    run.outcome.end = walk_through(run);
    fill_outcome(run);
    return run.outcome;
}

}  // namespace bandwright
