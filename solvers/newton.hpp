// One nonlinear solve at one bias. Not for: reaching a bias (sweep.hpp).
// SPDX-License-Identifier: MIT
#pragma once

#include <memory>
#include <optional>
#include <string>
#include <vector>

#include "core/discretization/assemble.hpp"

namespace bandwright {

/// Why a solve ended.
enum class NewtonStatus {
    /// The last step was small and shrinking as Newton's method does; the state is updated.
    converged,
    /// The step stopped shrinking with every balance at its own rounding error; the state is updated.
    converged_at_rounding,
    /// Iterations used up or the iterate ran away; the state is as it was before the call.
    not_converged,
    /// The linear system is singular; the state is as it was before the call.
    singular,
    /// The equations gave no finite number; the state is as it was before the call.
    not_finite
};

struct NewtonReport {
    NewtonStatus status = NewtonStatus::not_converged;
    int iterations = 0;
    /// Largest undamped step of each iteration: change of psi [kT/q] or relative change of a density.
    std::vector<double> steps;
    /// Estimated remaining relative error of the densities (and of psi in kT/q).
    double iteration_error = 0;
    /// Where the last step was largest: node, and 0 psi, 1 electrons, 2 holes.
    std::size_t worst_node = 0;
    int worst_unknown = 0;
    std::string message;
    bool converged() const {
        return status == NewtonStatus::converged || status == NewtonStatus::converged_at_rounding;
    }
};

struct NewtonOptions {
    /// A solve with more iterations than this has not converged.
    int most_iterations = 40;
    /// Cap on the change of psi in one step [kT/q]: fewest iterations over ten devices among 1, 3, 10, 100,
    /// none.
    double cap = 10;
    /// Converged when the step that would come next is predicted below this.
    double tolerance = 1e-10;
    /// Hold the terminal flux J/q [m^-2 s^-1] at this and find the voltage; the applied one is not looked at.
    std::optional<double> flux;
};

/// Solves one system again and again: keeps its workspace and last factorisation.
///
/// Newton's method on psi, phi_n, phi_p, where the *densities* take the Newton step: with r the relative
/// change of a density, phi moves by (step of psi) - ln(1 + r). Source: derived; why in DEVELOPERS.md,
/// numerics notebook.
class NewtonSolver {
  public:
    explicit NewtonSolver(const DiscreteSystem& system);
    ~NewtonSolver();
    NewtonSolver(NewtonSolver&&) noexcept;
    NewtonSolver& operator=(NewtonSolver&&) noexcept;

    /// Solves at an applied voltage [kT/q] from `state`, updated only when converged.
    NewtonReport solve(State& state, double applied_voltage, const NewtonOptions& options = {});

    /// Derivative of psi, phi_n - psi, phi_p - psi with respect to the contact voltage (size 3 nodes), and of
    /// the contact voltage with respect to the applied one (1 without series resistance).
    struct Tangent {
        std::vector<double> by_contact_voltage;
        double contact_by_applied = 1;
        /// dJ/dV_contact / q [m^-2 s^-1 per kT/q].
        double flux_by_contact_voltage = 0;
    };
    /// Tangent at a converged state; `is_seen`: the last solve ended there and its last Jacobian serves.
    Tangent tangent(const State& state, bool is_seen);

    /// Moves a state along a tangent by a change of the applied voltage [kT/q].
    void predict(State& state, const Tangent& tangent, double change) const;

    /// Equations of the last state seen (densities, fluxes, rates).
    Equations& equations();
    const DiscreteSystem& system() const;

  private:
    struct Work;
    std::unique_ptr<Work> work_;
};

}  // namespace bandwright
