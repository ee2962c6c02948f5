// Fields and potentials of two uniform regions in contact, against the first integral of the
// Poisson-Boltzmann equation.
//
// d(eps E^2/2)/d(psi) = -rho integrates in closed form; the numbers below are 15-digit values of it,
// recomputed by tests/reference/poisson_boltzmann_plane.py. Set A (set_a.hpp). Tolerances: the printed error
// bar, which the tests of error bars hold to account, or the bound stated at the test. Source: elementary
// first integral (for example [SzeNg2007] ch. 2).

// SPDX-License-Identifier: MIT
#include <gtest/gtest.h>

#include <cmath>
#include <ostream>

#include "tests/support/set_a.hpp"

using namespace bandwright;
using namespace bandwright::set_a;

namespace {

struct PlaneRow {
    double upper, lower;  // net doping [cm^-3]
    double field;         // at the plane [V/cm], magnitude
    double barrier;       // [V]
};

void PrintTo(const PlaneRow& row, std::ostream* out) { *out << row.upper << " on " << row.lower << " cm-3"; }

// Layers of at least 30 Debye lengths, so that the ends are neutral to 1e-13.
double thickness_um(double doping) {
    return std::max(0.2, 40 * debye_length(std::abs(doping) * per_cm3) / um);
}

BiasOutcome solved(double upper, double lower, Options options, std::vector<double> biases = {0}) {
    return solve(uniform_stack({{thickness_um(upper), upper}, {thickness_um(lower), lower}}, options),
                 biases);
}

double plane_field(const BiasOutcome& outcome, double upper, std::size_t index = 0) {
    return std::abs(curve(outcome, "electric_field", index).at(thickness_um(upper) * um)) / volt_per_cm;
}

class Plane : public testing::TestWithParam<PlaneRow> {};

}  // namespace

TEST_P(Plane, field_lies_within_its_error_bar_and_the_bar_is_narrow) {
    const PlaneRow row = GetParam();
    const BiasOutcome outcome = solved(row.upper, row.lower, {});
    const double field = plane_field(outcome, row.upper);
    // Second order with a mesh aimed at 1e-4: twice the tolerance bounds what the plane's own node may be
    // off.
    EXPECT_NEAR(field / row.field, 1, 2e-4);
    if (outcome.points.find("peak_field")) {
        const double error = point_error(outcome, "peak_field") / volt_per_cm;
        EXPECT_LE(std::abs(field - row.field), error);
        EXPECT_LE(error, 3e-4 * field);
    }
    EXPECT_NEAR(figure(outcome, "contact_potential"), row.barrier, 1e-10);
}

INSTANTIATE_TEST_SUITE_P(
    Rows, Plane,
    testing::Values(PlaneRow{-1e15, 1e15, 9168.79318016797, 2 * 0.297632146664244},
                    PlaneRow{-1e16, 1e16, 32012.3798137894, 2 * 0.357158575994016},
                    PlaneRow{-1e17, 1e17, 109950.831479477, 2 * 0.416685005326322},
                    PlaneRow{-1e18, 1e18, 373235.145291354, 2 * 0.476211434658654},
                    PlaneRow{-1e17, 1e16, 45319.5343758320, 0.416685005326322 + 0.357158575994016},
                    PlaneRow{-1e18, 1e16, 67635.6103574171, 0.476211434658654 + 0.357158575994016},
                    PlaneRow{-1e19, 1e16, 176283.765315047, 0.535737863990985 + 0.357158575994016},
                    PlaneRow{-1e19, 1e15, 171960.562280618, 0.535737863990985 + 0.297632146664244},
                    PlaneRow{-1e19, 1e14, 171556.405461194, 0.535737863990985 + 0.238105717587847},
                    PlaneRow{-1e16, 1e15, 13157.3343432198, 0.357158575994016 + 0.297632146664244},
                    // hi-lo junctions: no junction to hide behind
                    PlaneRow{1e18, 1e15, 53915.3642017034, 0.178579287994410},
                    PlaneRow{1e19, 1e14, 171498.280287275, 0.297632146403139},
                    PlaneRow{1e17, 1e16, 13242.2306480509, 0.0595264293323061},
                    PlaneRow{2e16, 1e16, 2610.53432533963, 0.0179192407637847},
                    PlaneRow{-1e19, -1e15, 171379.495109454, 0.238105717326742}));

TEST(PlaneField, of_1e19_on_1e15_reaches_a_millionth_at_tolerance_1e_7) {
    Options options;
    options.tolerance = 1e-7;
    EXPECT_NEAR(plane_field(solved(-1e19, 1e15, options), -1e19) / 171960.562280618, 1, 1e-6);
}

TEST(PlaneField, comes_with_the_potential_and_the_carriers_of_the_first_integral) {
    // Upper layer p: potential of the plane above the neutral p side [V] and hole density there [cm^-3]. 2e-4
    // kT/q, the size of the error aimed at in kT/q; a density changes by e for kT/q.
    struct Row {
        double upper, lower, potential, holes;
    };
    for (const Row& row : {Row{-1e19, 1e15, 0.0259301585716647, 3.66768904675e18},
                           Row{-1e18, 1e16, 0.0335912672228687, 2.7270402465e17},
                           Row{-1e17, 1e16, 0.0915010526725647, 2.9030196089e15}}) {
        const BiasOutcome outcome = solved(row.upper, row.lower, {});
        const double plane = thickness_um(row.upper) * um;
        const Curve potential = curve(outcome, "electrostatic_potential");
        EXPECT_NEAR(potential.at(plane) - potential.value.front(), row.potential, 2e-4 * thermal_voltage)
            << row.upper;
        EXPECT_NEAR(curve(outcome, "hole_density").at(plane) / per_cm3 / row.holes, 1, 2e-4) << row.upper;
    }
}

TEST(PlaneField, under_bias_follows_the_first_integral_with_a_shifted_intrinsic_density) {
    // Flat quasi-Fermi levels across the layer: exact but for the currents, which bend them by less than 1e-9
    // kT/q in reverse; at +0.3 V the drop across the quasi-neutral parts is of the same order.
    const BiasOutcome symmetric = solve(uniform_stack({{1, -1e17}, {1, 1e17}}), {-1, -5, -20, 0.3});
    const double expected[] = {165997.309328294, 299029.752347108, 566928.227914078, 86310.2639907876};
    for (std::size_t k = 0; k < 4; ++k) {
        const double field = std::abs(curve(symmetric, "electric_field", k).at(1 * um)) / volt_per_cm;
        EXPECT_LE(std::abs(field - expected[k]), point_error(symmetric, "peak_field", k) / volt_per_cm) << k;
        EXPECT_NEAR(field / expected[k], 1, 2e-4);
    }
    const BiasOutcome one_sided = solve(uniform_stack({{0.2, -1e19}, {20, 1e15}}), {-5, -50});
    const double one_sided_expected[] = {174800.276002827, 199693.983675202};
    for (std::size_t k = 0; k < 2; ++k) {
        const double field = std::abs(curve(one_sided, "electric_field", k).at(0.2 * um)) / volt_per_cm;
        EXPECT_LE(std::abs(field - one_sided_expected[k]),
                  point_error(one_sided, "peak_field", k) / volt_per_cm)
            << k;
    }
}

TEST(PlaneField, with_fermi_dirac_statistics_follows_the_first_integral_of_order_three_halves) {
    // Nc 2.86e19, Nv 3.10e19 cm^-3, gap 1.12 eV, 300 K: p + n replaced by Nc F_3/2 + Nv F_3/2 in the first
    // integral.
    Options options;
    options.statistics = "fermi-dirac";
    options.material = R"("relative_permittivity": 11.7, "electron_affinity": "4.05 eV", "bandgap": "1.12 eV",
        "conduction_band_effective_density": "2.86e19 cm-3", "valence_band_effective_density": "3.10e19 cm-3",
        "electron_mobility": "1000 cm2 V-1 s-1", "hole_mobility": "450 cm2 V-1 s-1")";
    const PlaneRow rows[] = {{-1e17, 1e17, 109396.642834, 0.8255408745404},
                             {-1e19, 1e19, 1252878.26354, 1.069700714051},
                             {-1e20, 1e20, 4237001.74309, 1.241449680261},
                             {-1e20, 1e16, 632438.487121, 0.9728051951479}};
    for (const PlaneRow& row : rows) {
        const BiasOutcome outcome = solved(row.upper, row.lower, options);
        EXPECT_LE(std::abs(plane_field(outcome, row.upper) - row.field),
                  point_error(outcome, "peak_field") / volt_per_cm)
            << row.upper;
        EXPECT_NEAR(plane_field(outcome, row.upper) / row.field, 1, 3e-4);
        EXPECT_NEAR(figure(outcome, "contact_potential"), row.barrier, 2e-10);
    }
    // n++/n: Boltzmann statistics would say 0.238105717329 V.
    EXPECT_NEAR(figure(solved(1e20, 1e16, options), "contact_potential"), 0.268644485113, 1e-10);
}
