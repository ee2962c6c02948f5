#include "core/process/range_table.hpp"

#include <algorithm>
#include <cmath>

#include "core/base/text.hpp"
#include "core/process/range_data.hpp"

namespace bandwright {

namespace {

constexpr double kilo = 1e3;    // keV -> eV
constexpr double micro = 1e-6;  // um -> m
// Masses of 11B and 19F [u], from memory: boron's share of the energy of BF2.
constexpr double boron_mass = 11.009, fluorine_mass = 18.998;
constexpr double boron_share = boron_mass / (boron_mass + 2 * fluorine_mass);
constexpr double nitride_factor = 1.3;
// Rounding allowed at the ends of a table.
constexpr double slack = 1e-12;

/// Rows of an ion and the energy at which to read them [keV].
struct Place {
    const RangeData* data;
    double energy;
};

std::optional<Place> place(std::string_view ion, double energy) {
    const bool molecule = ion == "BF2";
    for (const RangeData& data : range_data())
        if (data.ion == (molecule ? "B" : ion))
            return Place{&data, energy / kilo * (molecule ? boron_share : 1)};
    return std::nullopt;
}

template <class Rows>
bool reaches(const Rows& rows, double energy) {
    return energy >= rows.front().energy * (1 - slack) && energy <= rows.back().energy * (1 + slack);
}

/// Calls between(row, next row, weight of the next row) where rows enclose the energy; at a row the weight is
/// exactly 0 or 1.
template <class Rows, class Between>
auto interpolate(const Rows& rows, double energy, Between between) {
    std::size_t k = 1;
    while (k + 1 < rows.size() && energy > rows[k].energy) ++k;
    const auto &low = rows[k - 1], &high = rows[k];
    const double w = std::log(energy / low.energy) / std::log(high.energy / low.energy);
    return between(low, high, std::clamp(w, 0.0, 1.0));
}

double logarithmic(double low, double high, double w) {
    if (w == 0) return low;
    if (w == 1) return high;
    return low * std::pow(high / low, w);
}

double linear(double low, double high, double w) { return low + (high - low) * w; }

/// Range and straggle [um] of computed or listed rows.
struct Pair {
    double range, straggle;
};
template <class Rows>
Pair read_pair(const Rows& rows, double energy) {
    return interpolate(rows, energy, [](const auto& low, const auto& high, double w) {
        return Pair{logarithmic(low.range, high.range, w), logarithmic(low.straggle, high.straggle, w)};
    });
}

}  // namespace

std::optional<EnergyLimits> energy_limits(std::string_view ion) {
    const auto at = place(ion, kilo);
    if (!at) return std::nullopt;
    const auto& rows = at->data->computed;
    return EnergyLimits{rows.front().energy * kilo / at->energy, rows.back().energy * kilo / at->energy};
}

std::optional<ImplantRange> projected_range(std::string_view ion, double energy) {
    const auto at = place(ion, energy);
    if (!at || !reaches(at->data->computed, at->energy)) return std::nullopt;
    const RangeData& data = *at->data;
    const std::string boron =
        ion == "BF2" ? ", boron rows at " + number_text(100 * boron_share) + " % of the energy" : "";
    if (reaches(data.listed, at->energy)) {
        const Pair listed = read_pair(data.listed, at->energy);
        return ImplantRange{listed.range * micro, listed.straggle * micro, "Gibbons1975, range table" + boron,
                            Status::from_memory};
    }
    const double nearest = std::clamp(at->energy, data.listed.front().energy, data.listed.back().energy);
    const Pair computed = read_pair(data.computed, at->energy), there = read_pair(data.computed, nearest),
               listed = read_pair(data.listed, nearest);
    return ImplantRange{computed.range * listed.range / there.range * micro,
                        computed.straggle * listed.straggle / there.straggle * micro,
                        "computed ranges, scaled to Gibbons1975 at " + number_text(nearest) + " keV" + boron,
                        Status::computed};
}

std::optional<ComputedMoments> computed_moments(std::string_view ion, double energy) {
    const auto at = place(ion, energy);
    if (!at || !reaches(at->data->computed, at->energy)) return std::nullopt;
    return interpolate(at->data->computed, at->energy,
                       [](const ComputedRow& low, const ComputedRow& high, double w) {
                           return ComputedMoments{logarithmic(low.range, high.range, w) * micro,
                                                  logarithmic(low.straggle, high.straggle, w) * micro,
                                                  linear(low.skewness, high.skewness, w),
                                                  linear(low.kurtosis, high.kurtosis, w)};
                       });
}

std::optional<Sourced> film_factor(std::string_view ion, std::string_view film, double energy) {
    const auto at = place(ion, energy);
    if (!at || !(at->energy > 0)) return std::nullopt;
    if (film == "Si3N4")
        return Sourced{nitride_factor, Unit::one, "estimate for every ion", Status::estimate, ""};
    if (film != "SiO2") return std::nullopt;
    const double factor =
        interpolate(at->data->oxide, at->energy, [](const OxideRow& low, const OxideRow& high, double w) {
            return linear(low.silicon / low.oxide, high.silicon / high.oxide, w);
        });
    return Sourced{factor, Unit::one, "computed ranges in silicon and thermal oxide", Status::computed,
                   "10 to 1000 keV"};
}

}  // namespace bandwright
