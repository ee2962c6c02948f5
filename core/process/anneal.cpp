#include "core/process/anneal.hpp"

#include <array>
#include <cmath>

#include "core/base/constants.hpp"

namespace bandwright {

namespace {

constexpr double from_cm2 = 1e-4;  // cm^2/s -> m^2/s
constexpr double cold = 873.15;    // 600 degC: convention
constexpr double longest_ramp_step = 1;

/// D0 [cm^2/s], Ea [eV] [Plummer2000].
struct Row {
    std::string_view dopant;
    double D0, Ea;
};
constexpr std::array<Row, 7> rows{{{"B", 1.0, 3.5},
                                   {"P", 4.70, 3.68},
                                   {"As", 9.17, 3.99},
                                   {"Sb", 4.58, 3.88},
                                   {"Al", 1.385, 3.41},
                                   {"Ga", 0.374, 3.39},
                                   {"In", 0.785, 3.63}}};

/// Integral of D over one ramp [m^2].
double ramp_budget(const AnnealStep& step, const Diffusivity& diffusivity) {
    if (!(step.ramp > 0) || step.temperature <= cold) return 0;
    const double count = std::ceil(step.ramp / longest_ramp_step);
    double sum = 0.5 * (value(diffusivity, cold) + value(diffusivity, step.temperature));
    for (double k = 1; k < count; ++k)
        sum += value(diffusivity, cold + (step.temperature - cold) * k / count);
    return sum * step.ramp / count;
}

}  // namespace

std::optional<Diffusivity> intrinsic_diffusivity(std::string_view dopant) {
    if (dopant == "BF2") dopant = "B";
    for (const Row& row : rows)
        if (row.dopant == dopant)
            return Diffusivity{row.D0 * from_cm2, row.Ea, "Plummer2000, table of intrinsic diffusivities",
                               Status::from_memory};
    return std::nullopt;
}

double value(const Diffusivity& diffusivity, double temperature) {
    return diffusivity.D0 * std::exp(-diffusivity.Ea / constants::thermal_voltage(temperature));
}

double thermal_budget(std::span<const AnnealStep> steps, const Diffusivity& diffusivity) {
    double sum = 0;
    for (const AnnealStep& step : steps)
        sum += value(diffusivity, step.temperature) * step.time + 2 * ramp_budget(step, diffusivity);
    return sum;
}

}  // namespace bandwright
