#include "io/results/write_results.hpp"

#include <fcntl.h>
#include <fmt/chrono.h>
#include <fmt/format.h>
#include <unistd.h>

#include <cerrno>
#include <cmath>
#include <cstring>
#include <ctime>

#include "core/base/error.hpp"
#include "core/base/version.hpp"
#include "io/results/hdf5_file.hpp"
#include "io/results/summary.hpp"

namespace bandwright {

namespace {

std::vector<double> in_shown_unit(const std::vector<double>& values, Unit unit, const std::string& name) {
    std::vector<double> out;
    out.reserve(values.size());
    for (const double value : values) {
        out.push_back(shown(value, unit));
        require(!std::isinf(out.back()), "an infinite value in " + name);
    }
    return out;
}

void describe(Hdf5File& file, const std::string& name, std::string_view units, const std::string& meaning) {
    file.attribute(name, "units", std::string(units));
    file.attribute(name, "long_name", meaning);
}

void write_points(Hdf5File& file, const Table& points) {
    for (const Column& column : points.columns) {
        if (column.name == "bias") continue;
        file.variable(column.name, {"bias"}, in_shown_unit(column.values, column.unit, column.name));
        describe(file, column.name, info(column.unit).text, column.meaning);
        if (column.errors.empty()) continue;
        const std::string error = column.name + "_error";
        file.variable(error, {"bias"}, in_shown_unit(column.errors, column.unit, error));
        describe(file, error, info(column.unit).text, "estimated absolute numerical error of " + column.name);
    }
}

void write_profiles(Hdf5File& file, const Profiles& profiles) {
    std::string names;
    for (const std::string& name : profiles.layer_names) names += (names.empty() ? "" : "\n") + name;
    file.variable("layer", {"depth"}, profiles.layer);
    describe(file, "layer", "1", "index of the layer, 0 at the top");
    file.attribute("layer", "layer_names", names);
    for (const Variable& variable : profiles.variables) {
        std::vector<std::string> scales{"depth"};
        if (variable.over_bias) scales.insert(scales.begin(), "bias");
        file.variable(variable.name, scales, in_shown_unit(variable.values, variable.unit, variable.name));
        describe(file, variable.name, info(variable.unit).text, variable.meaning);
    }
}

void write_measured(Hdf5File& file, const std::vector<MeasuredPoints>& measured) {
    for (std::size_t k = 0; k < measured.size(); ++k) {
        const std::string depth = fmt::format("measured_{}_depth", k),
                          value = fmt::format("measured_{}_concentration", k);
        file.scale(depth, in_shown_unit(measured[k].depth, Unit::length, depth));
        describe(file, depth, "um", "depths of the measured profile " + measured[k].file);
        file.variable(value, {depth}, in_shown_unit(measured[k].concentration, Unit::density, value));
        describe(file, value, "cm-3", "concentrations of the measured profile " + measured[k].file);
    }
}

void write_whole(const std::filesystem::path& path, const Results& results) {
    Hdf5File file = Hdf5File::create(path);
    const Column* bias = results.points.find("bias");
    const std::vector<double> biases = bias ? bias->values : std::vector<double>{};
    file.attribute("", "Conventions", "CF-1.10");
    file.attribute("", "format", "bandwright-result 1");
    file.attribute("", "title", results.title);
    file.attribute("", "bandwright_version", version);
    file.attribute("", "created", fmt::format("{:%Y-%m-%dT%H:%M:%SZ}", fmt::gmtime(std::time(nullptr))));
    file.attribute("", "command_line", results.command_line);
    file.attribute("", "status", results.status);
    file.attribute("", "points_done", static_cast<std::int64_t>(biases.size()));
    file.scale("depth", results.profiles.depth_um);
    describe(file, "depth", "um", "depth below the top surface");
    file.scale("bias", biases);
    describe(file, "bias", "V", "terminal voltage, top minus bottom");
    write_profiles(file, results.profiles);
    write_points(file, results.points);
    write_measured(file, results.measured);
    file.text("structure_file", results.structure_bytes);
    file.text("structure", results.structure_used);
    file.text("summary", summary_json(results));
    file.text("ledger", ledger_json(results.ledger));
    file.close();
}

// What has been written reaches the disk before the name points at it.
void make_durable(const std::filesystem::path& path) {
    const int descriptor = ::open(path.c_str(), O_RDONLY);
    if (descriptor < 0)
        throw FileError(fmt::format("{}: cannot be opened ({})", path.string(), std::strerror(errno)));
    const int code = ::fsync(descriptor);
    const int why = errno;
    ::close(descriptor);
    // A folder on some file systems cannot be synchronised; that is no loss of what we promise.
    if (code != 0 && why != EINVAL)
        throw FileError(fmt::format("{}: cannot be made durable ({})", path.string(), std::strerror(why)));
}

}  // namespace

void write_results(const std::filesystem::path& path, const Results& results) {
    const std::filesystem::path temporary = fmt::format("{}.tmp.{}", path.string(), ::getpid());
    try {
        write_whole(temporary, results);
        make_durable(temporary);
    } catch (...) {
        std::error_code ignored;
        std::filesystem::remove(temporary, ignored);
        throw;
    }
    std::error_code trouble;
    std::filesystem::rename(temporary, path, trouble);
    if (trouble) {
        std::error_code ignored;
        std::filesystem::remove(temporary, ignored);
        throw FileError(
            fmt::format("{}: the new file cannot be put in place ({})", path.string(), trouble.message()));
    }
    const std::filesystem::path folder =
        path.has_parent_path() ? path.parent_path() : std::filesystem::path(".");
    make_durable(folder);
}

}  // namespace bandwright
