// Texts with units: exact decimal values, and the same meaning of units as UDUNITS gives them.
// SPDX-License-Identifier: MIT
#include "io/input/quantity.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <cstdlib>

#include "tests/support/temporary_folder.hpp"

using namespace bandwright;

TEST(Quantity, merges_powers_of_ten_exactly) {
    EXPECT_EQ(parse_quantity("2 um", Unit::length), 2e-6);
    EXPECT_EQ(parse_quantity("1e16 cm-3", Unit::density), 1e22);
    EXPECT_EQ(parse_quantity("0.1 nm", Unit::length), 1e-10);
    EXPECT_EQ(parse_quantity("60 keV", Unit::energy), 6e4);
    EXPECT_EQ(parse_quantity("5e13 cm-2", Unit::areal_density), 5e17);
    EXPECT_EQ(parse_quantity("7 degree", Unit::angle), 7);
    EXPECT_EQ(parse_quantity("1000 degC", Unit::temperature), 1273.15);
    EXPECT_EQ(parse_quantity("30 min", Unit::time), 1800);
}

TEST(Quantity, refuses_what_it_is_not) {
    for (const char* text : {"2", "2 V", "um", "", "2 um um", "two um", "nan um"})
        EXPECT_THROW(parse_quantity(text, Unit::length), QuantityError) << text;
    EXPECT_EQ(parse_quantity("3", Unit::length, BareNumber::in_shown_unit), 3e-6);
}

TEST(Quantity, means_by_units_what_udunits_means) {
    struct Row {
        const char *text, *si;
        Unit unit;
    };
    const TemporaryFolder folder;
    for (const Row& row :
         {Row{"0.35 um", "m", Unit::length}, Row{"12 angstrom", "m", Unit::length},
          Row{"3.1e15 cm-3", "m-3", Unit::density}, Row{"25 min", "s", Unit::time},
          Row{"900 degC", "K", Unit::temperature}, Row{"100 um2", "m2", Unit::area},
          Row{"1400 cm2 V-1 s-1", "m2 V-1 s-1", Unit::mobility}, Row{"1e5 V/cm", "V m-1", Unit::field},
          Row{"2.5 mA/cm2", "A m-2", Unit::current_density},
          Row{"1e-5 ohm.cm2", "ohm m2", Unit::resistance_area}}) {
        const Ran ran = run_in(folder, std::string("udunits2 -H '") + row.text + "' -W '" + row.si + "'");
        ASSERT_EQ(ran.status, 0) << row.text << ran.err;
        // "    0.35 um = 3.5e-07 (m)", six digits.
        const std::size_t at = ran.out.find("= ");
        ASSERT_NE(at, std::string::npos) << ran.out;
        const double theirs = std::strtod(ran.out.c_str() + at + 2, nullptr);
        EXPECT_NEAR(parse_quantity(row.text, row.unit) / theirs, 1, 1e-5) << row.text << ": " << ran.out;
    }
}
