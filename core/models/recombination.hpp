// Recombination rates at one point, templated on the scalar. Not for: lifetimes and their doping dependence.
// SPDX-License-Identifier: MIT
#pragma once

#include <string_view>

#include "core/models/local_state.hpp"

namespace bandwright {

/// R = Pi / (tau_p (n + n1) + tau_n (p + p1)) [m^-3 s^-1]; lifetimes [s]. Source: [ShockleyRead1952],
/// [Hall1952].
struct ShockleyReadHall {
    static constexpr std::string_view name = "srh";
    double tau_n, tau_p;
    template <class S>
    S operator()(const LocalState<S>& s) const {
        return s.excess_product / (tau_p * (s.n + s.n1) + tau_n * (s.p + s.p1));
    }
};

/// R = (C_n n + C_p p) Pi [m^-3 s^-1]; coefficients [m^6/s]. Source: [DziewiorSchmid1977].
struct Auger {
    static constexpr std::string_view name = "auger";
    double C_n, C_p;
    template <class S>
    S operator()(const LocalState<S>& s) const {
        return (C_n * s.n + C_p * s.p) * s.excess_product;
    }
};

/// R = B Pi [m^-3 s^-1]; coefficient [m^3/s]. Source: [Trupke2003].
struct Radiative {
    static constexpr std::string_view name = "radiative";
    double B;
    template <class S>
    S operator()(const LocalState<S>& s) const {
        return B * s.excess_product;
    }
};

}  // namespace bandwright
