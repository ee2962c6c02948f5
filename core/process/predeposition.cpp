#include "core/process/predeposition.hpp"

#include <array>
#include <cmath>
#include <numbers>

#include "core/process/quadrature.hpp"

namespace bandwright {

using std::numbers::pi;

double predeposited(double x, double surface, double budget) {
    return surface * std::erfc(x / (2 * std::sqrt(budget)));
}

double predeposited_dose(double surface, double budget) { return 2 * surface * std::sqrt(budget / pi); }

double driven_in(double x, double dose, double budget) {
    return dose / std::sqrt(pi * budget) * std::exp(-x * x / (4 * budget));
}

double two_step(double x, double surface, double first, double second) {
    // With m = tan(t) the integrand is exp(-b / cos^2(t)) and the range finite for every ratio of budgets.
    // The factor exp(-b) stands outside, so that deep values keep their digits.
    const double b = x * x / (4 * (first + second)), end = std::atan(std::sqrt(first / second));
    const double narrow = 1 / std::sqrt(1 + b);
    const std::array<double, 2> points{narrow, 4 * narrow};
    const double sum = integral(
        [b](double t) {
            const double tangent = std::tan(t);
            return std::exp(-b * tangent * tangent);
        },
        0, end, points);
    return 2 * surface / pi * std::exp(-b) * sum;
}

double up_diffused(double x, double thickness, double concentration, double budget) {
    const double length = 2 * std::sqrt(budget);
    return 0.5 * concentration * (std::erfc((thickness - x) / length) + std::erfc((thickness + x) / length));
}

double down_diffused(double x, double thickness, double concentration, double budget) {
    const double length = 2 * std::sqrt(budget);
    return 0.5 * concentration * (std::erfc((x - thickness) / length) - std::erfc((x + thickness) / length));
}

}  // namespace bandwright
