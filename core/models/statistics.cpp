#include "core/models/statistics.hpp"

#include <algorithm>
#include <cmath>

#include "core/base/constants.hpp"
#include "core/models/fermi_integral.hpp"

namespace bandwright {

namespace {

// Boltzmann: psi/U_T measured from the intrinsic point is asinh(N / 2 nie), by logarithms where nie
// underflows.
double boltzmann_reduced(const Bands& bands, double net_doping) {
    const double log_half_intrinsic = 0.5 * bands.log_intrinsic_squared;
    if (net_doping == 0) return 0;
    const double log_argument = std::log(std::abs(net_doping)) - log_half_intrinsic - std::log(2.0);
    // asinh(x) = ln(2x) + 1/(4x^2) - ...; beyond exp(20) the correction is below rounding.
    const double size = log_argument > 20 ? log_argument + std::log(2.0) : std::asinh(std::exp(log_argument));
    return std::copysign(size, net_doping);
}

}  // namespace

double neutral_potential(const Bands& bands, Statistics statistics, double temperature, double net_doping) {
    const double kT = constants::thermal_voltage(temperature);
    const double log_Nc = std::log(bands.Nc), log_Nv = std::log(bands.Nv);
    const double affinity = bands.electron_affinity / kT,
                 ionization = (bands.electron_affinity + bands.bandgap) / kT;
    double psi = boltzmann_reduced(bands, net_doping) + 0.5 * bands.log_intrinsic_squared - log_Nc - affinity;
    if (statistics == Statistics::boltzmann) return psi * kT;
    // Fermi-Dirac: Newton on the logarithm of the majority balance, which is nearly straight; minority as it
    // comes.
    const bool n_side = net_doping >= 0;
    for (int step = 0; step < 60; ++step) {
        const Degeneracy dn = degeneracy(psi + affinity), dp = degeneracy(-psi - ionization);
        const double log_n = log_Nc + psi + affinity + dn.log_gamma,
                     log_p = log_Nv - psi - ionization + dp.log_gamma;
        const double n = std::exp(std::clamp(log_n, -700.0, 700.0)),
                     p = std::exp(std::clamp(log_p, -700.0, 700.0));
        const double left = n_side ? n : p, right = n_side ? p + net_doping : n - net_doping;
        const double slope = n_side ? dn.ratio + p * dp.ratio / right : -(dp.ratio + n * dn.ratio / right);
        const double change = -(std::log(left) - std::log(right)) / slope;
        psi += std::clamp(change, -50.0, 50.0);
        if (std::abs(change) < 1e-15 * std::max(1.0, std::abs(psi))) break;
    }
    return psi * kT;
}

}  // namespace bandwright
