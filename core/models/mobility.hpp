// Low-field mobility models of electrons and holes. Not for: velocity saturation.
// SPDX-License-Identifier: MIT
#pragma once

#include <string_view>
#include <variant>

#include "core/device/structure.hpp"

namespace bandwright {

enum class Carrier { electron, hole };

/// mu = mu(300 K) (300/T)^exponent, no doping dependence. Parameters: the material's electron_mobility,
/// hole_mobility.
struct ConstantMobility {
    static constexpr std::string_view name = "constant";
    double operator()(Carrier carrier, const Material& material, const Doping& doping,
                      double temperature) const;
};

/// Silicon, 250 to 500 K, to 1e20 cm^-3, +-13 %.
///
/// t = T/300: mu_n = 88 t^-0.57 + 7.4e8 T^-2.33 / (1 + (N/(1.26e17 t^2.4))^(0.88 t^-0.146));
/// holes 54.3, 1.36e8 T^-2.23, 2.35e17 [cm^2/Vs, cm^-3]; N = donors + acceptors. The last factor is an
/// exponent. Source: [Arora1982].
struct AroraMobility {
    static constexpr std::string_view name = "arora";
    double operator()(Carrier carrier, const Material& material, const Doping& doping,
                      double temperature) const;
};

/// Silicon, to 1e21 cm^-3. Only mu_max scales with temperature, (300/T)^2.285 for electrons and ^2.247 for
/// holes (our choice; the paper is for room temperature).
///
/// Electrons: mu_0 + (mu_max - mu_0)/(1 + (N/C_r)^a) - mu_1/(1 + (C_s/N)^b), phosphorus and arsenic sets
/// weighted by donor density. Holes: mu_0 exp(-p_c/N) + mu_max/(1 + (N/C_r)^a) - mu_1/(1 + (C_s/N)^b), boron
/// set (mu_max, not mu_max - mu_0). N = donors + acceptors. Source: [Masetti1983] table I.
struct MasettiMobility {
    static constexpr std::string_view name = "masetti";
    double operator()(Carrier carrier, const Material& material, const Doping& doping,
                      double temperature) const;
};

using Mobility = std::variant<ConstantMobility, AroraMobility, MasettiMobility>;

/// The model struct of a choice.
Mobility mobility_of(MobilityModel model);

/// Name of a model ("masetti"), and the choice of a name.
std::string_view mobility_name(MobilityModel model);
std::optional<MobilityModel> mobility_named(std::string_view name);

/// Low-field mobility [m^2/Vs]. A mobility that the user wrote for the material stands as it is.
/// doping: total concentrations at the point [m^-3]. Errors: none. Tests: unit/models/test_mobility.cpp
double mobility(Carrier carrier, MobilityModel model, const Material& material, const Doping& doping,
                double temperature);

/// The constants of a model as ledger lines.
Ledger mobility_ledger(MobilityModel model, const Material& material);

}  // namespace bandwright
