#include "core/discretization/discrete_system.hpp"

#include <algorithm>
#include <cmath>
#include <utility>

#include "core/base/constants.hpp"
#include "core/models/fermi_integral.hpp"
#include "core/models/mobility.hpp"
#include "core/models/statistics.hpp"

namespace bandwright {

namespace {

EndCoefficients end_coefficients(const Structure& structure, const Material& material, const Bands& bands) {
    const double kT = constants::thermal_voltage(structure.temperature);  // [eV]
    EndCoefficients end{};
    end.affinity = bands.electron_affinity / kT;
    end.negative_ionization = -(bands.electron_affinity + bands.bandgap) / kT;
    end.log_Nc = std::log(bands.Nc);
    end.log_Nv = std::log(bands.Nv);
    end.log_intrinsic_squared = bands.log_intrinsic_squared;
    end.intrinsic_squared = std::exp(std::max(bands.log_intrinsic_squared, -700.0));
    const double trap = material.has("trap_level") ? material.value("trap_level") / kT : 0;
    end.n1 = std::exp(std::clamp(0.5 * bands.log_intrinsic_squared + trap, -650.0, 650.0));
    end.p1 = std::exp(std::clamp(0.5 * bands.log_intrinsic_squared - trap, -650.0, 650.0));
    end.tau_n = end.tau_p = 1;
    for (const std::string& kind : recombination_in_force(structure, material)) {
        if (kind == "srh") {
            end.srh = 1;
            end.tau_n = material.value("electron_lifetime");
            end.tau_p = material.value("hole_lifetime");
        } else if (kind == "auger") {
            end.auger_n = material.value("electron_auger");
            end.auger_p = material.value("hole_auger");
        } else if (kind == "radiative") {
            end.radiative = material.value("radiative_coefficient");
        }
    }
    end.relative_permittivity = bands.relative_permittivity;
    end.affinity_energy = bands.electron_affinity;
    end.bandgap = bands.bandgap;
    return end;
}

/// Net doping given to the two ends of a cell [m^-3].
struct EndDoping {
    double left, right;
};

// The doping of a cell's ends: the values there, both moved by the same amount so that the cell keeps its
// exact dose.
//
// The mean of a half cell instead would differ from the end value by a quarter of the change across the cell,
// and next to a wider cell by a different amount: in a graded neutral region that shows as charge which is
// not there.
EndDoping end_doping(const Structure& structure, std::size_t layer, double from, double to) {
    const auto net = [&](double x) { return doping_at(structure, layer, x).net(); };
    const auto mean = [&](double a, double b) {  // three-point Gauss rule
        const double middle = 0.5 * (a + b), reach = 0.5 * (b - a) * std::sqrt(0.6);
        return (5 * net(middle - reach) + 8 * net(middle) + 5 * net(middle + reach)) / 18;
    };
    const double h = to - from, middle = 0.5 * (from + to);
    const double lower_half = mean(from, middle), upper_half = mean(middle, to);
    const double left = net(from + 1e-9 * h), right = net(to - 1e-9 * h);
    const double shift = 0.5 * (lower_half + upper_half) - 0.5 * (left + right);
    // A profile that the mesh does not resolve yet: the means of the halves are the safer picture.
    if (std::abs(shift) > 0.1 * std::max(std::abs(left), std::abs(right))) return {lower_half, upper_half};
    return {left + shift, right + shift};
}

ContactCoefficients contact_coefficients(const DiscreteSystem& system, const Contact& contact, bool is_top) {
    const Structure& structure = system.structure;
    const std::size_t cell = is_top ? 0 : system.cells() - 1;
    const EndCoefficients& end = system.of_cell(cell);
    // The doping at the contact itself (a half cell's mean would be first order); the bottom end belongs to
    // the last layer.
    const double bottom = system.mesh.position.back();
    const double x = is_top ? system.mesh.position.front() : std::nextafter(bottom, 0.0);
    const double net = doping_at(structure, system.mesh.layer_of_cell[cell], x).net();
    const double psi = neutral_potential(system.bands[system.material_of_cell[cell]],
                                         structure.models.statistics, structure.temperature, net) /
                       system.thermal_voltage;
    ContactCoefficients result{};
    result.neutral_psi = psi;
    const double eta_n = psi + end.affinity, eta_p = -psi + end.negative_ionization;
    result.log_n = end.log_Nc + eta_n + (system.fermi_dirac ? degeneracy(eta_n).log_gamma : 0);
    result.log_p = end.log_Nv + eta_p + (system.fermi_dirac ? degeneracy(eta_p).log_gamma : 0);
    if (net >= 0) result.hole_velocity = contact.hole_velocity;
    if (net <= 0) result.electron_velocity = contact.electron_velocity;
    return result;
}

}  // namespace

DiscreteSystem discretize(const Structure& structure, Mesh mesh) {
    DiscreteSystem system;
    system.structure = structure;
    system.mesh = std::move(mesh);
    system.thermal_voltage = constants::thermal_voltage(structure.temperature);
    system.fermi_dirac = structure.models.statistics == Statistics::fermi_dirac;
    system.series_resistance = structure.top.series_resistance + structure.bottom.series_resistance;
    for (const Material& material : structure.materials)
        system.bands.push_back(bands_at(material, structure.temperature));
    const std::size_t last_layer = structure.layers.size() - 1;
    const double at_bottom = neutral_potential(
        system.bands[structure.layers[last_layer].material], structure.models.statistics,
        structure.temperature,
        doping_at(structure, last_layer, std::nextafter(system.mesh.position.back(), 0.0)).net());
    for (Bands& bands : system.bands) bands.electron_affinity += at_bottom;
    for (std::size_t k = 0; k < structure.materials.size(); ++k)
        system.materials.push_back(end_coefficients(structure, structure.materials[k], system.bands[k]));
    const std::size_t cells = system.cells();
    system.material_of_cell.resize(cells);
    for (std::vector<double>* values : {&system.dielectric, &system.electron_speed, &system.hole_speed,
                                        &system.net_left, &system.net_right})
        values->resize(cells);
    for (std::size_t cell = 0; cell < cells; ++cell) {
        const std::size_t layer = system.mesh.layer_of_cell[cell];
        const Material& material = structure.materials[structure.layers[layer].material];
        system.material_of_cell[cell] = structure.layers[layer].material;
        const double from = system.mesh.position[cell], to = system.mesh.position[cell + 1], h = to - from;
        require(h > 0, "a cell has no width");
        const EndDoping ends = end_doping(structure, layer, from, to);
        system.net_left[cell] = ends.left;
        system.net_right[cell] = ends.right;
        system.dielectric[cell] = system.of_cell(cell).relative_permittivity *
                                  constants::vacuum_permittivity * system.thermal_voltage /
                                  (constants::elementary_charge * h);
        const MobilityModel model = mobility_model(structure, material);
        const Doping left = doping_at(structure, layer, from + 0.2113248654051871 * h);
        const Doping right = doping_at(structure, layer, to - 0.2113248654051871 * h);
        const auto mean_speed = [&](Carrier carrier) {
            return 0.5 *
                   (mobility(carrier, model, material, left, structure.temperature) +
                    mobility(carrier, model, material, right, structure.temperature)) *
                   system.thermal_voltage / h;
        };
        system.electron_speed[cell] = mean_speed(Carrier::electron);
        system.hole_speed[cell] = mean_speed(Carrier::hole);
    }
    for (std::size_t cell = 0; cell < cells; ++cell)
        if (cell == 0 || system.material_of_cell[cell] != system.material_of_cell[cell - 1])
            system.runs.push_back(cell);
    system.runs.push_back(cells);
    system.top = contact_coefficients(system, structure.top, true);
    system.bottom = contact_coefficients(system, structure.bottom, false);
    return system;
}

State neutral_state(const DiscreteSystem& system) {
    State state;
    state.unknowns.assign(3 * system.nodes(), 0.0);
    const Structure& structure = system.structure;
    for (std::size_t node = 0; node < system.nodes(); ++node) {
        const std::size_t cell = node < system.cells() ? node : node - 1;
        const double net = node < system.cells() ? system.net_left[cell] : system.net_right[cell];
        state.unknowns[3 * node] =
            neutral_potential(system.bands[system.material_of_cell[cell]], structure.models.statistics,
                              structure.temperature, net) /
            system.thermal_voltage;
    }
    return state;
}

}  // namespace bandwright
