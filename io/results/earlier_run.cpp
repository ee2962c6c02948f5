#include "io/results/earlier_run.hpp"

#include <algorithm>
#include <nlohmann/json.hpp>
#include <optional>

#include "core/base/error.hpp"
#include "io/results/hdf5_file.hpp"

namespace bandwright {

namespace {

[[noreturn]] void refuse(const std::string& what) {
    throw InputError("", {{"--resume", "the result file that is there belongs to " + what +
                                           "; give another --output, or remove it"}});
}

/// Where a requested bias comes from.
struct Origin {
    bool earlier;
    std::size_t row;
};

std::vector<Origin> origins(const std::vector<double>& requested, const std::vector<double>& earlier,
                            const std::vector<double>& now) {
    std::vector<Origin> list;
    for (const double bias : requested) {
        const auto there = std::find(now.begin(), now.end(), bias);
        const auto before = std::find(earlier.begin(), earlier.end(), bias);
        if (there != now.end())
            list.push_back({false, static_cast<std::size_t>(there - now.begin())});
        else if (before != earlier.end())
            list.push_back({true, static_cast<std::size_t>(before - earlier.begin())});
    }
    return list;
}

const std::vector<double>& find(const std::map<std::string, std::vector<double>>& values, const std::string& name) {
    const auto found = values.find(name);
    if (found == values.end()) refuse("another version of the program (it has no " + name + ")");
    return found->second;
}

// Rows of `width` values each, taken from both.
std::vector<double> merged(const std::vector<Origin>& order, const std::vector<double>& earlier, Unit unit,
                           const std::vector<double>& now, std::size_t width) {
    std::vector<double> out;
    out.reserve(order.size() * width);
    for (const Origin& origin : order)
        for (std::size_t k = 0; k < width; ++k) {
            const std::size_t at = origin.row * width + k;
            out.push_back(origin.earlier ? earlier[at] * per_shown_unit(unit) : now[at]);
        }
    return out;
}

}  // namespace

EarlierRun read_earlier_run(const std::filesystem::path& path) {
    const Hdf5File file = Hdf5File::open(path);
    if (file.attribute("format") != "bandwright-result 1") refuse("another program");
    EarlierRun run;
    run.structure_used = file.text("structure");
    run.command = nlohmann::json::parse(file.text("summary")).value("command", "");
    run.biases = file.values("bias");
    run.depth_um = file.values("depth");
    for (const std::string& name : file.names()) {
        if (name == "bias" || name == "depth") continue;
        const std::vector<std::size_t> lengths = file.lengths(name);
        if (lengths.size() == 1 && lengths[0] == run.biases.size() && file.first_scale(name) == "bias")
            run.over_bias[name] = file.values(name);
        if (lengths.size() == 2) run.over_bias_and_depth[name] = file.values(name);
    }
    return run;
}

void merge_earlier_run(const EarlierRun& earlier, const std::vector<double>& requested, Table& points,
                       Profiles& profiles) {
    if (earlier.depth_um != profiles.depth_um) refuse("another request (its mesh differs)");
    const std::vector<double> now = points.columns.empty() ? std::vector<double>{} : points.columns.front().values;
    const std::vector<Origin> order = origins(requested, earlier.biases, now);
    for (Column& column : points.columns) {
        if (column.name == "bias") {
            column.values = merged(order, earlier.biases, column.unit, now, 1);
            continue;
        }
        column.values = merged(order, find(earlier.over_bias, column.name), column.unit, column.values, 1);
        const auto errors = earlier.over_bias.find(column.name + "_error");
        if (errors != earlier.over_bias.end())
            column.errors = merged(order, errors->second, column.unit, column.errors, 1);
    }
    for (Variable& variable : profiles.variables)
        if (variable.over_bias)
            variable.values = merged(order, find(earlier.over_bias_and_depth, variable.name), variable.unit,
                                     variable.values, profiles.depth_um.size());
}

}  // namespace bandwright
