#include "core/device/material.hpp"

#include <cmath>

#include "core/base/constants.hpp"
#include "core/base/error.hpp"

namespace bandwright {

double Material::value(std::string_view key) const {
    const auto found = parameters.find(key);
    require(found != parameters.end(), name + ": no value for " + std::string(key));
    return found->second.value;
}

bool Material::is_own(std::string_view key) const {
    const auto found = parameters.find(key);
    return found != parameters.end() && found->second.status == Status::yours;
}

double bandgap_at(const Material& material, double temperature) {
    if (material.has("bandgap")) return material.value("bandgap");
    return material.value("bandgap_zero_kelvin") - material.value("bandgap_slope") * temperature *
                                                       temperature /
                                                       (temperature + material.value("bandgap_offset"));
}

Bands bands_at(const Material& material, double temperature) {
    Bands bands;
    bands.relative_permittivity = material.value("relative_permittivity");
    bands.bandgap = bandgap_at(material, temperature);
    bands.electron_affinity = material.value("electron_affinity");
    if (!material.is_own("electron_affinity"))
        bands.electron_affinity += 0.5 * (bandgap_at(material, 300) - bands.bandgap);
    const auto density = [&](const char* key, const char* exponent) {
        const double at_300 = material.value(key);
        if (material.is_own(key) || !material.has(exponent)) return at_300;
        return at_300 * std::pow(temperature / 300, material.value(exponent));
    };
    bands.Nc = density("conduction_band_effective_density", "conduction_band_exponent");
    bands.Nv = density("valence_band_effective_density", "valence_band_exponent");
    bands.log_intrinsic_squared =
        std::log(bands.Nc) + std::log(bands.Nv) - bands.bandgap / constants::thermal_voltage(temperature);
    return bands;
}

const std::vector<std::string>& required_parameters() {
    static const std::vector<std::string> keys{"relative_permittivity",
                                               "electron_affinity",
                                               "bandgap",
                                               "conduction_band_effective_density",
                                               "valence_band_effective_density",
                                               "electron_mobility",
                                               "hole_mobility"};
    return keys;
}

}  // namespace bandwright
