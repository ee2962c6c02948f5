#include "solvers/sweep.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>

#include "core/base/constants.hpp"
#include "core/base/error.hpp"
#include "core/figures/terminal.hpp"
#include "solvers/equilibrium.hpp"

namespace bandwright {

namespace {

constexpr double least_step = 1e-4;  // [kT/q]; below it nothing physical changes between two biases
constexpr double most_step = 2500;   // [kT/q]; steps of this size were seen to need no cut
constexpr int easy_iterations = 10;  // the step doubles when Newton needs no more than these

}  // namespace

std::string describe_failure(const DiscreteSystem& system, double applied_voltage,
                             const NewtonReport& report) {
    static constexpr const char* names[] = {"the potential", "the electron density", "the hole density"};
    const std::size_t node = report.worst_node;
    const std::size_t cell = std::min(node, system.cells() - 1);
    const double change = report.steps.empty() ? 0 : report.steps.back();
    const std::string remaining = report.worst_unknown == 0 ? fmt::format("{:.2g} kT/q", change)
                                                            : fmt::format("{:.2g} of its value", change);
    return fmt::format(
        "at {:.6g} V: no convergence after {} Newton steps ({}); the largest remaining change is {} in {} at "
        "{:.6g} um (layer \"{}\")",
        applied_voltage * system.thermal_voltage, report.iterations,
        report.message.empty() ? "the step no longer shrinks" : report.message, remaining,
        names[report.worst_unknown], shown(system.mesh.position[node], Unit::length),
        system.structure.layers[system.mesh.layer_of_cell[cell]].name);
}

BiasWalk::BiasWalk(const DiscreteSystem& system) : solver_(system) {}

bool BiasWalk::start() { return start_from(neutral_state(solver_.system()), 0); }

bool BiasWalk::start_from(State guess, double applied_voltage) {
    is_seen_ = is_fresh_ = false;
    if (applied_voltage == 0) {
        report_ = solve_equilibrium(solver_.system(), guess, solver_.equations());
        iterations_ += report_.iterations;
        is_fresh_ = report_.converged();
    } else {
        if (solver_.system().series_resistance == 0) guess.contact_voltage = applied_voltage;
        NewtonOptions options;
        options.most_iterations = 100;
        is_seen_ = is_fresh_ = solve(guess, applied_voltage, options);
    }
    if (!report_.converged()) {
        message_ = describe_failure(solver_.system(), applied_voltage, report_);
        return false;
    }
    state_ = std::move(guess);
    voltage_ = applied_voltage;
    return true;
}

bool BiasWalk::solve(State& guess, double applied_voltage, const NewtonOptions& options) {
    report_ = solver_.solve(guess, applied_voltage, options);
    iterations_ += report_.iterations;
    return report_.converged();
}

BiasWalk::Arrival BiasWalk::walk_to(double target, double most_flux,
                                    const std::function<bool()>& should_stop) {
    double step = step_, ceiling = most_step;
    while (voltage_ != target) {
        if (should_stop && should_stop()) return Arrival::interrupted;
        const double remaining = target - voltage_;
        const bool last = std::abs(remaining) <= step;
        const double change = last ? remaining : std::copysign(step, remaining);
        const double next = last ? target : voltage_ + change;
        if (target == 0 && last) {  // equilibrium has its own equations
            if (!start_from(state_, 0)) return Arrival::stopped;
            break;
        }
        State trial = state_;
        solver_.predict(trial, solver_.tangent(state_, is_seen_), change);
        if (solver_.system().series_resistance == 0) trial.contact_voltage = next;
        is_seen_ = is_fresh_ = solve(trial, next, {});
        if (!is_fresh_) {
            ++rejected_;
            step = 0.5 * std::min(step, std::abs(change));
            ceiling = std::abs(change);  // what has just failed is not tried again at once
            if (step < least_step) return climb(target, most_flux, should_stop);
            continue;
        }
        state_ = std::move(trial);
        voltage_ = next;
        if (report_.iterations <= easy_iterations)
            step = std::min(0.7 * ceiling, std::max(step, 2 * std::abs(change)));
        ceiling = std::min(1.3 * ceiling, 2 * most_step);
        step_ = step;
        if (std::abs(flux()) >= most_flux) return Arrival::current_limit;
    }
    return Arrival::arrived;
}

BiasWalk::Arrival BiasWalk::climb(double target, double most_flux, const std::function<bool()>& should_stop) {
    constexpr double least_growth = 1e-5, most_growth = 1;
    const double start = voltage_, direction = target > voltage_ ? 1 : -1;
    const double drop =
        solver_.system().series_resistance * constants::elementary_charge / solver_.system().thermal_voltage;
    const std::string failure = describe_failure(solver_.system(), start, report_);
    double growth = 0.1;
    for (int count = 0; count < 4000; ++count) {
        if (should_stop && should_stop()) return Arrival::interrupted;
        const double present = flux(), wanted = present * (1 + growth);
        if (!(present * direction > 0)) break;
        State trial = state_;
        NewtonOptions options;
        options.flux = wanted;
        is_seen_ = is_fresh_ = solve(trial, voltage_, options);
        if (!is_fresh_) {
            ++rejected_;
            growth *= 0.5;
            if (growth < least_growth) break;
            continue;
        }
        const double reached = trial.contact_voltage + drop * wanted;
        if ((reached - target) * direction > 0 && std::abs(wanted) < most_flux) {
            // The voltage has passed the target on the other branch: solve there, or come nearer first.
            State there = trial;
            if (drop == 0) there.contact_voltage = target;
            is_seen_ = is_fresh_ = solve(there, target, {});
            if (is_fresh_) {
                state_ = std::move(there);
                voltage_ = target;
                return Arrival::arrived;
            }
            growth *= 0.5;
            if (growth < least_growth) break;
            continue;
        }
        if (report_.iterations <= easy_iterations) growth = std::min(most_growth, 1.5 * growth);
        state_ = std::move(trial);
        voltage_ = reached;
        if (std::abs(wanted) >= most_flux) return Arrival::current_limit;
    }
    message_ = failure;
    return Arrival::stopped;
}

const Equations& BiasWalk::equations() {
    if (!is_fresh_) {
        // After a rejected step the workspace holds another state: bring back this one.
        require(assemble(solver_.system(), state_, solver_.equations()),
                "a converged state gives no finite number");
        is_fresh_ = true;
    }
    return solver_.equations();
}

double BiasWalk::flux() { return terminal_current(solver_.system(), state_, equations()).flux; }

double BiasWalk::capacitance() {
    const Equations& e = equations();
    const NewtonSolver::Tangent tangent = solver_.tangent(state_, is_seen_);
    const DiscreteSystem& system = solver_.system();
    double sum = 0;  // change of the holes [m^-2] per kT/q
    for (std::size_t cell = 0; cell < system.cells(); ++cell) {
        const EndState l = e.left(cell), r = e.right(cell);
        sum += 0.5 * system.mesh.width(cell) *
               (l.p * l.ratio_p * tangent.by_contact_voltage[3 * cell + 2] +
                r.p * r.ratio_p * tangent.by_contact_voltage[3 * cell + 5]);
    }
    return std::abs(sum) * constants::elementary_charge / system.thermal_voltage;
}

}  // namespace bandwright
