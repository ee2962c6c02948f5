// The rate of a half cell, written for speed, against the model structs in random states.
// SPDX-License-Identifier: MIT
#include "core/discretization/cell_source.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <random>

#include "core/models/recombination.hpp"

using namespace bandwright;

TEST(CellSource, equals_the_sum_of_the_models_in_random_states) {
    std::mt19937_64 engine(5);
    const auto next = [&] { return static_cast<double>(engine() >> 11) * 0x1p-52 - 1; };
    for (int trial = 0; trial < 400; ++trial) {
        EndCoefficients end{};
        end.intrinsic_squared = std::exp(60 + 20 * next());
        const double trap = 5 * next();
        end.n1 = std::sqrt(end.intrinsic_squared) * std::exp(trap);
        end.p1 = std::sqrt(end.intrinsic_squared) * std::exp(-trap);
        end.tau_n = std::exp(-14 + 4 * next());
        end.tau_p = std::exp(-14 + 4 * next());
        end.srh = trial % 4 == 0 ? 0 : 1;
        end.auger_n = trial % 3 == 0 ? 0 : 2.8e-43;
        end.auger_p = trial % 3 == 0 ? 0 : 9.9e-44;
        end.radiative = trial % 5 == 0 ? 0 : 4.7e-21;
        SourceState s{};
        s.gamma_n = trial % 2 == 0 ? 1 : std::exp(-1.5 + 1.4 * next());
        s.gamma_p = trial % 2 == 0 ? 1 : std::exp(-1.5 + 1.4 * next());
        s.ratio_n = trial % 2 == 0 ? 1 : 0.7 + 0.3 * next();
        s.ratio_p = trial % 2 == 0 ? 1 : 0.7 + 0.3 * next();
        s.level_split = trial % 7 == 0 ? 0 : 40 * next();
        s.change = std::expm1(-std::abs(s.level_split));
        s.n = std::exp(45 + 15 * next());
        // n p = gamma_n gamma_p nie^2 exp(d)
        s.p = s.gamma_n * s.gamma_p * end.intrinsic_squared * std::exp(s.level_split) / s.n;

        const double excess = s.n * s.p * -std::expm1(-s.level_split);
        const LocalState<double> local{s.n, s.p, excess, s.gamma_n * end.n1, s.gamma_p * end.p1};
        double expected = Auger{end.auger_n, end.auger_p}(local) + Radiative{end.radiative}(local);
        if (end.srh > 0) expected += ShockleyReadHall{end.tau_n, end.tau_p}(local);
        // A dozen roundings on either side.
        EXPECT_NEAR(half_rate(end, s).value, expected, 1e-14 * std::abs(expected)) << trial;
    }
}
