// As-implanted shapes: their moments by quadrature, their shares, and published sample numbers.
//
// SPDX-License-Identifier: MIT
#include "core/process/implant.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <functional>
#include <numbers>

#include "tests/unit/process/printed.hpp"

using namespace bandwright;

namespace {

constexpr double um = 1e-6;

/// Integral of f over all depths by Simpson's rule in u, x = centre + scale sinh(u), split at the centre.
double over_all(const std::function<double(double)>& f, double centre, double scale) {
    const int half = 20000;
    const double h = 40.0 / half;
    double sum = 0;
    for (int k = -half; k <= half; ++k) {
        const double u = k * h, weight = k == -half || k == half ? 1 : (k % 2 == 0 ? 2 : 4);
        sum += weight * f(centre + scale * std::sinh(u)) * std::cosh(u);
    }
    return sum * scale * h / 3;
}

struct Measured {
    double total, range, straggle, skewness, kurtosis;
};
Measured measure(const ImplantShape& shape, double centre, double scale) {
    const auto moment = [&](double about, int n) {
        return over_all([&](double x) { return std::pow(x - about, n) * density(shape, x); }, centre, scale);
    };
    Measured m{};
    m.total = moment(0, 0);
    m.range = centre + moment(centre, 1);
    m.straggle = std::sqrt(moment(m.range, 2));
    m.skewness = moment(m.range, 3) / std::pow(m.straggle, 3);
    m.kurtosis = moment(m.range, 4) / std::pow(m.straggle, 4);
    return m;
}

void expect_moments(const ImplantShape& shape, const Moments& wanted, double centre) {
    const Measured m = measure(shape, centre, wanted.straggle);
    EXPECT_NEAR(m.total, 1, 1e-10);
    EXPECT_NEAR(m.range / wanted.range, 1, 1e-8);
    EXPECT_NEAR(m.straggle / wanted.straggle, 1, 1e-8);
    EXPECT_NEAR(m.skewness, wanted.skewness, 1e-7);
    if (wanted.kurtosis) {
        EXPECT_NEAR(m.kurtosis, *wanted.kurtosis, 1e-6);
    }
}

}  // namespace

TEST(Implant, shapes_have_the_moments_they_are_asked_for) {
    std::vector<std::string> remarks;
    for (const Moments& wanted :
         {Moments{0.3 * um, 0.07 * um, 0, {}}, Moments{0.3 * um, 0.07 * um, -0.6, {}},
          Moments{0.03 * um, 0.011 * um, 0.9, {}}, Moments{0.3 * um, 0.07 * um, 1e-4, {}}}) {
        const ImplantShape shape = shape_from(wanted, remarks);
        const auto* joined = std::get_if<JoinedHalfGaussians>(&shape);
        EXPECT_EQ(joined != nullptr, wanted.skewness != 0);
        expect_moments(shape, wanted, joined ? joined->mode : wanted.range);
    }
    for (const Moments& wanted :
         {Moments{0.3 * um, 0.0746 * um, -1.05, 6.2}, Moments{0.1 * um, 0.04 * um, 0.3, 3.5},
          Moments{0.1 * um, 0.04 * um, 0, 3.5}, Moments{0.1 * um, 0.04 * um, 0, 3.04}}) {
        const ImplantShape shape = shape_from(wanted, remarks);
        ASSERT_TRUE(std::holds_alternative<PearsonFour>(shape));
        expect_moments(shape, wanted, wanted.range);
    }
    EXPECT_TRUE(remarks.empty());
}

TEST(Implant, joined_half_gaussians_of_known_halves) {
    const JoinedHalfGaussians halves{0, 1.3, 0.8};
    const Measured m = measure(halves, 0, 1);
    EXPECT_NEAR(m.total, 1, 1e-11);
    EXPECT_TRUE(prints_as(m.range, "-0.39894228"));
    EXPECT_TRUE(prints_as(m.straggle * m.straggle, "1.1308451"));
    EXPECT_TRUE(prints_as(m.skewness * std::pow(m.straggle, 3), "-0.44215167"));
    std::vector<std::string> remarks;
    const JoinedHalfGaussians back = joined_half_gaussians({m.range, m.straggle, m.skewness, {}}, remarks);
    EXPECT_NEAR(back.mode, 0, 1e-7);
    EXPECT_NEAR(back.above, 1.3, 1e-7);
    EXPECT_NEAR(back.below, 0.8, 1e-7);
}

TEST(Implant, pearson_sample_numbers) {
    std::vector<std::string> remarks;
    const PearsonFour deep = pearson_four({0.3 * um, 0.0746 * um, -1.05, 6.2}, remarks);
    EXPECT_TRUE(prints_as(density(deep, 0.3 * um) * um, "5.8161738"));
    EXPECT_TRUE(prints_as(lowest_pearson_kurtosis(-1.05), "5.1833594"));
    const PearsonFour shallow = pearson_four({0.1 * um, 0.04 * um, 0.3, 3.5}, remarks);
    EXPECT_TRUE(prints_as(density(shallow, 0.1 * um) * um, "10.348703"));
    EXPECT_TRUE(remarks.empty());
}

// df/dx = (y - a) f / (b0 + b1 y + b2 y^2): the density against its own differential equation.
TEST(Implant, pearson_density_solves_its_equation) {
    const double s = 0.0746 * um, g = -1.05, beta = 6.2, A = 10 * beta - 12 * g * g - 18;
    const double a = -s * g * (beta + 3) / A, b0 = -s * s * (4 * beta - 3 * g * g) / A;
    const double b2 = -(2 * beta - 3 * g * g - 6) / A;
    std::vector<std::string> remarks;
    const ImplantShape shape = pearson_four({0.3 * um, s, g, beta}, remarks);
    for (const double y : {-5 * s, -s, 0.3 * s, s, 2 * s, 6 * s}) {
        const double h = 1e-4 * s, x = 0.3 * um + y;
        const double slope = (std::log(density(shape, x + h)) - std::log(density(shape, x - h))) / (2 * h);
        EXPECT_NEAR(slope * s, (y - a) * s / (b0 + a * y + b2 * y * y), 1e-6) << y / s;
    }
}

TEST(Implant, what_cannot_be_represented_is_cut_and_reported) {
    std::vector<std::string> remarks;
    const JoinedHalfGaussians joined = joined_half_gaussians({0.3 * um, 0.07 * um, -1.5, {}}, remarks);
    ASSERT_EQ(remarks.size(), 1u);
    EXPECT_NE(remarks[0].find("-1.5"), std::string::npos);
    EXPECT_NE(remarks[0].find("-0.99"), std::string::npos);
    expect_moments(joined, {0.3 * um, 0.07 * um, -0.99, {}}, joined.mode);

    remarks.clear();
    const double lowest = 1.01 * lowest_pearson_kurtosis(-1.05);
    const PearsonFour raised = pearson_four({0.3 * um, 0.07 * um, -1.05, 4.29}, remarks);
    ASSERT_EQ(remarks.size(), 1u);
    EXPECT_NE(remarks[0].find("5.183"), std::string::npos) << remarks[0];
    expect_moments(raised, {0.3 * um, 0.07 * um, -1.05, lowest}, 0.3 * um);
    remarks.clear();
    EXPECT_TRUE(std::isfinite(density(pearson_four({0.3 * um, 0.07 * um, 7, 50}, remarks), 0.3 * um)));
    EXPECT_EQ(remarks.size(), 2u);
}

TEST(Implant, shares_are_the_integral_of_the_density) {
    std::vector<std::string> remarks;
    for (const ImplantShape& shape :
         {ImplantShape(GaussianShape{0.3 * um, 0.07 * um}),
          ImplantShape(JoinedHalfGaussians{0.33 * um, 0.09 * um, 0.05 * um}),
          ImplantShape(pearson_four({0.3 * um, 0.0746 * um, -1.05, 6.2}, remarks)),
          ImplantShape(pearson_four({0.3 * um, 0.07 * um, 0, 3.04}, remarks))}) {
        for (const double x : {0.0, 0.2 * um, 0.3 * um, 0.36 * um, 0.5 * um}) {
            const double h = 1e-3 * um;
            const double above = share_above(shape, x), below = share_below(shape, x);
            EXPECT_NEAR(above + below, 1, 1e-14);
            // Simpson's rule over a short step; the joined shape's kink lies between the depths.
            const double step =
                h / 6 * (density(shape, x) + 4 * density(shape, x + h / 2) + density(shape, x + h));
            EXPECT_NEAR(share_above(shape, x + h) - above, step, 1e-10);
        }
        EXPECT_NEAR(share_above(shape, 100 * um), 1, 1e-12);
        EXPECT_NEAR(share_below(shape, -100 * um), 1, 1e-12);
        const double tail = share_below(shape, 0.6 * um);
        EXPECT_GT(tail, 0);
        EXPECT_LT(tail, 1e-2);
    }
    EXPECT_DOUBLE_EQ(share_above(GaussianShape{0.3 * um, 0.07 * um}, 0.3 * um), 0.5);
    EXPECT_NEAR(share_above(JoinedHalfGaussians{0, 0.9, 0.5}, 0), 0.9 / 1.4, 1e-15);
    // A tail keeps its digits: 8 straggles out the normal distribution has 6.22096e-16 left.
    EXPECT_TRUE(prints_as(share_below(GaussianShape{0, 1}, 8), "6.22096e-16"));
}

// Boron 100 keV, 1e13 cm^-2, in 1e15 cm^-3; and 5e14 cm^-2 with a straggle of 0.07 um.
TEST(Implant, peak_and_junction_of_a_gaussian) {
    const ImplantShape shape = GaussianShape{0.2994 * um, 0.0710 * um};
    const double peak = 1e13 * density(shape, 0.2994 * um) / 100;  // 1/m -> 1/cm
    EXPECT_TRUE(prints_as(peak, "5.61891e17"));
    double low = 0.3 * um, high = 1 * um;
    for (int k = 0; k < 200; ++k) {
        const double middle = 0.5 * (low + high);
        (1e13 * density(shape, middle) / 100 > 1e15 ? low : high) = middle;
    }
    EXPECT_TRUE(prints_as(low / um, "0.55205"));
    EXPECT_TRUE(prints_as(5e14 * density(GaussianShape{0, 0.07 * um}, 0) / 100, "2.8496e19"));
}
