#include "core/device/doping.hpp"

#include <algorithm>
#include <cmath>

namespace bandwright {

namespace {

constexpr double ln10 = 2.302585092994045684;

double at(const UniformDoping& shape, double) { return shape.concentration; }

double at(const StepDoping& shape, double x) {
    return x >= shape.from && x < shape.to ? shape.concentration : 0;
}

double at(const GaussianDoping& shape, double x) {
    const auto bell = [&](double distance) {
        const double reduced = distance / shape.straggle;
        return std::exp(-0.5 * reduced * reduced);
    };
    if (shape.peak) return *shape.peak * bell(x - shape.depth);
    // The Gaussian and its mirror image at the surface together hold one full Gaussian over x >= 0.
    constexpr double root_two_pi = 2.5066282746310005024;
    return shape.dose.value_or(0) / (root_two_pi * shape.straggle) *
           (bell(x - shape.depth) + bell(x + shape.depth));
}

double along(Direction direction, double origin, double x) {
    return direction == Direction::down ? x - origin : origin - x;
}

double at(const ErfcDoping& shape, double x) {
    const double distance = along(shape.direction, shape.origin, x);
    return distance < 0 ? 0 : shape.surface * std::erfc(distance / shape.length);
}

double at(const ExponentialDoping& shape, double x) {
    const double distance = along(shape.direction, shape.origin, x);
    return distance < 0 ? 0 : shape.surface * std::exp(-distance / shape.decay_length);
}

double at(const LinearDoping& shape, double x) { return shape.gradient * (x - shape.zero_depth); }

// Slope at an inner or end point of a run of points, limited so that no piece overshoots
// [FritschCarlson1980].
double limited_slope(double before, double after, double width_before, double width_after) {
    if (before * after <= 0) return 0;
    const double w1 = 2 * width_after + width_before, w2 = width_after + 2 * width_before;
    return (w1 + w2) / (w1 / before + w2 / after);
}

double at(const MeasuredDoping& shape, double x) {
    const std::vector<double>& d = shape.depth;
    const std::vector<double>& c = shape.concentration;
    if (d.size() < 2 || x < d.front() || x > d.back()) return 0;
    const auto value = [&](std::size_t k) { return c[k] > shape.floor && c[k] > 0 ? c[k] : 0.0; };
    std::size_t k = static_cast<std::size_t>(std::upper_bound(d.begin(), d.end(), x) - d.begin());
    k = std::clamp<std::size_t>(k, 1, d.size() - 1) - 1;
    const double h = d[k + 1] - d[k], t = (x - d[k]) / h;
    const double left = value(k), right = value(k + 1);
    if (left == 0 || right == 0) return left + t * (right - left);
    const auto chord = [&](std::size_t j) {
        return (std::log10(value(j + 1)) - std::log10(value(j))) / (d[j + 1] - d[j]);
    };
    const auto slope = [&](std::size_t j) {
        const bool has_before = j > 0 && value(j - 1) > 0, has_after = j + 1 < d.size() && value(j + 1) > 0;
        if (has_before && has_after)
            return limited_slope(chord(j - 1), chord(j), d[j] - d[j - 1], d[j + 1] - d[j]);
        return has_before ? chord(j - 1) : chord(j);
    };
    const double a = std::log10(left), b = std::log10(right), t2 = t * t, t3 = t2 * t;
    const double y = (2 * t3 - 3 * t2 + 1) * a + (t3 - 2 * t2 + t) * h * slope(k) + (3 * t2 - 2 * t3) * b +
                     (t3 - t2) * h * slope(k + 1);
    return std::exp(ln10 * y);
}

double at(const ImplantDoping& shape, double x) {
    if (x < 0) return 0;
    const double all =
        shape.table ? value(*shape.table, x) : shape.dose * density(shape.shape, x + shape.film_shift);
    return shape.activation ? std::min(all, *shape.activation) : all;
}

double at(const DiffusedDoping& shape, double x) { return value(shape.table, x); }

std::vector<Scale> scales_of(const TabulatedProfile& table) {
    std::vector<Scale> list;
    for (std::size_t k = 0; k < table.piece.size(); ++k)
        if (!table.piece[k].empty)
            list.push_back(
                {0.5 * (table.edge[k] + table.edge[k + 1]), 0.5 * (table.edge[k + 1] - table.edge[k])});
    return list;
}

}  // namespace

std::string kind_of(const DopingShape& shape) {
    if (const auto* diffused = std::get_if<DiffusedDoping>(&shape)) return diffused->kind;
    return std::string(std::visit([](const auto& alternative) { return alternative.name; }, shape));
}

double concentration(const DopingShape& shape, double x) {
    return std::visit([x](const auto& alternative) { return at(alternative, x); }, shape);
}

std::vector<double> breakpoints(const DopingShape& shape) {
    if (const auto* step = std::get_if<StepDoping>(&shape)) return {step->from, step->to};
    if (const auto* erfc = std::get_if<ErfcDoping>(&shape)) return {erfc->origin};
    if (const auto* exponential = std::get_if<ExponentialDoping>(&shape)) return {exponential->origin};
    if (const auto* measured = std::get_if<MeasuredDoping>(&shape)) {
        if (measured->depth.empty()) return {};
        std::vector<double> points{measured->depth.front(), measured->depth.back()};
        // Where the profile starts from or falls to zero it has a kink.
        for (std::size_t k = 1; k + 1 < measured->depth.size(); ++k) {
            const auto empty = [&](std::size_t j) {
                return !(measured->concentration[j] > std::max(0.0, measured->floor));
            };
            if (empty(k) != empty(k - 1) || empty(k) != empty(k + 1)) points.push_back(measured->depth[k]);
        }
        return points;
    }
    return {};
}

std::vector<Scale> scales(const DopingShape& shape, double total_thickness) {
    if (const auto* gaussian = std::get_if<GaussianDoping>(&shape))
        return {{gaussian->depth, gaussian->straggle}};
    if (const auto* erfc = std::get_if<ErfcDoping>(&shape)) return {{erfc->origin, erfc->length}};
    if (const auto* exponential = std::get_if<ExponentialDoping>(&shape))
        return {{exponential->origin, exponential->decay_length}};
    if (const auto* linear = std::get_if<LinearDoping>(&shape))
        return {{linear->zero_depth, 0.01 * total_thickness}};
    if (const auto* measured = std::get_if<MeasuredDoping>(&shape)) {
        std::vector<Scale> list;
        for (std::size_t k = 0; k + 1 < measured->depth.size(); ++k)
            list.push_back({0.5 * (measured->depth[k] + measured->depth[k + 1]),
                            0.5 * (measured->depth[k + 1] - measured->depth[k])});
        return list;
    }
    if (const auto* diffused = std::get_if<DiffusedDoping>(&shape)) return scales_of(diffused->table);
    if (const auto* implant = std::get_if<ImplantDoping>(&shape)) {
        if (implant->table) return scales_of(*implant->table);
        return std::visit(
            [&](const auto& form) -> std::vector<Scale> {
                if constexpr (std::is_same_v<std::decay_t<decltype(form)>, JoinedHalfGaussians>)
                    return {{form.mode - implant->film_shift, form.above},
                            {form.mode - implant->film_shift, form.below}};
                else
                    return {{form.range - implant->film_shift, form.straggle}};
            },
            implant->shape);
    }
    return {};
}

}  // namespace bandwright
