// Diffused profiles: closed forms against quadrature, conservation of dose, the two-step integral, sample
// numbers.
//
// SPDX-License-Identifier: MIT
#include "core/process/diffusion.hpp"

#include <gtest/gtest.h>

#include <array>
#include <cmath>
#include <numbers>

#include "core/process/anneal.hpp"
#include "core/process/predeposition.hpp"
#include "core/process/quadrature.hpp"
#include "core/process/range_table.hpp"
#include "tests/unit/process/printed.hpp"

using namespace bandwright;

namespace {

constexpr double um = 1e-6, cm2 = 1e-4;

/// The dose between the surface and a depth [m^-2].
double dose_of(const std::vector<StartingPiece>& pieces, double budget, double thickness, double depth) {
    std::vector<double> points;
    for (int k = 1; k < 8; ++k) points.push_back(depth * k / 8);
    return integral([&](double x) { return diffused(pieces, x, budget, thickness); }, 0, depth, points,
                    1e-12);
}

/// The same starting profile, handed over as a function to be integrated.
StartingPiece as_function(const StartingPiece& piece) {
    if (const auto* g = std::get_if<GaussianPiece>(&piece))
        return AnyPiece{[g = *g](double x) {
                            const double z = (x - g.centre) / g.straggle;
                            return g.peak * std::exp(-0.5 * z * z);
                        },
                        std::max(g->from, g->centre - 13 * g->straggle),
                        std::min(g->to, g->centre + 13 * g->straggle),
                        {g->centre - 3 * g->straggle, g->centre, g->centre + 3 * g->straggle}};
    const auto c = std::get<ConstantPiece>(piece);
    return AnyPiece{[c](double) { return c.concentration; }, c.from, c.to, {}};
}

/// The depth at which a profile passes a value [m].
template <class F>
double crossing(F f, double level, double low, double high) {
    for (int k = 0; k < 200; ++k) {
        const double middle = 0.5 * (low + high);
        (f(middle) > level ? low : high) = middle;
    }
    return low;
}

}  // namespace

TEST(Diffused, closed_forms_equal_the_quadrature) {
    const std::vector<StartingPiece> pieces{
        GaussianPiece{1e25, 0.3 * um, 0.07 * um}, GaussianPiece{1e25, 0.05 * um, 0.07 * um, 0, 0.2 * um},
        GaussianPiece{1e25, 0.05 * um, 0.07 * um, 0.1 * um, 0.2 * um},
        ConstantPiece{1e24, 0.2 * um, 0.45 * um}, ConstantPiece{1e24, 0, 0.8 * um}};
    for (const StartingPiece& piece : pieces)
        for (const double thickness : {0.8 * um, 2 * um, everywhere})
            for (const double budget : {1e-17, 1e-15, 3e-14, 1e-12}) {
                const StartingPiece same = as_function(piece);
                double largest = 0;
                for (double x = 0; x <= 0.8 * um; x += 0.1 * um)
                    largest = std::max(largest, diffused({{piece}}, x, budget, thickness));
                for (double x = 0; x <= 0.8 * um; x += 0.0625 * um) {
                    const double closed = diffused({{piece}}, x, budget, thickness);
                    const double summed = diffused({{same}}, x, budget, thickness);
                    if (closed < 1e-20 * largest)
                        EXPECT_LT(summed, 1.1e-20 * largest);
                    else
                        EXPECT_NEAR(summed / closed, 1, 1e-10)
                            << piece.index() << " " << x << " " << budget << " " << thickness;
                }
            }
}

TEST(Diffused, dose_is_conserved) {
    std::vector<std::string> remarks;
    const double dose = 1e18, deep = 1 * um;
    const ImplantShape gaussian = GaussianShape{0.3 * um, 0.07 * um};
    const ImplantShape joined = joined_half_gaussians({0.3 * um, 0.07 * um, -0.6, {}}, remarks);
    const ImplantShape pearson = pearson_four({0.3 * um, 0.0746 * um, -1.05, 6.2}, remarks);
    for (const ImplantShape& shape : {gaussian, joined, pearson})
        for (const double shift : {0.0, 0.25 * um})
            for (const double budget : {1e-16, 1e-14, 1e-12, 1e-10}) {
                const auto cut = starting_pieces(shape, dose, shift, 0, deep);
                const double kept = dose * (share_above(shape, deep + shift) - share_above(shape, shift));
                EXPECT_NEAR(dose_of(cut, budget, deep, deep) / kept, 1, 1e-9)
                    << shape.index() << " " << shift << " " << budget;
            }
    // Uncut: what stuck out of the surface is folded back.
    const auto whole =
        starting_pieces(ImplantShape(GaussianShape{0.05 * um, 0.07 * um}), dose, 0, -everywhere, everywhere);
    for (const double budget : {0.0, 1e-14, 1e-10})
        EXPECT_NEAR(dose_of(whole, budget, deep, deep) / dose, 1, 1e-9);
    // Flat in the end.
    EXPECT_NEAR(diffused(whole, 0, 1e-6, deep) * deep / dose, 1, 1e-12);
    EXPECT_NEAR(diffused(whole, 0.7 * um, 1e-6, deep) * deep / dose, 1, 1e-12);
    // No flux through either wall: the change over a distance from it goes with the square of the distance.
    const double h = 1e-3 * um;
    for (const auto& [wall, inwards] : {std::pair{0.0, h}, std::pair{deep, -h}}) {
        const double N = diffused(whole, wall, 3e-14, deep);
        const double once = diffused(whole, wall + inwards, 3e-14, deep) - N;
        const double twice = diffused(whole, wall + 2 * inwards, 3e-14, deep) - N;
        EXPECT_NEAR(twice / once, 4, 1e-2);
    }
}

TEST(Diffused, a_zero_budget_leaves_the_profile) {
    const std::vector<StartingPiece> pieces{
        GaussianPiece{1e25, 0.05 * um, 0.07 * um, 0, 1 * um}, ConstantPiece{1e23, 0, 0.5 * um},
        AnyPiece{[](double x) { return 1e22 * std::exp(-x / um); }, 0, 1 * um, {}}};
    const auto start = [](double x) {
        const double z = (x - 0.05 * um) / (0.07 * um);
        return 1e25 * std::exp(-0.5 * z * z) + (x < 0.5 * um ? 1e23 : 0) + 1e22 * std::exp(-x / um);
    };
    for (const double x : {0.0, 0.1 * um, 0.4 * um, 0.6 * um, 1 * um}) {
        EXPECT_NEAR(diffused(pieces, x, 0, 1 * um) / start(x), 1, 1e-14) << x;
        EXPECT_NEAR(diffused(pieces, x, 1e-31, 1 * um) / start(x), 1, 1e-8) << x;
    }
}

TEST(Diffused, budgets_add) {
    std::vector<std::string> remarks;
    const ImplantShape joined = joined_half_gaussians({0.3 * um, 0.07 * um, -0.6, {}}, remarks);
    const auto pieces = starting_pieces(joined, 1e18, 0, 0, 1 * um);
    const std::vector<StartingPiece> again{
        AnyPiece{[&](double x) { return diffused(pieces, x, 4e-15, 1 * um); }, 0, 1 * um, {}}};
    for (const double x : {0.0, 0.17 * um, 0.3 * um, 0.66 * um, 1 * um})
        EXPECT_NEAR(diffused(again, x, 7e-15, 1 * um) / diffused(pieces, x, 11e-15, 1 * um), 1, 1e-10) << x;
}

// [Smith1958]
TEST(Diffused, an_annealed_predeposition_is_the_two_step_integral) {
    for (const double first : {1e-16, 1e-14})
        for (const double second : {2.5e-16, 3e-15, 1e-12}) {
            const double depth = 60 * std::sqrt(first);
            const std::vector<StartingPiece> pieces{
                AnyPiece{[&](double x) { return predeposited(x, 1e25, first); },
                         0,
                         depth,
                         {std::sqrt(first), 3 * std::sqrt(first), 10 * std::sqrt(first)}}};
            for (const double u : {0.0, 0.3, 1.0, 2.5, 5.0, 8.0}) {
                const double x = u * std::sqrt(first + second);
                EXPECT_NEAR(diffused(pieces, x, second, everywhere) / two_step(x, 1e25, first, second), 1,
                            1e-10)
                    << first << " " << second << " " << u;
            }
        }
}

TEST(Diffused, layers_agree_with_their_own_formulas) {
    const double S = 1e-14, t = 0.15 * um;
    const std::vector<StartingPiece> layer{ConstantPiece{1e22, 0, t}};
    for (const double x : {0.0, 0.1 * um, 0.3 * um, 0.5 * um})
        EXPECT_NEAR(diffused(layer, x, S, everywhere) / down_diffused(x, t, 1e22, S), 1, 1e-12);
}

// Boron 100 keV, 1e13 cm^-2, 1000 degC for 30 min with D = 0.76 exp(-3.46 eV / kT) cm^2/s, in 1e15 cm^-3.
TEST(Diffused, annealed_gaussian_of_a_textbook_example) {
    const double S = value({0.76 * cm2, 3.46, "", Status::yours}, 1273.15) * 1800, s = 0.0710 * um;
    const auto pieces =
        starting_pieces(ImplantShape(GaussianShape{0.2994 * um, s}), 1e17, 0, -everywhere, everywhere);
    const auto N = [&](double x) { return diffused(pieces, x, S, everywhere); };
    EXPECT_TRUE(prints_as(S / 1800 / cm2, "1.52885e-14"));
    EXPECT_TRUE(prints_as(std::sqrt(s * s + 2 * S) / um, "0.102688"));
    EXPECT_TRUE(prints_as(N(0.2994 * um) * 1e-6, "3.88499e17"));
    EXPECT_TRUE(prints_as(N(0) * 1e-6, "1.10786e16"));
    EXPECT_TRUE(prints_as(crossing(N, 1e21, 0.3 * um, 2 * um) / um, "0.654003"));
}

// Boron 80 keV, 1e14 cm^-2, 1000 degC for 30 min, in 1e16 cm^-3: the computed range, its anneal, its
// junction.
TEST(Diffused, the_whole_chain_from_implant_to_junction) {
    const auto moments = computed_moments("B", 80e3);
    const auto D = intrinsic_diffusivity("B");
    ASSERT_TRUE(moments && D);
    const std::vector<AnnealStep> steps{{1273.15, 1800}};
    const double S = thermal_budget(steps, *D), s = moments->straggle;
    const auto pieces =
        starting_pieces(ImplantShape(GaussianShape{moments->range, s}), 1e18, 0, -everywhere, everywhere);
    const auto N = [&](double x) { return diffused(pieces, x, S, everywhere); };
    EXPECT_TRUE(prints_as(S / cm2, "2.5146889e-11"));
    EXPECT_TRUE(prints_as(std::sqrt(s * s + 2 * S) / um, "0.0969463140"));
    EXPECT_TRUE(prints_as(N(moments->range) * 1e-6, "4.11508572e18"));
    EXPECT_TRUE(prints_as(N(0) * 1e-6, "1.89214991e17"));
    EXPECT_TRUE(prints_as(crossing(N, 1e22, 0.3 * um, 2 * um) / um, "0.602686375"));
}
