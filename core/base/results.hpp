// What a run hands to the writer: figures, a table of points and variables over depth, in memory units.
// Not for: file formats (io/results).
// SPDX-License-Identifier: MIT
#pragma once

#include <cmath>
#include <limits>
#include <string>
#include <vector>

#include "core/base/sourced.hpp"
#include "core/base/unit.hpp"

namespace bandwright {

/// "No value": written as null in the summary and as _FillValue in the result file.
inline constexpr double no_value = std::numeric_limits<double>::quiet_NaN();

/// A named result with its estimated absolute numerical error. A value that the mesh does not touch has the
/// error no_value (null). `state` says why there is no value ("reached through").
struct Figure {
    std::string name;
    double value = no_value;
    double error = no_value;
    Unit unit = Unit::one;
    std::string meaning;
    std::string state;
};

/// A column over the points of a sweep. `errors` is empty or as long as `values`.
struct Column {
    std::string name;
    Unit unit = Unit::one;
    std::string meaning;
    std::vector<double> values, errors;
};

/// The points of an analysis, one row a point.
struct Table {
    std::vector<Column> columns;
    std::size_t rows() const { return columns.empty() ? 0 : columns.front().values.size(); }
    const Column* find(std::string_view name) const {
        for (const Column& column : columns)
            if (column.name == name) return &column;
        return nullptr;
    }
};

/// A variable over depth, or over bias and depth (bias-major, size points * depths).
struct Variable {
    std::string name;
    Unit unit = Unit::one;
    std::string meaning;
    bool over_bias = true;
    std::vector<double> values;
};

/// Everything over depth. Depth is strictly increasing; a boundary depth stands twice (interfaces of layers
/// and doping steps): the next smaller double before it carries the values above, the boundary those below.
struct Profiles {
    /// [um], because the double before a boundary is taken in the unit that the file carries.
    std::vector<double> depth_um;
    std::vector<int> layer;
    std::vector<std::string> layer_names;
    std::vector<Variable> variables;
};

/// A junction as listed in the figures.
struct JunctionLine {
    double depth;
    bool p_above;
    /// [m^-4]; no_value for an abrupt step.
    double gradient;
};

/// A region between neighbouring junctions (and the ends of the stack): type, sheet resistance, flat band
/// [ohm per square], net dose [m^-2], largest net doping [m^-3] and its depth [m], Debye length there [m],
/// and the potential that empties the region from its junctions [V]; no_value where the region has no doping
/// or no junction.
struct SheetLine {
    double from, to;
    std::string type;
    double value;
    double dose = no_value, peak = no_value, peak_depth = no_value, debye_length = no_value,
           depleting_potential = no_value;
};

/// The points of a measured profile that a run used [m], [m^-3].
struct MeasuredPoints {
    std::string file;
    std::vector<double> depth, concentration;
};

/// The whole outcome of a command.
struct Results {
    std::string command;
    std::string title;
    /// Name of the structure file as the user gave it, its bytes, and the structure as used, as JSON text.
    std::string structure_name, structure_bytes, structure_used;
    std::string command_line;
    /// running | complete | interrupted | stopped short
    std::string status = "running";
    double temperature = 300;
    std::vector<Figure> figures;
    std::vector<JunctionLine> junctions;
    std::vector<SheetLine> sheet_resistances;
    Table points;
    Profiles profiles;
    Ledger ledger;
    /// Sentences that say what the numbers mean.
    std::vector<std::string> readings;
    std::vector<std::string> warnings;
    std::vector<MeasuredPoints> measured;
};

}  // namespace bandwright
