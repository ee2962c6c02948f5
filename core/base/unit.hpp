// The closed list of units: how a quantity is shown, and how that relates to the value kept in memory.
// Not for: parsing unit text (io/input/quantity).
// SPDX-License-Identifier: MIT
#pragma once

#include <array>
#include <string_view>

namespace bandwright {

/// What a number in memory is. Memory holds SI, with one exception: an energy is kept in electronvolt,
/// because every formula divides it by kT/q.
enum class Unit {
    one,
    length,
    area,
    density,
    areal_density,
    density_gradient,
    energy,
    voltage,
    field,
    temperature,
    time,
    mobility,
    diffusivity,
    velocity,
    radiative_coefficient,
    auger_coefficient,
    rate,
    inverse_length,
    current_density,
    current,
    sheet_resistance,
    resistance_area,
    capacitance,
    conductance,
    charge_density,
    angle
};

/// Exponents of metre, kilogram, second, ampere, kelvin.
struct Dimension {
    int metre = 0, kilogram = 0, second = 0, ampere = 0, kelvin = 0;
    constexpr bool operator==(const Dimension&) const = default;
};

/// How a unit is written and what it is worth.
struct UnitInfo {
    Unit unit;
    /// UDUNITS spelling used in tables and files.
    std::string_view text;
    /// Memory value = shown value * 10^decimal_exponent (all our shown units are decimal multiples).
    int decimal_exponent;
    Dimension dimension;
    /// The kind of quantity, for messages.
    std::string_view quantity;
    /// An example a user can copy.
    std::string_view example;
};

inline constexpr std::array<UnitInfo, 26> unit_table{{
    {Unit::one, "1", 0, {}, "pure number", "0.3"},
    {Unit::length, "um", -6, {1}, "length", "0.4 um"},
    {Unit::area, "um2", -12, {2}, "area", "100 um2"},
    {Unit::density, "cm-3", 6, {-3}, "concentration", "1e16 cm-3"},
    {Unit::areal_density, "cm-2", 4, {-2}, "areal density", "3e14 cm-2"},
    {Unit::density_gradient, "cm-4", 8, {-4}, "concentration gradient", "1e20 cm-4"},
    {Unit::energy, "eV", 0, {2, 1, -2}, "energy", "1.12 eV"},
    {Unit::voltage, "V", 0, {2, 1, -3, -1}, "voltage", "5 V"},
    {Unit::field, "V cm-1", 2, {1, 1, -3, -1}, "electric field", "1e5 V cm-1"},
    {Unit::temperature, "K", 0, {0, 0, 0, 0, 1}, "temperature", "300 K"},
    {Unit::time, "s", 0, {0, 0, 1}, "time", "5 us"},
    {Unit::mobility, "cm2 V-1 s-1", -4, {0, -1, 2, 1}, "mobility", "1400 cm2 V-1 s-1"},
    {Unit::diffusivity, "cm2 s-1", -4, {2, 0, -1}, "diffusivity", "30 cm2 s-1"},
    {Unit::velocity, "cm s-1", -2, {1, 0, -1}, "velocity", "1e4 cm s-1"},
    {Unit::radiative_coefficient, "cm3 s-1", -6, {3, 0, -1}, "radiative coefficient", "4.73e-15 cm3 s-1"},
    {Unit::auger_coefficient, "cm6 s-1", -12, {6, 0, -1}, "Auger coefficient", "2.8e-31 cm6 s-1"},
    {Unit::rate, "cm-3 s-1", 6, {-3, 0, -1}, "rate", "1e20 cm-3 s-1"},
    {Unit::inverse_length, "cm-1", 2, {-1}, "inverse length", "7.03e5 cm-1"},
    {Unit::current_density, "A cm-2", 4, {-2, 0, 0, 1}, "current density", "1 A cm-2"},
    {Unit::current, "A", 0, {0, 0, 0, 1}, "current", "1 mA"},
    {Unit::sheet_resistance, "ohm", 0, {2, 1, -3, -2}, "resistance", "50 ohm"},
    {Unit::resistance_area, "ohm cm2", -4, {4, 1, -3, -2}, "specific resistance", "1e-3 ohm cm2"},
    {Unit::capacitance, "F cm-2", 4, {-4, -1, 4, 2}, "capacitance per area", "1e-8 F cm-2"},
    {Unit::conductance, "S cm-2", 4, {-4, -1, 3, 2}, "conductance per area", "1e-3 S cm-2"},
    {Unit::charge_density, "C cm-2", 4, {-2, 0, 1, 1}, "charge per area", "1e-8 C cm-2"},
    {Unit::angle, "degree", 0, {}, "angle", "7 degree"},
}};

/// The row of a unit. Errors: none, every enumerator has its row (checked at compile time).
constexpr const UnitInfo& info(Unit unit) { return unit_table[static_cast<std::size_t>(unit)]; }

static_assert([] {
    for (std::size_t k = 0; k < unit_table.size(); ++k)
        if (static_cast<std::size_t>(unit_table[k].unit) != k) return false;
    return true;
}());

/// Memory value per shown unit.
constexpr double per_shown_unit(Unit unit) {
    constexpr auto power = [](int exponent) {
        double value = 1;
        for (int k = 0; k < (exponent < 0 ? -exponent : exponent); ++k) value *= 10;
        return value;
    };
    const int exponent = info(unit).decimal_exponent;
    return exponent < 0 ? 1 / power(exponent) : power(exponent);
}

/// Memory value -> shown value. Divides or multiplies by an exact power of ten, so 2e-6 m is shown as 2 um.
constexpr double shown(double memory, Unit unit) {
    double power = 1;
    const int exponent = info(unit).decimal_exponent;
    for (int k = 0; k < (exponent < 0 ? -exponent : exponent); ++k) power *= 10;
    return exponent < 0 ? memory * power : memory / power;
}

}  // namespace bandwright
