// The keys of each doping kind, as tables.
// Not for: rules between keys (read_doping.cpp).
// SPDX-License-Identifier: MIT
#pragma once

#include <array>

#include "core/base/field.hpp"
#include "core/device/doping.hpp"

namespace bandwright::detail {

inline constexpr std::string_view direction_names[] = {"down", "up"};

template <class S>
constexpr Field<S> direction_field() {
    return {"direction",
            Choice<S>{"direction", direction_names,
                      [](S& shape, std::size_t index) {
                          shape.direction = index == 0 ? Direction::down : Direction::up;
                      }},
            Unit::one,
            any_number,
            Presence::optional,
            "the side of the origin on which it lies"};
}

template <class S>
constexpr Field<S> origin_field() {
    return {"origin",   &S::origin,         Unit::length,
            any_number, Presence::optional, "the depth at which it starts"};
}

inline constexpr auto fields_of(const UniformDoping*) {
    using S = UniformDoping;
    return std::array{Field<S>{"concentration", &S::concentration, Unit::density, zero_or_more,
                               Presence::required, "the concentration"}};
}

inline constexpr auto fields_of(const StepDoping*) {
    using S = StepDoping;
    return std::array{
        Field<S>{"concentration", &S::concentration, Unit::density, zero_or_more, Presence::required,
                 "the concentration"},
        Field<S>{"from", &S::from, Unit::length, any_number, Presence::required,
                 "the depth of its upper end"},
        Field<S>{"to", &S::to, Unit::length, any_number, Presence::required, "the depth of its lower end"}};
}

inline constexpr auto fields_of(const GaussianDoping*) {
    using S = GaussianDoping;
    return std::array{
        Field<S>{"peak", &S::peak, Unit::density, zero_or_more, Presence::optional,
                 "the largest concentration"},
        Field<S>{"dose", &S::dose, Unit::areal_density, zero_or_more, Presence::optional,
                 "the integral over depth"},
        Field<S>{"depth", &S::depth, Unit::length, any_number, Presence::required, "the depth of the peak"},
        Field<S>{"straggle", &S::straggle, Unit::length, above_zero, Presence::required,
                 "the standard deviation"}};
}

inline constexpr auto fields_of(const ErfcDoping*) {
    using S = ErfcDoping;
    return std::array{Field<S>{"surface", &S::surface, Unit::density, zero_or_more, Presence::required,
                               "the concentration at the origin"},
                      Field<S>{"length", &S::length, Unit::length, above_zero, Presence::required,
                               "the diffusion length 2 sqrt(D t)"},
                      origin_field<S>(), direction_field<S>()};
}

inline constexpr auto fields_of(const ExponentialDoping*) {
    using S = ExponentialDoping;
    return std::array{Field<S>{"surface", &S::surface, Unit::density, zero_or_more, Presence::required,
                               "the concentration at the origin"},
                      Field<S>{"decay_length", &S::decay_length, Unit::length, above_zero, Presence::required,
                               "the length over which it falls by e"},
                      origin_field<S>(), direction_field<S>()};
}

inline constexpr auto fields_of(const LinearDoping*) {
    using S = LinearDoping;
    return std::array{Field<S>{"gradient", &S::gradient, Unit::density_gradient, any_number,
                               Presence::required, "the gradient of the net doping"},
                      Field<S>{"zero_depth", &S::zero_depth, Unit::length, any_number, Presence::required,
                               "the depth at which it is zero"}};
}

inline constexpr auto fields_of(const MeasuredDoping*) {
    using S = MeasuredDoping;
    return std::array{
        Field<S>{"file", &S::file, Unit::one, any_number, Presence::required, "the name of a CSV file"},
        Field<S>{"floor", &S::floor, Unit::density, zero_or_more, Presence::optional,
                 "the concentration that counts as zero"}};
}

inline constexpr Range up_to_right_angle{0, 89, true, "0 to 89 degree"};

inline constexpr auto fields_of(const ImplantDoping*) {
    using S = ImplantDoping;
    return std::array{
        Field<S>{"energy", &S::energy, Unit::energy, above_zero, Presence::optional, "the energy"},
        Field<S>{"dose", &S::dose, Unit::areal_density, zero_or_more, Presence::required,
                 "the implanted dose"},
        Field<S>{"tilt", &S::tilt, Unit::angle, up_to_right_angle, Presence::optional,
                 "the angle of the beam from the normal"},
        Field<S>{"activation", &S::activation, Unit::density, above_zero, Presence::optional,
                 "the largest active concentration"},
        Field<S>{"range", &S::range, Unit::length, above_zero, Presence::optional, "the projected range"},
        Field<S>{"straggle", &S::straggle, Unit::length, above_zero, Presence::optional,
                 "the standard deviation of the range"},
        Field<S>{"skewness", &S::skewness, Unit::one, any_number, Presence::optional, "the skewness"},
        Field<S>{"kurtosis", &S::kurtosis, Unit::one, above_zero, Presence::optional,
                 "the kurtosis, 3 for a Gaussian"}};
}

// Never read: what an anneal makes of the others.
inline constexpr auto fields_of(const DiffusedDoping*) { return std::array<Field<DiffusedDoping>, 0>{}; }

}  // namespace bandwright::detail
