#include "solvers/newton.hpp"

#include <algorithm>
#include <cmath>

#include "core/base/constants.hpp"
#include "core/base/error.hpp"
#include "core/figures/terminal.hpp"
#include "solvers/kinsol_session.hpp"

namespace bandwright {

struct NewtonSolver::Work {
    const DiscreteSystem* system = nullptr;
    Equations equations, scratch;
    detail::KinsolSession kinsol;
    std::vector<double> step, by_voltage;
    TerminalCurrent current;
};

NewtonSolver::NewtonSolver(const DiscreteSystem& system) : work_(std::make_unique<Work>()) {
    work_->system = &system;
}
NewtonSolver::~NewtonSolver() = default;
NewtonSolver::NewtonSolver(NewtonSolver&&) noexcept = default;
NewtonSolver& NewtonSolver::operator=(NewtonSolver&&) noexcept = default;
Equations& NewtonSolver::equations() { return work_->equations; }
const DiscreteSystem& NewtonSolver::system() const { return *work_->system; }

namespace {

// A density that would fall to less than 1e-7 of itself falls by exp(16) at most in one step.
constexpr double least_change = -1 + 1e-7, deepest_fall = -16;
constexpr double small_change = 0.5;

double log_change(double relative_change) {
    return relative_change < least_change ? deepest_fall : std::log1p(relative_change);
}

// Whether every density changes by less than this share of itself. Such a step is taken straight, levels and
// all: the quasi-Fermi level of a floating region then stays as flat as the linear step has it, undisturbed
// by terms of second order at its edges, which a leakage current many decades below the majority flux could
// not mend.
bool is_small(const std::vector<double>& d) {
    for (std::size_t k = 0; k + 2 < d.size(); k += 3)
        if (std::abs(d[k] - d[k + 1]) > small_change || std::abs(d[k + 2] - d[k]) > small_change)
            return false;
    return true;
}

double capped(double change, double cap) {
    return std::abs(change) <= cap ? change
                                   : std::copysign(cap * (1 + std::log(std::abs(change) / cap)), change);
}

// A floating region's quasi-Fermi level hangs on a leakage current many decades below the majority flux; its
// rounding floor is then far above 1e-9. The step is at that floor when it has stopped shrinking for good
// while every residual is as small as rounding lets it be.
bool stalled_at_rounding(const NewtonReport& report) {
    constexpr std::size_t span = 4;
    if (report.steps.size() < span + 2 || report.residual > 1e-11) return false;
    const auto from = report.steps.end() - span;
    const double most = *std::max_element(from, report.steps.end()),
                 least = *std::min_element(from, report.steps.end());
    return most <= 1e-4 && least > 0.1 * most;
}

// Turns the matrix of a full system into that of Poisson's equation alone: the carriers' rows ask for no
// change.
void hold_carriers(Equations& equations) {
    BlockTridiagonal& matrix = equations.jacobian;
    for (std::size_t r = 1; r < 3; ++r) {
        for (std::size_t k = 0; k < 3; ++k) {
            for (Block& block : matrix.left) block[3 * r + k] = 0;
            for (Block& block : matrix.right) block[3 * r + k] = 0;
            for (Block& block : matrix.shunt) block[3 * r + k] = r == k ? 1 : 0;
        }
        for (std::size_t node = 0; node < matrix.blocks(); ++node) equations.balance[3 * node + r] = 0;
    }
}

// Slope of the (convex) energy of Poisson's equation along a change of psi, in units of the sum of its terms.
double energy_slope(const DiscreteSystem& system, const State& state, std::span<const double> change,
                    double share, Equations& scratch) {
    State trial = state;
    for (std::size_t node = 0; node < state.nodes(); ++node)
        trial.unknowns[3 * node] += share * change[3 * node];
    evaluate(system, trial, scratch);
    double slope = 0;
    for (std::size_t node = 1; node + 1 < system.nodes(); ++node) {
        const double residual =
            system.dielectric[node - 1] * (trial.psi(node - 1) - trial.psi(node)) +
            system.dielectric[node] * (trial.psi(node + 1) - trial.psi(node)) +
            0.5 * system.mesh.width(node - 1) *
                (scratch.right[node - 1].p - scratch.right[node - 1].n + system.net_right[node - 1]) +
            0.5 * system.mesh.width(node) *
                (scratch.left[node].p - scratch.left[node].n + system.net_left[node]);
        slope -= residual * change[3 * node];
    }
    return slope;
}

// Share of a Newton step at which the energy has stopped falling, 1 where the whole step is good.
double energy_share(const DiscreteSystem& system, const State& state, std::span<const double> change,
                    Equations& scratch) {
    const double at_start = energy_slope(system, state, change, 0, scratch);
    if (!(at_start < 0)) return 1;  // at the rounding floor
    double share = 1;
    for (int cut = 0; cut < 60; ++cut) {
        const double slope = energy_slope(system, state, change, share, scratch);
        if (slope <= 0.5 * std::abs(at_start)) return share;
        share *= slope > 1e3 * std::abs(at_start) ? 0.25 : 0.5;
    }
    return share;
}

// Series resistance [ohm m^2] times flux [m^-2 s^-1] as a voltage in kT/q.
double drop_per_flux(const DiscreteSystem& system) {
    return system.series_resistance * constants::elementary_charge / system.thermal_voltage;
}

}  // namespace

NewtonReport NewtonSolver::solve(State& state, double applied_voltage, const NewtonOptions& options) {
    Work& work = *work_;
    const DiscreteSystem& system = *work.system;
    const std::size_t size = 3 * system.nodes();
    require(state.unknowns.size() == size, "a state does not belong to its mesh");
    const double drop = drop_per_flux(system);
    const bool bordered = drop > 0;

    NewtonReport report;
    State trial = state;
    if (!bordered) trial.contact_voltage = applied_voltage;
    std::vector<double> unknowns = trial.unknowns;
    unknowns.push_back(trial.contact_voltage);
    work.step.resize(size);
    work.by_voltage.resize(size);

    bool done = false;
    const auto judge = [&] {
        if (report.steps.empty()) return;
        const double last = report.steps.back();
        const double before = report.steps.size() > 1 ? report.steps[report.steps.size() - 2] : INFINITY;
        const double next = last * std::min(1.0, last / before);
        if (last <= 1e-4 && (before < INFINITY ? next : last) <= options.tolerance) {
            report.status = NewtonStatus::converged;
            report.iteration_error = before < INFINITY ? next : last;
            done = true;
        } else if ((last <= 1e-6 && last > 0.3 * before && report.residual <= 1e-6) ||
                   stalled_at_rounding(report)) {
            report.status = NewtonStatus::converged_at_rounding;
            report.iteration_error =
                std::max(last, before < INFINITY && report.residual <= 1e-11 ? before : last);
            done = true;
        }
    };
    const auto residual = [&](std::span<const double> u, std::span<double> f) {
        std::copy(u.begin(), u.end() - 1, trial.unknowns.begin());
        trial.contact_voltage = u.back();
        if (!assemble(system, trial, work.equations)) return detail::Trial::not_finite;
        report.residual = 0;
        for (std::size_t k = 0; k < size; ++k)
            if (!options.equilibrium || k % 3 == 0)
                report.residual = std::max(report.residual, std::abs(work.equations.residual[k]));
        double border = 0;
        if (bordered) {
            work.current = terminal_current(system, trial, work.equations);
            border = trial.contact_voltage + drop * work.current.flux - applied_voltage;
        }
        judge();
        if (done) {
            std::fill(f.begin(), f.end(), 0.0);
        } else {
            std::copy(work.equations.residual.begin(), work.equations.residual.end(), f.begin());
            f.back() = border;
            if (report.steps.empty()) f.back() += 1e-200;  // a first guess is never taken unseen
        }
        return detail::Trial::good;
    };
    const auto step = [&](std::span<double> x) {
        ++report.iterations;
        if (options.equilibrium) hold_carriers(work.equations);
        if (work.equations.jacobian.factorize() != system.nodes()) {
            report.status = NewtonStatus::singular;
            return false;
        }
        std::vector<double>& d = work.step;
        for (std::size_t k = 0; k < size; ++k) d[k] = -work.equations.balance[k];
        work.equations.jacobian.solve(d);
        double change_of_contact = 0;
        if (bordered) {
            std::vector<double>& z = work.by_voltage;
            std::fill(z.begin(), z.end(), 0.0);
            for (int r = 0; r < 3; ++r)
                z[static_cast<std::size_t>(r)] =
                    -work.equations.by_contact_voltage[static_cast<std::size_t>(r)];
            work.equations.jacobian.solve(z);
            const double along = terminal_derivative(system, work.equations, work.current, d);
            const double slope = terminal_derivative(system, work.equations, work.current, z);
            change_of_contact =
                (applied_voltage - trial.contact_voltage - drop * (work.current.flux + along)) /
                (1 + drop * slope);
            for (std::size_t k = 0; k < size; ++k) d[k] += change_of_contact * z[k];
        }
        const double share = options.equilibrium ? energy_share(system, trial, d, work.scratch) : 1;
        const bool straight = options.straight_when_small && is_small(d);
        double worst = 0;
        for (std::size_t node = 0; node < system.nodes(); ++node) {
            const double psi = d[3 * node], rn = psi - d[3 * node + 1], rp = d[3 * node + 2] - psi;
            const double sizes[3] = {std::abs(psi), std::abs(rn), std::abs(rp)};
            const double moved = options.equilibrium ? share * psi : capped(psi, options.cap);
            if (options.equilibrium) {
                x[3 * node] = moved;
                x[3 * node + 1] = x[3 * node + 2] = 0;
                if (std::abs(psi) > worst) {
                    worst = std::abs(psi);
                    report.worst_node = node;
                    report.worst_unknown = 0;
                }
                continue;
            }
            x[3 * node] = moved;
            x[3 * node + 1] = moved - (straight ? rn : log_change(rn));
            x[3 * node + 2] = moved + (straight ? rp : log_change(rp));
            for (int k = 0; k < 3; ++k)
                if (sizes[k] > worst) {
                    worst = sizes[k];
                    report.worst_node = node;
                    report.worst_unknown = k;
                }
        }
        // Contacts take their values at once.
        if (options.equilibrium) {
            x[0] = d[0];
            x[size - 3] = d[size - 3];
        }
        const auto set_contact = [&](std::size_t node, const ContactCoefficients& contact) {
            x[3 * node] = d[3 * node];
            if (!contact.electron_velocity) x[3 * node + 1] = d[3 * node + 1];
            if (!contact.hole_velocity) x[3 * node + 2] = d[3 * node + 2];
        };
        if (!options.equilibrium) {
            set_contact(0, system.top);
            set_contact(system.nodes() - 1, system.bottom);
        }
        x[size] = change_of_contact;
        report.steps.push_back(worst);
        return std::isfinite(worst);
    };
    const std::string words = work.kinsol.solve(unknowns, options.most_iterations, residual, step);
    if (done) {
        std::copy(unknowns.begin(), unknowns.end() - 1, state.unknowns.begin());
        state.contact_voltage = unknowns.back();
        return report;
    }
    report.message = words;
    if (report.status != NewtonStatus::singular)
        report.status = words == "the equations give no finite number" ? NewtonStatus::not_finite
                                                                       : NewtonStatus::not_converged;
    return report;
}

NewtonSolver::Tangent NewtonSolver::tangent() const {
    const Work& work = *work_;
    Tangent tangent;
    tangent.by_contact_voltage.assign(3 * work.system->nodes(), 0.0);
    for (std::size_t r = 0; r < 3; ++r) tangent.by_contact_voltage[r] = -work.equations.by_contact_voltage[r];
    work.equations.jacobian.solve(tangent.by_contact_voltage);
    State unused;
    unused.unknowns.assign(3 * work.system->nodes(), 0.0);
    const TerminalCurrent current = terminal_current(*work.system, unused, work.equations);
    tangent.flux_by_contact_voltage =
        terminal_derivative(*work.system, work.equations, current, tangent.by_contact_voltage);
    tangent.contact_by_applied = 1 / (1 + drop_per_flux(*work.system) * tangent.flux_by_contact_voltage);
    return tangent;
}

void NewtonSolver::predict(State& state, const Tangent& tangent, double change) const {
    const double inner = change * tangent.contact_by_applied;
    const std::vector<double>& w = tangent.by_contact_voltage;
    for (std::size_t node = 0; node < state.nodes(); ++node) {
        const double psi = inner * w[3 * node], rn = psi - inner * w[3 * node + 1],
                     rp = inner * w[3 * node + 2] - psi;
        state.unknowns[3 * node] += psi;
        state.unknowns[3 * node + 1] += psi - log_change(rn);
        state.unknowns[3 * node + 2] += psi + log_change(rp);
    }
    state.contact_voltage += inner;
}

}  // namespace bandwright
