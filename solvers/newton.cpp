#include "solvers/newton.hpp"

#include <algorithm>
#include <array>
#include <cmath>

#include "core/base/constants.hpp"
#include "core/base/error.hpp"
#include "core/figures/terminal.hpp"
#include "solvers/kinsol_session.hpp"

namespace bandwright {

struct NewtonSolver::Work {
    const DiscreteSystem* system = nullptr;
    Equations equations;
    detail::KinsolSession kinsol;
    std::vector<double> step, by_voltage;
    TerminalCurrent current;
    State trial;
    std::vector<double> unknowns;
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

// ln(1 + r), by its series where r is small: the next term is below 1e-18 of it.
double log_change(double r) {
    if (std::abs(r) < 1e-3)
        return r * (1 - r * (1.0 / 2 - r * (1.0 / 3 - r * (1.0 / 4 - r * (1.0 / 5 - r / 6)))));
    return r < least_change ? deepest_fall : std::log1p(r);
}

// Relative changes of the densities that a change of (psi, phi_n - psi, phi_p - psi) means.
double electron_change(const double* gaps) { return -gaps[1]; }
double hole_change(const double* gaps) { return gaps[2]; }

double capped(double change, double cap) {
    return std::abs(change) <= cap ? change
                                   : std::copysign(cap * (1 + std::log(std::abs(change) / cap)), change);
}

// A density that is wrong by this factor shows a step too far; the next iterations would be wasted.
constexpr double run_away = 1e60;
// So many iterations and still so far away: a shorter way from the last solution is cheaper.
constexpr int soon = 15;
constexpr double far_away = 100;

// A step above this has not converged, whatever the balances say.
constexpr double most_at_rounding = 1e-4;

// Whether every balance is as small as rounding lets it be.
bool is_at_rounding(const DiscreteSystem& system, const State& state, const Equations& equations) {
    constexpr double several = 8;
    const std::vector<double> rounding = rounding_of_balance(system, state, equations);
    for (std::size_t k = 0; k < rounding.size(); ++k) {
        const bool at_contact = k < 3 || k + 3 >= rounding.size();
        if (!at_contact && std::abs(equations.newton.balance(k / 3, k % 3)) > several * rounding[k])
            return false;
    }
    return true;
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
    const bool bordered = drop > 0 || options.flux;

    NewtonReport report;
    State& trial = work.trial;
    trial = state;
    if (!bordered) trial.contact_voltage = applied_voltage;
    std::vector<double>& unknowns = work.unknowns;
    unknowns = trial.unknowns;
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
        } else if (last <= most_at_rounding && last > 0.3 * before &&
                   is_at_rounding(system, trial, work.equations)) {
            report.status = NewtonStatus::converged_at_rounding;
            report.iteration_error = std::max(last, before);
            done = true;
        }
    };
    const auto residual = [&](std::span<const double> u, std::span<double> f) {
        std::copy(u.begin(), u.end() - 1, trial.unknowns.begin());
        trial.contact_voltage = u.back();
        if (!assemble(system, trial, work.equations)) return detail::Trial::not_finite;
        double border = 0;
        if (bordered) {
            work.current = terminal_current(system, trial, work.equations);
            border = options.flux ? work.current.flux / *options.flux - 1
                                  : trial.contact_voltage + drop * work.current.flux - applied_voltage;
        }
        judge();
        // KINSOL sees the size of the last step: whether it has converged is decided above.
        std::fill(f.begin(), f.end(), 0.0);
        if (!done) f.back() = report.steps.empty() ? 1 : report.steps.back() + std::abs(border);
        return detail::Trial::good;
    };
    const auto step = [&](std::span<double> x) {
        ++report.iterations;
        std::vector<double>&d = work.step, &z = work.by_voltage;
        std::array<double, 3> pull;
        for (std::size_t r = 0; r < 3; ++r) pull[r] = -work.equations.by_contact_voltage[r];
        if (!work.equations.newton.solve(d, z, pull)) {
            report.status = NewtonStatus::singular;
            return false;
        }
        double change_of_contact = 0;
        if (bordered) {
            const double along = terminal_derivative(system, work.equations, work.current, d);
            const double slope = terminal_derivative(system, work.equations, work.current, z);
            change_of_contact =
                options.flux
                    ? (*options.flux - work.current.flux - along) / slope
                    : (applied_voltage - trial.contact_voltage - drop * (work.current.flux + along)) /
                          (1 + drop * slope);
            for (std::size_t k = 0; k < size; ++k) d[k] += change_of_contact * z[k];
        }
        double worst = 0;
        for (std::size_t node = 0; node < system.nodes(); ++node) {
            const double* gaps = &d[3 * node];
            const double rn = electron_change(gaps), rp = hole_change(gaps);
            const double sizes[3] = {std::abs(gaps[0]), std::abs(rn), std::abs(rp)};
            const double moved = capped(gaps[0], options.cap);
            x[3 * node] = moved;
            x[3 * node + 1] = moved - log_change(rn);
            x[3 * node + 2] = moved + log_change(rp);
            for (int k = 0; k < 3; ++k)
                if (sizes[k] > worst) {
                    worst = sizes[k];
                    report.worst_node = node;
                    report.worst_unknown = k;
                }
        }
        // Contacts take their values at once.
        const auto set_contact = [&](std::size_t node, const ContactCoefficients& contact) {
            const double* gaps = &d[3 * node];
            x[3 * node] = gaps[0];
            if (!contact.electron_velocity) x[3 * node + 1] = gaps[0] + gaps[1];
            if (!contact.hole_velocity) x[3 * node + 2] = gaps[0] + gaps[2];
        };
        set_contact(0, system.top);
        set_contact(system.nodes() - 1, system.bottom);
        x[size] = change_of_contact;
        report.steps.push_back(worst);
        if (report.iterations >= soon && worst > far_away) return false;
        return worst < run_away;
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

NewtonSolver::Tangent NewtonSolver::tangent(const State& state, bool is_seen) {
    Work& work = *work_;
    const DiscreteSystem& system = *work.system;
    Tangent tangent;
    if (is_seen) {
        tangent.by_contact_voltage = work.by_voltage;
    } else {
        require(assemble(system, state, work.equations), "a converged state gives no finite number");
        std::array<double, 3> pull;
        for (std::size_t r = 0; r < 3; ++r) pull[r] = -work.equations.by_contact_voltage[r];
        work.step.resize(3 * system.nodes());
        tangent.by_contact_voltage.resize(3 * system.nodes());
        if (!work.equations.newton.solve(work.step, tangent.by_contact_voltage, pull))
            tangent.by_contact_voltage.assign(3 * system.nodes(), 0.0);  // then the guess is the state itself
    }
    if (system.series_resistance == 0) return tangent;
    const TerminalCurrent current = terminal_current(system, state, work.equations);
    tangent.flux_by_contact_voltage =
        terminal_derivative(system, work.equations, current, tangent.by_contact_voltage);
    tangent.contact_by_applied = 1 / (1 + drop_per_flux(system) * tangent.flux_by_contact_voltage);
    return tangent;
}

void NewtonSolver::predict(State& state, const Tangent& tangent, double change) const {
    const double inner = change * tangent.contact_by_applied;
    const std::vector<double>& w = tangent.by_contact_voltage;
    for (std::size_t node = 0; node < state.nodes(); ++node) {
        const double gaps[3] = {inner * w[3 * node], inner * w[3 * node + 1], inner * w[3 * node + 2]};
        state.unknowns[3 * node] += gaps[0];
        state.unknowns[3 * node + 1] += gaps[0] - log_change(electron_change(gaps));
        state.unknowns[3 * node + 2] += gaps[0] + log_change(hole_change(gaps));
    }
    state.contact_voltage += inner;
}

}  // namespace bandwright
