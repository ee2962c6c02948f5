// The one table of material parameters: key, unit, allowed range, and who may write it.
// Not for: the numbers themselves (io/materials).
// SPDX-License-Identifier: MIT
#pragma once

#include <string>
#include <string_view>
#include <vector>

#include "core/base/field.hpp"

namespace bandwright {

/// Where a parameter may be written.
enum class Writer { material_file, structure_file, both };

/// A parameter of a material, named as in core/device/material.hpp.
struct MaterialKey {
    std::string_view key;
    Unit unit;
    Range range;
    Writer writer;
};

inline constexpr Range one_or_more{1, std::numeric_limits<double>::infinity(), true, "1 or more"};

inline constexpr MaterialKey material_keys[] = {
    {"relative_permittivity", Unit::one, one_or_more, Writer::both},
    {"electron_affinity", Unit::energy, any_number, Writer::both},
    {"bandgap", Unit::energy, above_zero, Writer::both},
    {"bandgap_zero_kelvin", Unit::energy, above_zero, Writer::material_file},
    {"bandgap_slope", Unit::energy, zero_or_more, Writer::material_file},
    {"bandgap_offset", Unit::temperature, zero_or_more, Writer::material_file},
    {"conduction_band_effective_density", Unit::density, above_zero, Writer::both},
    {"conduction_band_exponent", Unit::one, any_number, Writer::material_file},
    {"valence_band_effective_density", Unit::density, above_zero, Writer::both},
    {"valence_band_exponent", Unit::one, any_number, Writer::material_file},
    {"electron_mobility", Unit::mobility, above_zero, Writer::both},
    {"electron_mobility_exponent", Unit::one, any_number, Writer::material_file},
    {"hole_mobility", Unit::mobility, above_zero, Writer::both},
    {"hole_mobility_exponent", Unit::one, any_number, Writer::material_file},
    {"electron_lifetime", Unit::time, above_zero, Writer::both},
    {"hole_lifetime", Unit::time, above_zero, Writer::both},
    {"trap_level", Unit::energy, any_number, Writer::both},
    {"radiative_coefficient", Unit::radiative_coefficient, zero_or_more, Writer::both},
    {"electron_auger", Unit::auger_coefficient, zero_or_more, Writer::both},
    {"hole_auger", Unit::auger_coefficient, zero_or_more, Writer::both},
};

/// The three numbers of the gap's temperature law, which a user's own bandgap replaces.
inline constexpr std::string_view bandgap_law_keys[] = {"bandgap_zero_kelvin", "bandgap_slope",
                                                        "bandgap_offset"};

}  // namespace bandwright
