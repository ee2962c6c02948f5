// What every model of a kind must obey.
// SPDX-License-Identifier: MIT
#include <gtest/gtest.h>

#include <cmath>

#include "core/models/mobility.hpp"
#include "core/models/recombination.hpp"
#include "io/input/material_database.hpp"

using namespace bandwright;

TEST(MobilityModels, are_positive_and_do_not_rise_with_doping) {
    for (const std::string& name : material_names()) {
        const Material material = *find_material(name);
        for (const std::string& model : material.mobility_models)
            for (const Carrier carrier : {Carrier::electron, Carrier::hole})
                for (const double T : {250.0, 300.0, 400.0, 500.0}) {
                    double before = INFINITY;
                    for (double N = 1e18; N < 1e27; N *= 2) {
                        Doping doping;
                        (carrier == Carrier::electron ? doping.donors : doping.acceptors) = N;
                        const double mu = mobility(carrier, *mobility_named(model), material, doping, T);
                        EXPECT_GT(mu, 0) << name << " " << model << " " << N << " " << T;
                        // Rounding of a plateau only.
                        EXPECT_LE(mu, before * (1 + 1e-12)) << name << " " << model << " " << N << " " << T;
                        before = mu;
                    }
                }
    }
}

TEST(MobilityModels, fall_with_temperature_at_low_doping) {
    const Material si = *find_material("Si");
    for (const std::string& model : si.mobility_models)
        for (const Carrier carrier : {Carrier::electron, Carrier::hole}) {
            const Doping doping{1e20, 0, 0};
            EXPECT_GT(mobility(carrier, *mobility_named(model), si, doping, 250),
                      mobility(carrier, *mobility_named(model), si, doping, 400));
        }
}

TEST(RecombinationModels, vanish_in_equilibrium_and_have_the_sign_of_the_excess) {
    const auto judge = [](const auto& model) {
        for (const double excess : {-1e30, 0.0, 1e36}) {
            const LocalState<double> s{1e22, 1e12, excess, 1e16, 1e16};
            const double R = model(s);
            EXPECT_EQ(R == 0, excess == 0);
            EXPECT_EQ(R > 0, excess > 0);
        }
    };
    judge(ShockleyReadHall{1e-6, 1e-6});
    judge(Auger{2.8e-43, 9.9e-44});
    judge(Radiative{4.7e-21});
}
