// Two columns of numbers in the shapes that laboratories write them.
// SPDX-License-Identifier: MIT
#include "io/input/csv.hpp"

#include <gtest/gtest.h>

using namespace bandwright;

TEST(Csv, reads_every_usual_separator_and_skips_what_is_no_data) {
    for (const char* text :
         {"1,2e16\n3,4e16\n", "1;2e16\n3;4e16", "1\t2e16\r\n3\t4e16\r\n", "  1  2e16\n\n 3 4e16\n",
          "\xEF\xBB\xBF# a comment\ndepth (nm),boron (cm-3)\n1,2e16\n# another\n3, 4e16\n"}) {
        const CsvColumns columns = read_two_columns(text);
        EXPECT_TRUE(columns.trouble.empty()) << text;
        ASSERT_EQ(columns.rows.size(), 2u) << text;
        EXPECT_EQ(columns.rows[0].first, "1");
        EXPECT_EQ(columns.rows[1].second, "4e16");
    }
}

TEST(Csv, names_the_lines_that_are_not_two_numbers) {
    const CsvColumns columns = read_two_columns("1,2\n3,x\n4\n");
    ASSERT_EQ(columns.trouble.size(), 2u);
    EXPECT_EQ(columns.trouble[0].substr(0, 6), "line 2");
    EXPECT_EQ(columns.trouble[1].substr(0, 6), "line 3");
}
