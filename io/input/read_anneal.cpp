// SPDX-License-Identifier: MIT
#include "io/input/read_anneal.hpp"

#include <array>

#include "io/input/read_fields.hpp"

namespace bandwright {

namespace {

constexpr std::array step_fields{
    Field<AnnealStep>{"temperature", &AnnealStep::temperature, Unit::temperature, above_zero,
                      Presence::required, "the temperature"},
    Field<AnnealStep>{"time", &AnnealStep::time, Unit::time, zero_or_more, Presence::required,
                      "the time at it"},
    Field<AnnealStep>{"ramp", &AnnealStep::ramp, Unit::time, zero_or_more, Presence::optional,
                      "the time of heating up, and again of cooling"},
};

}  // namespace

std::vector<AnnealStep> read_anneal(const Cursor& place) {
    std::vector<AnnealStep> steps;
    if (!place.expect_list("anneal", R"([ { "temperature": "1000 degC", "time": "30 min" } ])")) return steps;
    for (const Cursor& item : place.items()) {
        AnnealStep step;
        if (item.expect_object("an anneal step")) {
            item.refuse_other_keys("an anneal step", keys_of(step_fields));
            read_fields(item, step_fields, step);
        }
        steps.push_back(step);
    }
    return steps;
}

}  // namespace bandwright
