// The flux through one cell: published sample, exactness for constant field and current, zero in equilibrium.
// SPDX-License-Identifier: MIT
#include "core/discretization/cell_flux.hpp"

#include <gtest/gtest.h>

#include <cmath>

using namespace bandwright;

namespace {

CellFlux electron_flux(double speed, const Bernoulli& b, double a, double left, double right) {
    return bandwright::electron_flux(speed, b, a, std::expm1(-std::abs(a)), left, right);
}
CellFlux hole_flux(double speed, const Bernoulli& b, double a, double left, double right) {
    return bandwright::hole_flux(speed, b, a, std::expm1(-std::abs(a)), left, right);
}

// Plain textbook form, with its cancellation: D/h (B(u) n_right - B(-u) n_left).
double textbook(double speed, double u, double left, double right) {
    const Bernoulli b = bernoulli(u);
    return speed * (b.plus * right - b.minus * left);
}

}  // namespace

TEST(CellFlux, equals_a_sample_in_amperes) {
    // D 36 cm2/s, h 1e-5 cm, 5 kT/q, 1e15 and 1e17 cm^-3: -947.1310361711819 A/cm2 (own computation, 17
    // digits).
    const double u = 5, a = u - std::log(1e17 / 1e15);  // change of phi_n = u - change of ln n
    const CellFlux flux = electron_flux(36 / 1e-5, bernoulli(u), a, 1e15, 1e17);
    EXPECT_NEAR(1.602176634e-19 * flux.value, -947.1310361711819, 947 * 1e-14);
}

TEST(CellFlux, equals_the_textbook_form_where_that_does_not_cancel) {
    for (const double u : {-20.0, -3.0, 0.0, 0.01, 4.0, 30.0})
        for (const double a : {-25.0, -2.0, 2.0, 9.0}) {
            const double left = 3e20, right = left * std::exp(u - a);
            EXPECT_NEAR(electron_flux(7, bernoulli(u), a, left, right).value / textbook(7, u, left, right), 1,
                        1e-13);
            // Holes: ln p changes by a - u; the textbook form with the roles of the ends exchanged.
            const double p_right = left * std::exp(a - u);
            EXPECT_NEAR(hole_flux(7, bernoulli(u), a, left, p_right).value / textbook(7, u, p_right, left), 1,
                        1e-13);
        }
}

TEST(CellFlux, is_zero_exactly_in_equilibrium) {
    EXPECT_EQ(electron_flux(1e9, bernoulli(13.7), 0, 1e20, 1e26).value, 0);
    EXPECT_EQ(hole_flux(1e9, bernoulli(-13.7), 0, 1e20, 1e26).value, 0);
}

TEST(CellFlux, keeps_its_digits_twenty_decades_below_the_one_way_flux) {
    const double u = 3, a = 1e-20, left = 1e24;
    const CellFlux flux = electron_flux(1, bernoulli(u), a, left, left * std::exp(u));
    EXPECT_NEAR(flux.value / (-bernoulli(u).minus * left * a), 1, 1e-14);
}

TEST(CellFlux, does_not_overflow_when_a_quasi_fermi_level_falls_by_thousands_of_kT) {
    for (const double a : {-3e4, 3e4}) {
        EXPECT_TRUE(std::isfinite(electron_flux(1e6, bernoulli(0.5 * a), a, 1e10, 1e10).value));
        EXPECT_TRUE(std::isfinite(hole_flux(1e6, bernoulli(0.5 * a), a, 1e10, 1e10).value));
    }
}

TEST(CellFlux, derivatives_equal_difference_quotients) {
    for (const double u : {-4.0, 0.03, 6.0})
        for (const double a : {-5.0, -0.2, 0.3, 8.0}) {
            const double left = 2, right = 3, h = 1e-6;
            const auto at = [&](double du, double da, double dl, double dr) {
                return electron_flux(1.3, bernoulli(u + du), a + da, left * std::exp(dl),
                                     right * std::exp(dr))
                    .value;
            };
            const CellFlux f = electron_flux(1.3, bernoulli(u), a, left, right);
            const double scale =
                1e-8 * (std::abs(f.value) + std::abs(f.by_a) + 1);  // rounding 1e-16/h and h^2
            EXPECT_NEAR(f.by_u, (at(h, 0, 0, 0) - at(-h, 0, 0, 0)) / (2 * h), scale);
            EXPECT_NEAR(f.by_a, (at(0, h, 0, 0) - at(0, -h, 0, 0)) / (2 * h), scale);
            EXPECT_NEAR(f.by_log_left, (at(0, 0, h, 0) - at(0, 0, -h, 0)) / (2 * h), scale);
            EXPECT_NEAR(f.by_log_right, (at(0, 0, 0, h) - at(0, 0, 0, -h)) / (2 * h), scale);
        }
}
