#include "solvers/adaptive.hpp"

#include <algorithm>
#include <array>
#include <cmath>

#include "core/base/constants.hpp"
#include "core/figures/terminal.hpp"
#include "core/mesh/first_spacing.hpp"
#include "core/mesh/refine.hpp"
#include "solvers/demand.hpp"
#include "solvers/point_figures.hpp"

namespace bandwright {

namespace {

constexpr int passes = 3;  // at the first aim; the demand settles in three
constexpr double first_aim = 1e-3;
constexpr int rounds = 4;              // of scaling all widths after that
constexpr double growth = 0.2;         // of the width per unit of depth; 20 % from cell to cell
constexpr double least_width = 2e-11;  // [m]
constexpr std::size_t most_nodes = 400000;

/// A bias at which meshes are judged, and the last state found there.
struct Sample {
    double voltage;  // [kT/q]
    std::optional<State> state;
    bool reachable = true;
};

// Zero, both extremes, and on each side the bias nearest to zero and one ninth of the extreme: an edge moves
// as the root.
std::vector<Sample> samples_for(const std::vector<double>& biases, double thermal) {
    std::vector<Sample> samples{{0, {}, true}};
    for (const double sign : {-1.0, 1.0}) {
        double nearest = 0, farthest = 0;
        for (const double bias : biases) {
            const double size = sign * bias / thermal;
            if (!(size > 0)) continue;
            nearest = nearest == 0 ? size : std::min(nearest, size);
            farthest = std::max(farthest, size);
        }
        if (farthest == 0) continue;
        if (nearest < 0.5 * farthest) samples.push_back({sign * nearest, {}, true});
        if (farthest > 60 && nearest < 0.05 * farthest) samples.push_back({sign * farthest / 9, {}, true});
        samples.push_back({sign * farthest, {}, true});
    }
    return samples;
}

}  // namespace

AdaptedMesh adapted_mesh(const Structure& structure, const std::vector<double>& biases, double max_current,
                         const std::function<bool()>& should_stop) {
    AdaptedMesh result;
    const double thermal = constants::thermal_voltage(structure.temperature);
    const double most_flux = max_current / constants::elementary_charge;
    const double tolerance = structure.mesh.tolerance;
    const FixedDepths& fixed = result.fixed = fixed_depths(structure);
    std::vector<Sample> samples = samples_for(biases, thermal);
    const std::vector<Metallurgical> junctions = metallurgical_junctions(structure);

    double largest_bias = 0;
    for (const double bias : biases) largest_bias = std::max(largest_bias, std::abs(bias));
    std::vector<double> junction_depths;
    for (const Metallurgical& junction : junctions) junction_depths.push_back(junction.depth);

    Spacing& spacing = result.spacing = first_spacing(structure, fixed, largest_bias);
    result.mesh = mesh_from_spacing(fixed, spacing);

    // Solves every sample on a mesh; states of an older mesh serve as guesses.
    const auto solve_samples = [&](const DiscreteSystem& system, const auto& visit, bool patient) {
        BiasWalk walk(system);
        const std::optional<State>& equilibrium = samples.front().state;  // of an older mesh
        if (!(equilibrium ? walk.start_from(*equilibrium, 0) : walk.start())) {
            result.ok = false;
            result.message = walk.message();
        }
        for (Sample& sample : samples) {
            if (!result.ok || !sample.reachable || (should_stop && should_stop())) continue;
            bool there = sample.voltage == 0 && walk.voltage() == 0;
            if (!there && sample.state) {
                BiasWalk direct(system);
                there = direct.start_from(*sample.state, sample.voltage);
                result.iterations += direct.iterations();
                if (there) {
                    visit(sample, direct);
                    sample.state = direct.state();
                    continue;
                }
            }
            if (!there) {
                // From equilibrium outward; each sign starts there anew.
                if ((sample.voltage > 0) != (walk.voltage() > 0) && walk.voltage() != 0) {
                    result.iterations += walk.iterations();
                    walk = BiasWalk(system);
                    walk.start_from(*samples.front().state, 0);
                }
                const BiasWalk::Arrival arrival = walk.walk_to(sample.voltage, most_flux, should_stop);
                if (arrival != BiasWalk::Arrival::arrived) {
                    // The mesh then serves what was reached; the sweep itself will say where it stopped.
                    if (!patient || arrival == BiasWalk::Arrival::current_limit)
                        sample.voltage = walk.voltage();
                    sample.reachable = arrival == BiasWalk::Arrival::current_limit;
                    if (!sample.reachable) continue;
                }
            }
            visit(sample, walk);
            sample.state = walk.state();
        }
        result.iterations += walk.iterations();
        result.rejected += walk.rejected();
    };
    const auto move_states = [&](const Mesh& from, const Mesh& to) {
        for (Sample& sample : samples)
            if (sample.state) sample.state->unknowns = interpolated(from, sample.state->unknowns, to, 3);
    };

    // A width changes by no more than six times in a pass, a tolerance therefore by no more than thirty.
    const int further =
        std::max(1, static_cast<int>(std::ceil(std::log(first_aim / tolerance) / std::log(30.0) - 1e-9)));
    for (int pass = 0; pass < passes + further; ++pass) {
        const DiscreteSystem system = discretize(structure, result.mesh);
        std::vector<Demand> demands;
        SeenDensities seen;
        // The first passes aim lower: their demands are uncertain and need not be met exactly.
        const double aim = pass < passes ? std::max(tolerance, first_aim)
                                         : std::max(tolerance, first_aim * std::pow(30.0, passes - 1 - pass));
        solve_samples(
            system,
            [&](const Sample&, BiasWalk& walk) {
                for (Demand& demand : demands_of(system, walk.state(), walk.equations()))
                    demands.push_back(std::move(demand));
                seen.add(walk.equations());
            },
            pass > 0);
        if (!result.ok || (should_stop && should_stop())) return result;
        spacing = widths_for(result.mesh, demands, largest_widths(system, seen, junction_depths, aim), aim,
                             least_width);
        limit_growth(spacing, growth);
        const Mesh next = mesh_from_spacing(fixed, spacing);
        move_states(result.mesh, next);
        result.mesh = next;
        if (result.mesh.nodes() > most_nodes) break;
    }

    // Scale all widths until nested meshes agree, or to the node count asked for.
    if (structure.mesh.nodes) {
        double low = 1e-3, high = 1e3;
        for (int step = 0; step < 60; ++step) {
            const double middle = std::sqrt(low * high);
            (mesh_from_spacing(fixed, spacing, middle).nodes() > *structure.mesh.nodes ? low : high) = middle;
        }
        result.mesh = mesh_from_spacing(fixed, spacing, high);
        return result;
    }
    // A figure whose error does not fall with the mesh is not limited by it and does not drive it further.
    using Errors = std::array<double, point_figure_count>;
    std::vector<Errors> previous;
    std::vector<std::array<bool, point_figure_count>> stuck(samples.size());
    double factor = 1, last_scaling = 1;
    for (int round = 0; round < rounds; ++round) {
        const DiscreteSystem system = discretize(structure, result.mesh);
        const DiscreteSystem coarse = discretize(structure, coarsened(result.mesh));
        std::vector<Errors> errors(samples.size());
        State equilibrium;
        solve_samples(
            system,
            [&](const Sample& sample, BiasWalk& walk) {
                if (sample.voltage == 0) equilibrium = walk.state();
                const std::size_t which =
                    junctions.empty() ? 0
                                      : most_biased_junction(system, junctions, equilibrium, walk.state());
                const PointFigures fine =
                    point_figures(system, walk.state(), walk.equations(), junctions, which);
                BiasWalk nested(coarse);
                State guess = walk.state();
                guess.unknowns = injected(result.mesh, guess.unknowns, 3);
                const bool solved = nested.start_from(guess, sample.voltage);
                result.iterations += nested.iterations();
                if (!solved) return;
                const PointFigures other =
                    point_figures(coarse, nested.state(), nested.equations(), junctions, which);
                errors[static_cast<std::size_t>(&sample - samples.data())] = relative_errors(fine, other);
            },
            true);
        if (!result.ok || (should_stop && should_stop())) return result;
        double worst = 0;
        for (std::size_t k = 0; k < samples.size(); ++k)
            for (std::size_t figure = 0; figure < point_figure_count; ++figure) {
                // Second order: the error should fall as the square of the width; half of that is asked for.
                if (round > 0 && errors[k][figure] > previous[k][figure] * std::pow(last_scaling, 1.0))
                    stuck[k][figure] = true;
                if (!stuck[k][figure]) worst = std::max(worst, errors[k][figure]);
            }
        if (worst <= tolerance || result.mesh.nodes() > most_nodes) break;
        last_scaling = std::clamp(std::sqrt(0.8 * tolerance / worst), 0.5, 0.85);
        factor *= last_scaling;
        previous = errors;
        const Mesh next = mesh_from_spacing(fixed, spacing, factor);
        move_states(result.mesh, next);
        result.mesh = next;
    }
    return result;
}

}  // namespace bandwright
