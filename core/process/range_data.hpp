// The rows behind the range table: listed (published) and computed moments of ions in silicon, ranges in
// oxide.
// Not for: interpolation or the choice between the columns (range_table.hpp).
//
// SPDX-License-Identifier: MIT
#pragma once

#include <span>
#include <string_view>

namespace bandwright {

/// Moments of a random-target calculation: energy [keV], range and straggle [um], skewness, kurtosis.
struct ComputedRow {
    double energy, range, straggle, skewness, kurtosis;
};

/// A row of the published range statistics: energy [keV], range and straggle [um]. Source: [Gibbons1975].
struct ListedRow {
    double energy, range, straggle;
};

/// Energy [keV], ranges in silicon and in thermal oxide of 2.20 g/cm^3 [um], both computed.
struct OxideRow {
    double energy, silicon, oxide;
};

/// Everything tabulated for one ion, rows by increasing energy.
struct RangeData {
    /// Element symbol.
    std::string_view ion;
    std::span<const ComputedRow> computed;
    std::span<const ListedRow> listed;
    std::span<const OxideRow> oxide;
};

/// The ions that have rows: B, P, As, Sb in silicon.
///
/// Computed rows: binary collisions in a random silicon target of 4.994e22 cm^-3, 30 000 ions a row,
/// universal screening potential [Ziegler1985], electronic stopping of protons [AndersenZiegler1977] times a
/// squared effective charge [BrandtKitagawa1982], that stopping multiplied by 1.06 for B and 0.85 for P. No
/// channelling. Statistical error: range 0.3 %, straggle 0.5 %, skewness 0.015, kurtosis 0.03 to 0.3;
/// systematic error 5 to 10 %.
std::span<const RangeData> range_data();

}  // namespace bandwright
