// Boundary equations: what replaces or joins the box equations at a contact. Not for: inner boundaries.
// SPDX-License-Identifier: MIT
#pragma once

#include <array>
#include <cmath>

#include "core/discretization/assemble.hpp"

namespace bandwright {

/// Replaces the rows of a contact node.
///
/// psi = contact voltage + neutral psi; a carrier without surface velocity: phi = contact voltage. A minority
/// carrier with surface velocity S keeps its box equation, closed by the flux into the metal S (c - c_0), c_0
/// the equilibrium density: J_n . outward = -q S (n - n_0), J_p . outward = +q S (p - p_0), written with
/// expm1 so that the excess does not cancel. Source: [SzeNg2007] (surface recombination velocity).
inline void apply_contact(const ContactCoefficients& contact, const State& state, std::size_t node,
                          bool is_top, Equations& equations) {
    BlockTridiagonal& matrix = equations.newton;
    double* source = &matrix.source[3 * node];
    std::array<double, 2>& own = is_top ? matrix.first_own : matrix.last_own;
    own = {};
    std::array<bool, 3>& is_set = is_top ? matrix.first_is_set : matrix.last_is_set;
    const double voltage = is_top ? state.contact_voltage : 0;
    const auto by_voltage = [&](std::size_t row, double value) {
        if (is_top) equations.by_contact_voltage[row] = value;
    };
    const auto set = [&](std::size_t row, double value, double target) {
        is_set[row] = true;
        source[row] = value - target;
        by_voltage(row, -1);
    };
    is_set = {false, false, false};
    set(0, state.psi(node), voltage + contact.neutral_psi);
    if (contact.electron_velocity) {
        // Density relative to equilibrium, with psi already at its contact value: only phi_n moves it.
        const double n0 = std::exp(std::fmax(contact.log_n, -600.0));
        const double excess = n0 * std::expm1(std::fmin(voltage - state.phi_n(node), 600.0));
        const double speed = *contact.electron_velocity;
        source[1] -= speed * excess;
        own[0] = speed * (n0 + excess);
        by_voltage(1, -speed * (n0 + excess));
    } else {
        set(1, state.phi_n(node), voltage);
    }
    if (contact.hole_velocity) {
        const double p0 = std::exp(std::fmax(contact.log_p, -600.0));
        const double excess = p0 * std::expm1(std::fmin(state.phi_p(node) - voltage, 600.0));
        const double speed = *contact.hole_velocity;
        source[2] += speed * excess;
        own[1] = speed * (p0 + excess);
        by_voltage(2, -speed * (p0 + excess));
    } else {
        set(2, state.phi_p(node), voltage);
    }
}

}  // namespace bandwright
