#include "solvers/equilibrium.hpp"

#include <algorithm>
#include <cmath>

namespace bandwright {

namespace {

// A density e^m too high falls by e in an iteration; band steps of several eV at 77 K make m several hundred.
constexpr int most_iterations = 2000;
constexpr double tolerance = 1e-10;        // [kT/q]
constexpr double most_at_rounding = 1e-4;  // [kT/q] a step above this has not converged

// Newton's step for the potentials [kT/q]: the elimination of BlockTridiagonal in one unknown a node, from
// the top; letters as there.
std::vector<double> newton_step(const BlockTridiagonal& matrix) {
    const std::size_t nodes = matrix.blocks();
    std::vector<double> step(nodes), coupling(nodes, 0.0);
    step[0] = -matrix.source[0];
    step[nodes - 1] = -matrix.source[3 * (nodes - 1)];
    double admittance = matrix.dielectric[0];
    double carried = matrix.potential_flux[0] - matrix.dielectric[0] * step[0];
    for (std::size_t k = 1; k + 1 < nodes; ++k) {
        const double conductance = matrix.dielectric[k], flux = matrix.potential_flux[k];
        const double m = admittance + matrix.potential_by_both[k], c = carried - matrix.source[3 * k];
        const double y = (flux - c) / (conductance + m);
        coupling[k] = conductance / (conductance + m);
        admittance = m * coupling[k];
        const bool is_outside = std::abs(c) + std::abs(m * y) < std::abs(flux) + std::abs(conductance * y);
        carried = is_outside ? c + m * y : flux - conductance * y;
        step[k] = y;
    }
    for (std::size_t k = nodes - 1; k-- > 1;) step[k] += coupling[k] * step[k + 1];
    return step;
}

State moved(const State& state, const std::vector<double>& step, double share) {
    State trial = state;
    for (std::size_t node = 0; node < step.size(); ++node) trial.unknowns[3 * node] += share * step[node];
    return trial;
}

// Slope of the energy along a step, in units of the sum of its terms.
double energy_slope(const Equations& equations, const std::vector<double>& step) {
    double slope = 0;
    for (std::size_t node = 1; node + 1 < step.size(); ++node)
        slope -= equations.newton.balance(node, 0) * step[node];
    return slope;
}

bool is_at_rounding(const DiscreteSystem& system, const State& state, const Equations& equations) {
    constexpr double several = 8;
    const std::vector<double> rounding = rounding_of_balance(system, state, equations);
    for (std::size_t node = 1; node + 1 < system.nodes(); ++node)
        if (std::abs(equations.newton.balance(node, 0)) > several * rounding[3 * node]) return false;
    return true;
}

}  // namespace

NewtonReport solve_equilibrium(const DiscreteSystem& system, State& state, Equations& equations) {
    NewtonReport report;
    State now = state;
    for (std::size_t node = 0; node < now.nodes(); ++node)
        now.unknowns[3 * node + 1] = now.unknowns[3 * node + 2] = 0;
    // Contacts take their values at once; the energy has its two ends fixed then.
    now.contact_voltage = 0;
    now.unknowns[0] = system.top.neutral_psi;
    now.unknowns[3 * (now.nodes() - 1)] = system.bottom.neutral_psi;
    bool finite = assemble(system, now, equations);
    while (finite && report.iterations < most_iterations) {
        ++report.iterations;
        const std::vector<double> step = newton_step(equations.newton);
        double worst = 0;
        for (std::size_t node = 0; node < step.size(); ++node)
            if (std::abs(step[node]) > worst) {
                worst = std::abs(step[node]);
                report.worst_node = node;
            }
        const double before = report.steps.empty() ? INFINITY : report.steps.back();
        report.steps.push_back(worst);
        const double at_start = energy_slope(equations, step);
        double share = 1;
        State trial = moved(now, step, share);
        finite = assemble(system, trial, equations);
        for (int cut = 0; cut < 60 && at_start < 0; ++cut) {
            const double slope = finite ? energy_slope(equations, step) : INFINITY;
            if (slope <= 0.5 * std::abs(at_start)) break;
            share *= slope > 1e3 * std::abs(at_start) ? 0.25 : 0.5;
            trial = moved(now, step, share);
            finite = assemble(system, trial, equations);
        }
        now = std::move(trial);
        if (!finite || !std::isfinite(worst)) break;
        const double next = worst * std::min(1.0, worst / before);
        if (share == 1 && worst <= 1e-4 && next <= tolerance) {
            report.status = NewtonStatus::converged;
            report.iteration_error = next;
        } else if (worst <= most_at_rounding && worst > 0.3 * before &&
                   is_at_rounding(system, now, equations)) {
            report.status = NewtonStatus::converged_at_rounding;
            report.iteration_error = worst;
        }
        if (report.converged()) {
            state = std::move(now);
            return report;
        }
    }
    report.status = finite ? NewtonStatus::not_converged : NewtonStatus::not_finite;
    report.message = finite ? "the iterations are used up" : "the equations give no finite number";
    return report;
}

}  // namespace bandwright
