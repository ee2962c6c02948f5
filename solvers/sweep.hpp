// Reaching a bias from a neighbouring one: tangent predictor, adaptive step, restored state on failure.
// Not for: which biases are wanted or what is read off them (analyses).
// SPDX-License-Identifier: MIT
#pragma once

#include <functional>
#include <string>

#include "solvers/newton.hpp"

namespace bandwright {

/// A solved state that can be walked to another bias.
///
/// Invariant: `state()` is converged at `voltage()` unless start() has failed.
class BiasWalk {
  public:
    explicit BiasWalk(const DiscreteSystem& system);

    /// Solves the equilibrium from local neutrality, or from a given guess at a voltage [kT/q].
    bool start();
    bool start_from(State guess, double applied_voltage);

    enum class Arrival { arrived, stopped, interrupted, current_limit };
    /// Walks to an applied voltage [kT/q]. Doubles its step when Newton converges easily; halves it and
    /// restores the last state when it does not. Below 1e-4 kT/q the curve is taken to turn back (a stack of
    /// junctions that fires): the current is raised instead until the voltage has passed the target. Gives up
    /// where that stalls too, and says where in message(). most_flux: |J|/q at which the walk ends on the way
    /// [m^-2 s^-1].
    Arrival walk_to(double applied_voltage, double most_flux, const std::function<bool()>& should_stop = {});

    const State& state() const { return state_; }
    double voltage() const { return voltage_; }
    const NewtonReport& report() const { return report_; }
    const std::string& message() const { return message_; }
    /// Equations of state(), evaluated again when needed.
    const Equations& equations();
    double flux();
    /// Charge of all holes per voltage between the contacts at the present state [F/m^2], from the tangent of
    /// the solved system; the charge of all electrons gives the same. Quasi-static: at equilibrium it is the
    /// capacitance of the depletion layers.
    double capacitance();

    long iterations() const { return iterations_; }
    long rejected() const { return rejected_; }
    const DiscreteSystem& system() const { return solver_.system(); }

  private:
    bool solve(State& guess, double applied_voltage, const NewtonOptions& options);
    // Where the voltage turns back: raises the current instead until the voltage has passed the target.
    Arrival climb(double target, double most_flux, const std::function<bool()>& should_stop);

    NewtonSolver solver_;
    State state_;
    double voltage_ = 0;
    double step_ = 40;
    NewtonReport report_;
    std::string message_;
    long iterations_ = 0, rejected_ = 0;
    // The workspace holds the equations of state_; its last Jacobian belongs to a step that ended there.
    bool is_fresh_ = false, is_seen_ = false;
};

/// One sentence on a solve that has not converged: bias, remaining change, its place and layer.
std::string describe_failure(const DiscreteSystem& system, double applied_voltage,
                             const NewtonReport& report);

}  // namespace bandwright
