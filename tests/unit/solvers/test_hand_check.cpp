// Hand values against published formulas of set A, and the capacitance of the solved system against exact
// ones. SPDX-License-Identifier: MIT
#include "solvers/analyses/hand_check.hpp"

#include <gtest/gtest.h>

#include "io/input/read_structure.hpp"
#include "tests/support/set_a.hpp"

using namespace bandwright;
using namespace bandwright::set_a;

namespace {

HandCheck check_of(const std::string& text, std::vector<double> biases) {
    BiasRequest request;
    request.biases = std::move(biases);
    return run_hand_check(read_structure_text(text, "hand.json", ".").structure, request);
}

}  // namespace

TEST(HandCheck, abrupt_values_are_those_of_the_formulas) {
    // Na 1e17, Nd 1e16, set A, evaluated with mpmath to the digits given: V_bi, W, x_n, x_p, E, C.
    const HandCheck check = check_of(uniform_stack({{1, -1e17}, {2, 1e16}}), {0});
    ASSERT_EQ(check.points.size(), 1u);
    const HandEstimate& hand = check.points[0].abrupt;
    EXPECT_NEAR(hand.built_in_potential, 0.773843581, 1e-9);
    EXPECT_NEAR(hand.width / um, 0.331779869, 1e-9);
    EXPECT_NEAR(hand.bottom_edge / um - 1, 0.301618063, 1e-9);
    EXPECT_NEAR(1 - hand.top_edge / um, 0.0301618063, 1e-9);
    EXPECT_NEAR(hand.field / volt_per_cm / 46648.0129, 1, 1e-8);
    EXPECT_NEAR(hand.capacitance * 1e5 / 31.2237140, 1, 1e-8);  // nF/cm2
    // On uniform sides the true profile is the abrupt junction.
    EXPECT_NEAR(check.points[0].profile.width / hand.width, 1, 1e-9);
    EXPECT_NEAR(check.points[0].profile.field / hand.field, 1, 1e-9);
    EXPECT_TRUE(std::isnan(check.points[0].linear.width));
    EXPECT_NE(check.points[0].verdict.find("the equivalent abrupt junction is the one to use"),
              std::string::npos)
        << check.points[0].verdict;
}

TEST(HandCheck, linear_values_are_those_of_the_formulas) {
    // Gradient 1e20 cm-4, set A: W, V_bi, E, C at 0 V and W, E, C at -5 V, evaluated with mpmath.
    const std::string text =
        one_layer(6, {R"({"kind":"linear","gradient":"1e20 cm-4","zero_depth":"3 um"})"});
    const HandCheck check = check_of(text, {0, -5});
    ASSERT_EQ(check.points.size(), 2u);
    const HandEstimate &zero = check.points[0].linear, &five = check.points[1].linear;
    EXPECT_NEAR(zero.built_in_potential, 0.6671296, 1e-7);
    EXPECT_NEAR(zero.width / um / 0.8029193, 1, 1e-6);
    EXPECT_NEAR(zero.field / volt_per_cm / 12463.20, 1, 1e-6);
    EXPECT_NEAR(zero.capacitance * 1e5 / 12.90217, 1, 1e-6);
    EXPECT_NEAR(five.width / um / 1.638285, 1, 1e-6);
    EXPECT_NEAR(five.field / volt_per_cm / 51887.75, 1, 1e-6);
    // The true profile is the straight line itself.
    EXPECT_NEAR(check.points[1].profile.field / five.field, 1, 1e-6);
    EXPECT_NE(check.points[1].verdict.find("linearly graded junction is the one to use"), std::string::npos)
        << check.points[1].verdict;
}

TEST(HandCheck, names_the_spill_over_of_a_one_sided_junction) {
    const HandCheck check = check_of(uniform_stack({{0.5, -1e19}, {3, 1e15}}), {0});
    // The exact field at the plane is 171960.6 V/cm, the depletion value 16054.6 V/cm.
    EXPECT_NE(check.points[0].spill_over.find("spill over"), std::string::npos);
}

TEST(HandCheck, says_when_no_hand_formula_applies) {
    // 2 um of 1e14 between p+ and n+ are empty at any bias.
    const HandCheck check = check_of(uniform_stack({{1, -1e18}, {2, 1e14}, {1, 1e18}}), {-30});
    ASSERT_EQ(check.points.size(), 2u);
    EXPECT_FALSE(check.points[1].verdict.empty());
}

TEST(ZeroBiasCapacitance, of_abrupt_junctions_equals_the_exact_quadrature) {
    // dQ_p/dV by mpmath [nF/cm2].
    struct Row {
        double acceptors, donors, nano;
    };
    for (const Row& row : {Row{1e17, 1e17, 72.858778611}, Row{1e16, 1e16, 25.024333255},
                           Row{1e17, 1e16, 32.353788097}, Row{1e19, 1e15, 11.440915587}}) {
        Options options;
        options.tolerance = 1e-6;
        const BiasOutcome outcome =
            solve(uniform_stack({{2, -row.acceptors}, {10, row.donors}}, options), {0});
        EXPECT_NEAR(figure(outcome, "zero_bias_capacitance") * 1e5 / row.nano, 1, 1e-5)
            << row.acceptors << " " << row.donors;
    }
}

TEST(ZeroBiasCapacitance, of_graded_junctions_equals_the_exact_solution) {
    // dQ/dV of the graded junction with both carriers, Numerov's formula, mesh-independent to 9 digits
    // [nF/cm2].
    struct Row {
        double gradient, nano;
        double thickness;
    };
    for (const Row& row : {Row{1e19, 6.66277558, 12}, Row{1e21, 28.0709016, 4}, Row{1e23, 120.938019, 1}}) {
        Options options;
        options.tolerance = 1e-6;
        const std::string text =
            one_layer(row.thickness,
                      {R"({"kind":"linear","gradient":")" + std::to_string(row.gradient) +
                       R"( cm-4","zero_depth":")" + std::to_string(row.thickness / 2) + R"( um"})"},
                      options);
        EXPECT_NEAR(figure(solve(text, {0}), "zero_bias_capacitance") * 1e5 / row.nano, 1, 1e-5)
            << row.gradient;
    }
}
