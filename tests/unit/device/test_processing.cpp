// Recipes become profiles: moments, doses, films, anneals, and what is refused.
// SPDX-License-Identifier: MIT
#include "core/device/processing.hpp"

#include <gtest/gtest.h>

#include <algorithm>
#include <cmath>
#include <nlohmann/json.hpp>

#include "core/base/error.hpp"
#include "core/process/quadrature.hpp"
#include "core/process/range_table.hpp"
#include "io/input/read_structure.hpp"
#include "tests/support/temporary_folder.hpp"

using namespace bandwright;

namespace {

Structure with(const std::string& doping, const std::string& more = "", const std::string& material = "Si") {
    return read_structure_text(R"({"format":"bandwright-structure 1","layers":[{"name":"a","material":")" +
                                   material + R"(","thickness":"6 um"}],"doping":[)" + doping + "]" + more +
                                   "}",
                               "a.json", ".")
        .structure;
}

std::string refusal(const std::string& doping, const std::string& more = "") {
    try {
        with(doping, more);
    } catch (const InputError& error) {
        return error.what();
    }
    return "not refused";
}

double moment(const DopingShape& shape, int power, double centre, double to) {
    const std::vector<double> points{0.5 * centre, centre, 1.5 * centre, 2 * centre, 4 * centre};
    return integral([&](double x) { return std::pow(x - centre, power) * concentration(shape, x); }, 0, to,
                    points);
}

bool has_warning(const Structure& s, const std::string& part) {
    return std::any_of(s.warnings.begin(), s.warnings.end(),
                       [&](const std::string& text) { return text.find(part) != std::string::npos; });
}

}  // namespace

TEST(Processing, gives_an_implant_the_moments_of_its_table) {
    // Ranges so deep against their straggle that the surface cuts off less than 1e-6 of any moment: B 180 keV
    // is 5.4 straggles deep, P 200 keV with its own moments 8.
    const Structure s = with(R"({"kind":"implant","dopant":"B","energy":"180 keV","dose":"1e14 cm-2"},
        {"kind":"implant","dopant":"P","dose":"3e13 cm-2","range":"0.8 um","straggle":"0.1 um","skewness":-0.5},
        {"kind":"implant","dopant":"P","dose":"3e13 cm-2","range":"0.8 um","straggle":"0.06 um","skewness":-0.5,"kurtosis":4})");
    const auto table = projected_range("B", 180e3);
    ASSERT_TRUE(table);
    struct Row {
        double dose, range, straggle, skewness;
    };
    const Row rows[] = {{1e18, table->range, table->straggle, 0},
                        {3e17, 0.8e-6, 0.1e-6, -0.5},
                        {3e17, 0.8e-6, 0.06e-6, -0.5}};
    for (std::size_t k = 0; k < 3; ++k) {
        const DopingShape& shape = s.doping[k].shape;
        const double dose = moment(shape, 0, rows[k].range, 6e-6);
        // A Pearson IV of kurtosis 4 has a tail beyond the surface.
        const double tolerance = k == 2 ? 2e-5 : 1e-6;
        EXPECT_NEAR(dose / rows[k].dose, 1, tolerance) << k;
        EXPECT_NEAR(moment(shape, 1, 0, 6e-6) / dose / rows[k].range, 1, tolerance) << k;
        EXPECT_NEAR(std::sqrt(moment(shape, 2, rows[k].range, 6e-6) / dose) / rows[k].straggle, 1,
                    k == 2 ? 1e-3 : 1e-5)
            << k;
        if (k == 1) {
            EXPECT_NEAR(moment(shape, 3, rows[k].range, 6e-6) / dose / std::pow(rows[k].straggle, 3), -0.5,
                        1e-4);
        }
    }
}

TEST(Processing, counts_what_stays_in_the_films) {
    const Structure s =
        with(R"({"kind":"implant","dopant":"BF2","energy":"30 keV","dose":"1e14 cm-2","tilt":"10 degree",
        "through":[{"material":"SiO2","thickness":"15 nm"},{"material":"Si3N4","thickness":"5 nm"}]})");
    const auto& implant = std::get<ImplantDoping>(s.doping[0].shape);
    EXPECT_EQ(s.doping[0].dopant, "B");
    EXPECT_NEAR(implant.film_shift, film_factor("BF2", "SiO2", 30e3)->value * 15e-9 + 1.3 * 5e-9, 1e-20);
    const auto table = projected_range("BF2", 30e3);
    const double along = std::cos(10 * std::acos(-1) / 180);
    const double z = (table->range * along - implant.film_shift) / (table->straggle * along);
    EXPECT_NEAR(implant.retained_dose / 1e18, 0.5 * std::erfc(-z / std::sqrt(2.0)), 1e-12);
    EXPECT_NEAR(moment(s.doping[0].shape, 0, 0, 6e-6) / implant.retained_dose, 1, 1e-9);
    EXPECT_TRUE(has_warning(s, "channelling"));
}

TEST(Processing, anneals_keep_the_dose_of_every_kind_and_move_what_has_a_diffusivity) {
    const std::string anneal = R"(,"anneal":[{"temperature":"1100 degC","time":"90 min"}])";
    for (
        const char* kind :
        {R"("kind":"gaussian","peak":"1e19 cm-3","depth":"0.3 um","straggle":"0.1 um")",
         R"("kind":"gaussian","dose":"1e15 cm-2","depth":"0.1 um","straggle":"0.1 um")",
         R"("kind":"erfc","surface":"1e19 cm-3","length":"0.3 um")",
         R"("kind":"exponential","surface":"1e19 cm-3","decay_length":"0.2 um","origin":"4 um","direction":"up")",
         R"("kind":"step","concentration":"1e18 cm-3","from":"1 um","to":"1.2 um")",
         R"("kind":"implant","energy":"40 keV","dose":"1e15 cm-2")"}) {
        const std::string entry = std::string(R"({"dopant":"B",)") + kind + "}";
        const Structure before = with(entry), after = with(entry, anneal);
        const auto dose = [](const Structure& s) {
            std::vector<double> points = breakpoints(s.doping[0].shape);
            for (const Scale& scale : scales(s.doping[0].shape, 6e-6))
                for (int k = -8; k <= 8; ++k) points.push_back(scale.depth + k * scale.length);
            return integral([&](double x) { return concentration(s.doping[0].shape, x); }, 0, 6e-6, points);
        };
        EXPECT_NEAR(dose(after) / dose(before), 1, 1e-8) << kind;
        EXPECT_EQ(kind_of(after.doping[0].shape), kind_of(before.doping[0].shape));
        EXPECT_LT(concentration(after.doping[0].shape, 1.1e-6), 1e26);
        EXPECT_NE(concentration(after.doping[0].shape, 1.5e-6), concentration(before.doping[0].shape, 1.5e-6))
            << kind;
    }
    const Structure uniform = with(R"({"kind":"uniform","dopant":"P","concentration":"1e15 cm-3"})", anneal);
    for (const double x : {0.0, 1e-9, 3e-6, 5.999e-6})
        EXPECT_NEAR(concentration(uniform.doping[0].shape, x) / 1e21, 1, 1e-10);
    const Structure generic = with(
        R"({"kind":"step","dopant":"donor","concentration":"1e15 cm-3","from":"1 um","to":"2 um"})", anneal);
    EXPECT_EQ(concentration(generic.doping[0].shape, 2.1e-6), 0);
    EXPECT_TRUE(has_warning(generic, "donor does not move"));
}

TEST(Processing, an_activation_caps_the_active_concentration) {
    const Structure s = with(
        R"({"kind":"implant","dopant":"As","energy":"50 keV","dose":"5e15 cm-2","activation":"2e20 cm-3"})");
    EXPECT_EQ(concentration(s.doping[0].shape, 0.0322e-6), 2e26);
    EXPECT_LT(concentration(s.doping[0].shape, 0.2e-6), 2e26);
}

TEST(Processing, names_what_it_cannot_do) {
    EXPECT_NE(refusal(R"({"kind":"implant","dopant":"B","energy":"2 MeV","dose":"1e14 cm-2"})")
                  .find("/doping/0/energy: the range table of B reaches from 1 to 1000 keV (found 2000 keV)"),
              std::string::npos);
    EXPECT_NE(refusal(R"({"kind":"implant","dopant":"Al","energy":"50 keV","dose":"1e14 cm-2"})")
                  .find("there is no table of implant ranges for \"Al\""),
              std::string::npos);
    EXPECT_NE(
        refusal(
            R"({"kind":"implant","dopant":"B","energy":"50 keV","dose":"1e14 cm-2","through":[{"material":"resist","thickness":"1 um"}]})")
            .find("/doping/0/through/0/material: no stopping ratio is known for \"B\" in \"resist\""),
        std::string::npos);
    EXPECT_NE(
        refusal(R"({"kind":"implant","dopant":"B","energy":"50 keV","dose":"1e14 cm-2","range":"0.2 um"})")
            .find("range and straggle go together"),
        std::string::npos);
    EXPECT_NE(
        refusal(R"({"kind":"implant","dopant":"B","dose":"1e14 cm-2"})").find("an implant needs its energy"),
        std::string::npos);
    EXPECT_NE(refusal(R"({"kind":"uniform","dopant":"B","concentration":"1e15 cm-3"})",
                      R"(,"anneal":[{"temperature":"1000 degC"}])")
                  .find("/anneal/0: needs the key \"time\""),
              std::string::npos);
}

TEST(GuardRing, shows_the_figures_of_an_independent_quadrature) {
    const TemporaryFolder folder;
    const std::string root = SOURCE_ROOT;
    const Ran shown =
        run_in(folder, std::string(PROGRAM) + " inspect " + root + "/demo-structures/guard-ring.json --json");
    ASSERT_EQ(shown.status, 0) << shown.err;
    const Ran expected =
        run_in(folder, std::string(PYTHON) + " " + root + "/tests/reference/guard_ring_profile.py");
    ASSERT_EQ(expected.status, 0) << expected.err;
    const auto figures = nlohmann::json::parse(shown.out)["figures"];
    const auto truth = nlohmann::json::parse(expected.out);
    ASSERT_EQ(figures["junctions"]["value"].size(), 1u);
    const auto junction = figures["junctions"]["value"][0];
    EXPECT_NEAR(junction["depth"].get<double>() / truth["depth"].get<double>(), 1, 1e-6);
    EXPECT_NEAR(junction["gradient"].get<double>() / truth["gradient"].get<double>(), 1, 1e-6);
    const auto regions = figures["sheet_resistances"]["value"];
    ASSERT_EQ(regions.size(), 2u);
    for (std::size_t k = 0; k < 2; ++k)
        for (const char* key : {"value", "dose", "peak"})
            EXPECT_NEAR(regions[k][key].get<double>() / truth["regions"][k][key].get<double>(), 1, 1e-6)
                << k << " " << key;
}
