// Diffusivities, thermal budgets and the closed-form diffusion profiles against printed numbers.
//
// SPDX-License-Identifier: MIT
#include "core/process/anneal.hpp"

#include <gtest/gtest.h>

#include <array>
#include <cmath>
#include <numbers>
#include <vector>

#include "core/base/constants.hpp"
#include "core/process/predeposition.hpp"
#include "core/process/quadrature.hpp"
#include "tests/unit/process/printed.hpp"

using namespace bandwright;

namespace {

constexpr double um = 1e-6, cm2 = 1e-4;  // m, and m^2 per cm^2
constexpr double celsius = 273.15;

Diffusivity own(double D0, double Ea) { return {D0 * cm2, Ea, "", Status::yours}; }

/// The depth at which a falling function passes a value [m].
template <class F>
double crossing(F f, double level, double deepest) {
    double low = 0, high = deepest;
    for (int k = 0; k < 200; ++k) {
        const double middle = 0.5 * (low + high);
        (f(middle) > level ? low : high) = middle;
    }
    return low;
}

}  // namespace

// The constants of [Plummer2000], evaluated at 900, 1000 and 1100 degC with 30 digits.
TEST(Diffusivity, intrinsic_values) {
    struct Row {
        const char* dopant;
        std::array<const char*, 3> printed;
    };
    const std::vector<Row> rows{
        {"B", {"9.209189583e-16", "1.397049388e-14", "1.426232265e-13"}},
        {"P", {"7.295426031e-16", "1.272851242e-14", "1.464355325e-13"}},
        {"As", {"6.631041518e-17", "1.472009935e-15", "2.080397047e-14"}},
        {"Sb", {"9.831752352e-17", "2.003747924e-15", "2.632496606e-14"}},
        {"Al", {"3.106744180e-15", "4.394682618e-14", "4.226305163e-13"}},
        {"Ga", {"1.022459365e-15", "1.424031392e-14", "1.351410560e-13"}},
        {"In", {"1.998109544e-16", "3.353319973e-15", "3.731898622e-14"}},
    };
    const std::array<double, 3> temperatures{900, 1000, 1100};
    for (const Row& row : rows) {
        const auto D = intrinsic_diffusivity(row.dopant);
        ASSERT_TRUE(D) << row.dopant;
        EXPECT_EQ(D->status, Status::from_memory);
        EXPECT_TRUE(D->source.starts_with("Plummer2000"));
        for (std::size_t k = 0; k < 3; ++k)
            EXPECT_TRUE(prints_as(value(*D, temperatures[k] + celsius) / cm2, row.printed[k])) << row.dopant;
    }
    EXPECT_EQ(intrinsic_diffusivity("BF2")->Ea, 3.5);
    EXPECT_FALSE(intrinsic_diffusivity("N"));
}

// Other published sets, sums of D0 exp(-Ea/kT), at 900, 1000, 1100 and 1200 degC, from memory.
TEST(Diffusivity, arithmetic_of_other_sets) {
    struct Row {
        std::vector<std::array<double, 2>> terms;
        std::array<const char*, 4> printed;
    };
    const std::vector<Row> rows{
        {{{0.76, 3.46}}, {"1.0396e-15", "1.5289e-14", "1.5199e-13", "1.1062e-12"}},
        {{{3.85, 3.66}}, {"7.2834e-16", "1.2512e-14", "1.4204e-13", "1.1595e-12"}},
        {{{0.066, 3.44}, {12.0, 4.05}}, {"1.5797e-16", "2.7080e-15", "3.2026e-14", "2.7986e-13"}},
        {{{0.214, 3.65}, {15.0, 4.08}}, {"8.9225e-17", "1.8220e-15", "2.4497e-14", "2.3495e-13"}},
        {{{10.5, 3.69}}, {"1.4763e-15", "2.5959e-14", "3.0063e-13", "2.4967e-12"}},
    };
    const std::array<double, 4> temperatures{900, 1000, 1100, 1200};
    for (const Row& row : rows)
        for (std::size_t k = 0; k < 4; ++k) {
            double D = 0;
            for (const auto& [D0, Ea] : row.terms) D += value(own(D0, Ea), temperatures[k] + celsius) / cm2;
            EXPECT_TRUE(prints_as(D, row.printed[k])) << row.terms[0][0];
        }
    // The exponent itself: D0 and Ea of one, at the temperature where kT is 0.1 eV.
    const double T = 0.1 * constants::elementary_charge / constants::boltzmann;
    EXPECT_NEAR(value(own(1, 1), T) / cm2 / std::exp(-10), 1, 1e-14);
}

// [FullerDitzenberger1956] activation energies in cal/mol turned to eV, and the rounded 3.56 eV of arsenic.
TEST(Diffusivity, arsenic_and_antimony_of_1956) {
    const double joule_per_calorie = 4.184, avogadro = 6.02214076e23;
    const auto energy = [&](double calories) {
        return calories * joule_per_calorie / avogadro / constants::elementary_charge;
    };
    const std::array<const char*, 4> arsenic{"1.6279e-16", "2.5873e-15", "2.7487e-14", "2.1187e-13"};
    const std::array<double, 4> temperatures{900, 1000, 1100, 1200};
    EXPECT_TRUE(prints_as(energy(82000), "3.556"));
    EXPECT_TRUE(prints_as(energy(91000), "3.946"));
    EXPECT_TRUE(prints_as(energy(85000), "3.686"));
    for (std::size_t k = 0; k < 4; ++k)
        EXPECT_TRUE(prints_as(value(own(0.32, 3.56), temperatures[k] + celsius) / cm2, arsenic[k]));
}

TEST(ThermalBudget, adds_steps_and_ramps) {
    const auto boron = intrinsic_diffusivity("B");
    ASSERT_TRUE(boron);
    const std::vector<AnnealStep> flat{{1000 + celsius, 1800}};
    EXPECT_TRUE(prints_as(thermal_budget(flat, *boron) / cm2, "2.5146889e-11"));
    const std::vector<AnnealStep> two{{1000 + celsius, 1800}, {900 + celsius, 600}};
    EXPECT_NEAR(thermal_budget(two, *boron) / cm2, 1.3970494e-14 * 1800 + 9.2091900e-16 * 600, 1e-18);
    EXPECT_EQ(thermal_budget({}, *boron), 0);
    // A ramp against the integral of D over the linear rise, twice.
    const double hot = 1000 + celsius, cold = 600 + celsius, ramp = 300;
    const std::vector<AnnealStep> ramped{{hot, 0, ramp}};
    const double rise =
        integral([&](double t) { return value(*boron, cold + (hot - cold) * t / ramp); }, 0, ramp);
    EXPECT_NEAR(thermal_budget(ramped, *boron) / (2 * rise), 1, 1e-3);
    // Ten seconds of spike: the trapezoid with steps of a second, written out.
    const std::vector<AnnealStep> spike{{hot, 0, 10}};
    double sum = 0;
    for (int k = 0; k <= 10; ++k)
        sum += (k == 0 || k == 10 ? 1 : 2) * value(*boron, cold + (hot - cold) * k / 10);
    EXPECT_NEAR(thermal_budget(spike, *boron) / sum, 1, 1e-12);
    const std::vector<AnnealStep> cool{{500 + celsius, 60, 1000}};
    EXPECT_NEAR(thermal_budget(cool, *boron) / (60 * value(*boron, 500 + celsius)), 1, 1e-14);
}

// [Jaeger2002], from memory: boron at 1.1e20 cm^-3, 900 degC for 15 min, then 1100 degC for 5 h, in 3e16
// cm^-3.
TEST(Predeposition, and_drive_in_of_a_textbook_example) {
    // The example's own constant and zero of temperature, then those of today.
    struct Case {
        double boltzmann, zero;
        const char *D1, *D2, *dose, *surface, *junction;
    };
    for (const Case& c : {Case{8.614e-5, 273, "1.4488e-15", "2.9602e-13", "1.4174e14", "1.0955e18", "2.7691"},
                          Case{constants::thermal_voltage(1), celsius, "1.4763e-15", "3.0063e-13",
                               "1.4307e14", "1.0973e18", "2.7913"}}) {
        const double scale = c.boltzmann / constants::thermal_voltage(1);
        const double D1 = value(own(10.5, 3.69), scale * (900 + c.zero));
        const double D2 = value(own(10.5, 3.69), scale * (1100 + c.zero));
        EXPECT_TRUE(prints_as(D1 / cm2, c.D1));
        EXPECT_TRUE(prints_as(D2 / cm2, c.D2));
        const double first = D1 * 900, second = D2 * 5 * 3600;
        const double dose = predeposited_dose(1.1e26, first);
        EXPECT_TRUE(prints_as(dose * cm2, c.dose));
        EXPECT_TRUE(prints_as(driven_in(0, dose, second) * 1e-6, c.surface));
        const double junction = crossing([&](double x) { return driven_in(x, dose, second); }, 3e22, 10 * um);
        EXPECT_TRUE(prints_as(junction / um, c.junction));
    }
    const double shallow =
        crossing([&](double x) { return predeposited(x, 1.1e26, 1.4488e-15 * cm2 * 900); }, 3e22, 1 * um);
    EXPECT_TRUE(prints_as(shallow / um, "0.05878"));
}

// Boron 1000 degC with D 2e-14 cm^2/s, 1e19 cm^-3, one hour.
TEST(Predeposition, dose_slope_and_junction) {
    const double S = 2e-14 * cm2 * 3600;
    EXPECT_TRUE(prints_as(predeposited_dose(1e25, S) * cm2, "9.575e13"));
    const auto N = [&](double x) { return predeposited(x, 1e25, S); };
    const double junction = crossing(N, 1e21, 5 * um), h = 1e-4 * um;
    EXPECT_TRUE(prints_as(junction / um, "0.46687"));
    EXPECT_TRUE(prints_as((N(h) - N(-h)) / (2 * h) * 1e-8, "-6.649e23"));
    EXPECT_TRUE(prints_as((N(junction + h) - N(junction - h)) / (2 * h) * 1e-8, "-3.4345e20"));
    EXPECT_NEAR(integral(N, 0, 20 * std::sqrt(S)) / predeposited_dose(1e25, S), 1, 1e-12);
}

// Arsenic 1e14 cm^-2 driven 1 um deep into 1e15 cm^-3 at 1200 degC, with k = 8.614e-5 eV/K and 273 K.
TEST(Predeposition, time_to_reach_a_depth) {
    const double D = value(own(24, 4.08), 8.614e-5 / constants::thermal_voltage(1) * (1200 + 273));
    EXPECT_TRUE(prints_as(D / cm2, "2.602e-13"));
    const auto depth = [&](double time) {
        return crossing([&](double x) { return driven_in(x, 1e18, D * time); }, 1e21, 10 * um);
    };
    double low = 1, high = 10000;
    for (int k = 0; k < 100; ++k) {
        const double middle = 0.5 * (low + high);
        (depth(middle) < 1 * um ? low : high) = middle;
    }
    EXPECT_NEAR(low, 1190, 0.5);
}

TEST(TwoStep, sample_numbers_and_limits) {
    const double first = 1e-12 * cm2, second = 2.5e-12 * cm2;
    EXPECT_TRUE(prints_as(two_step(0, 1, first, second), "0.35901704"));
    EXPECT_TRUE(prints_as(two_step(0.02 * um, 1, first, second), "0.26072907"));
    EXPECT_TRUE(prints_as(two_step(0.04 * um, 1, first, second), "0.10048772"));
    // A long drive-in forgets the first step's depth; a vanishing one leaves the predeposition.
    for (const double x : {0.0, 0.5 * um, 2 * um}) {
        const double long_second = 1e5 * first;
        EXPECT_NEAR(
            two_step(x, 1, first, long_second) / driven_in(x, predeposited_dose(1, first), first * 1e5), 1,
            1e-4);
    }
    EXPECT_NEAR(two_step(0.02 * um, 1, first, 1e-9 * first), predeposited(0.02 * um, 1, first), 1e-7);
    const auto N = [&](double x) { return two_step(x, 1, first, second); };
    EXPECT_NEAR(integral(N, 0, 30 * std::sqrt(second)) / predeposited_dose(1, first), 1, 1e-11);
}

TEST(UpDiffusion, conserves_and_adds_up) {
    const double S = 1e-14, thickness = 0.15 * um;
    for (const double x : {0.0, 0.1 * um, 0.15 * um, 0.4 * um}) {
        const double up = up_diffused(x, thickness, 3, S), down = down_diffused(x, thickness, 3, S);
        EXPECT_NEAR(up + down, 3, 1e-14);
        // Against the spread of a constant below the thickness, with its image.
        const double spread = integral(
            [&](double source) {
                const double near = x - source, far = x + source;
                return 3 / std::sqrt(4 * std::numbers::pi * S) *
                       (std::exp(-near * near / (4 * S)) + std::exp(-far * far / (4 * S)));
            },
            0, thickness, std::array{x});
        EXPECT_NEAR(down, spread, 1e-12);
    }
    EXPECT_NEAR(up_diffused(thickness, 100 * thickness, 3, 1e-20), 0, 1e-14);
    EXPECT_NEAR(up_diffused(100 * thickness, 100 * thickness, 3, S), 1.5, 1e-14);
    EXPECT_NEAR(integral([&](double x) { return down_diffused(x, thickness, 3, S); }, 0, 3 * um),
                3 * thickness, 1e-12 * thickness);
}
