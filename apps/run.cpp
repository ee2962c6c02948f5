#include "apps/run.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <atomic>
#include <chrono>
#include <cmath>
#include <csignal>
#include <filesystem>
#include <optional>

#include "apps/console.hpp"
#include "apps/options.hpp"
#include "io/results/earlier_run.hpp"
#include "io/results/summary.hpp"
#include "io/results/write_results.hpp"

namespace bandwright {

namespace {

constexpr double checkpoint_seconds = 8;

std::atomic<bool> stop_asked{false};
static_assert(std::atomic<bool>::is_always_lock_free);

/// Sets the flag on SIGINT and SIGTERM while it lives.
class SignalWatch {
  public:
    SignalWatch() {
        stop_asked = false;
        for (const int signal : {SIGINT, SIGTERM}) std::signal(signal, [](int) { stop_asked = true; });
    }
    ~SignalWatch() {
        for (const int signal : {SIGINT, SIGTERM}) std::signal(signal, SIG_DFL);
    }
    SignalWatch(const SignalWatch&) = delete;
    SignalWatch& operator=(const SignalWatch&) = delete;
};

std::filesystem::path output_path(const std::string& command, const CommonOptions& options) {
    if (!options.output.empty()) return options.output;
    return std::filesystem::path(options.file).stem().string() + "." + command + ".h5";
}

std::string status_word(EndReason end) {
    switch (end) {
        case EndReason::complete:
        case EndReason::current_limit:
            return "complete";
        case EndReason::stopped_short:
            return "stopped short";
        case EndReason::interrupted:
            return "interrupted";
    }
    return "";
}

void take(const BiasOutcome& outcome, Results& results) {
    results.figures = outcome.figures;
    results.junctions = outcome.junctions;
    results.sheet_resistances = outcome.sheet_resistances;
    results.points = outcome.points;
    results.profiles = outcome.profiles;
}

// What an interrupted run of the same request left, when there is something.
std::optional<EarlierRun> earlier_run(const std::filesystem::path& path, const Results& results) {
    if (!std::filesystem::exists(path)) {
        warn(fmt::format("--resume: there is no {} yet; the run starts from the beginning", path.string()));
        return std::nullopt;
    }
    EarlierRun earlier = read_earlier_run(path);
    if (earlier.structure_used != results.structure_used || earlier.command != results.command)
        throw InputError("", {{"--resume", fmt::format("{} is the result of another structure or command; give "
                                                       "another --output, or remove it",
                                                       path.string())}});
    return earlier;
}

// The columns a person wants beside each other.
void print_points(const Table& points) {
    TextTable table;
    struct Pick {
        const char* column;
        const char* heading;
    };
    for (const Pick& pick :
         {Pick{"bias", "bias"}, Pick{"current_density", "current density"}, Pick{"current", "current"},
          Pick{"depletion_width", "depletion width"}, Pick{"peak_field", "peak field"},
          Pick{"extrapolated_field", "extrapolated field"}}) {
        const Column* column = points.find(pick.column);
        if (!column) continue;
        table.headings.push_back(pick.heading);
        table.units.push_back(std::string(info(column->unit).text));
        table.rows.resize(points.rows());
        for (std::size_t row = 0; row < points.rows(); ++row)
            table.rows[row].push_back(
                value_with_error(shown(column->values[row], column->unit),
                                 column->errors.empty() ? 0 : shown(column->errors[row], column->unit)));
    }
    fmt::print("{}", table.text());
}

void print_outcome(const Results& results, const BiasOutcome& outcome, const std::filesystem::path& path,
                   double seconds, const Job& job) {
    fmt::print("{}\n{} K, {} at {} bias points\n\n", results.title, results.temperature, results.command,
               results.points.rows());
    if (job.print)
        job.print(results);
    else
        print_points(results.points);
    fmt::print("\n");
    for (const Figure& figure : results.figures)
        fmt::print("  {:<21} {} {}\n", figure.name,
                   std::isnan(figure.value)
                       ? figure.state
                       : value_with_error(shown(figure.value, figure.unit), shown(figure.error, figure.unit)),
                   std::isnan(figure.value) ? "" : info(figure.unit).text);
    for (const JunctionLine& junction : results.junctions)
        fmt::print("  junction at {:.6g} um, {}: forward bias is V {} 0 (V = V_top - V_bottom)\n",
                   shown(junction.depth, Unit::length), junction.p_above ? "p above n" : "n above p",
                   junction.p_above ? ">" : "<");
    fmt::print(
        "\n  {} nodes, {} Newton iterations in all, {:.2f} s; \u00b1 is the estimated numerical error\n",
        outcome.counts.nodes, outcome.counts.newton_iterations, seconds);
    fmt::print("  written to {}\n", path.string());
}

}  // namespace

std::vector<std::string> cautions(const Structure& structure, double largest_bias) {
    std::vector<std::string> list;
    double widest = 0;
    for (const Layer& layer : structure.layers)
        widest = std::max(widest, bandgap_at(structure.materials[layer.material], structure.temperature));
    if (std::abs(largest_bias) > 50 || widest > 2)
        list.push_back(
            fmt::format("{}: a 1-D result has no edge or corner fields, which set the real limit of a part; "
                        "follow local codes and "
                        "licensed practice, and trust measured silicon over any solution",
                        widest > 2 ? "wide-gap material" : "high voltage"));
    return list;
}

Results results_of_input(const std::string& command, const CommonOptions& options, const ReadResult& input) {
    Results results;
    results.command = command;
    results.title = input.structure.title;
    results.structure_name = std::filesystem::path(options.file).filename().string();
    results.structure_bytes = input.bytes;
    results.structure_used = input.used;
    results.command_line = options.command_line;
    results.temperature = input.structure.temperature;
    results.ledger = ledger(input.structure);
    for (const DopingEntry& entry : input.structure.doping)
        if (const auto* measured = std::get_if<MeasuredDoping>(&entry.shape))
            results.measured.push_back({measured->file, measured->depth, measured->concentration});
    return results;
}

BiasRequest request_from(const CommonOptions& options, std::vector<double> biases) {
    BiasRequest request;
    request.biases = std::move(biases);
    request.error_bars = !options.no_error_bars;
    if (!options.junction.empty())
        request.junction_depth = option_value("--junction", options.junction, Unit::length);
    if (!options.max_current.empty()) {
        request.max_current = option_value("--max-current", options.max_current, Unit::current_density);
        if (!(request.max_current > 0))
            throw InputError(
                "", {{"--max-current", "must be greater than 0 (found \"" + options.max_current + "\")"}});
    }
    return request;
}

Exit solve_and_report(const std::string& command, const CommonOptions& options, const ReadResult& input,
                      const BiasRequest& request) {
    Job job;
    job.can_resume = true;
    job.solve = [&](const BiasRequest& asked, const Hooks& hooks) {
        return run_bias_points(input.structure, asked, hooks);
    };
    return solve_and_report(command, options, input, request, job);
}

Exit solve_and_report(const std::string& command, const CommonOptions& options, const ReadResult& input,
                      const BiasRequest& request, const Job& job) {
    using Clock = std::chrono::steady_clock;
    const std::filesystem::path path = output_path(command, options);
    Results results = results_of_input(command, options, input);
    double largest = 0;
    for (const double bias : request.biases)
        if (std::abs(bias) > std::abs(largest)) largest = bias;
    const std::vector<std::string> caution = cautions(input.structure, largest);

    const SignalWatch watch;
    ProgressBar bar(options.quiet || options.json);
    const auto start = Clock::now();
    auto last_checkpoint = start;
    const auto seconds_since = [](Clock::time_point then) {
        return std::chrono::duration<double>(Clock::now() - then).count();
    };
    BiasRequest asked = request;
    std::optional<EarlierRun> earlier;
    if (options.resume && job.can_resume) earlier = earlier_run(path, results);
    if (earlier)
        for (const double bias : request.biases)
            asked.skip.push_back(std::find(earlier->biases.begin(), earlier->biases.end(), bias) !=
                                 earlier->biases.end());
    const auto take_all = [&](const BiasOutcome& outcome) {
        take(outcome, results);
        if (earlier && !results.profiles.depth_um.empty())
            merge_earlier_run(*earlier, request.biases, results.points, results.profiles);
    };
    Hooks hooks;
    hooks.progress = [&](double share, const std::string& text) { bar.show(share, text); };
    hooks.should_stop = [] { return stop_asked.load(); };
    hooks.wants_checkpoint = [&] { return seconds_since(last_checkpoint) >= checkpoint_seconds; };
    hooks.checkpoint = [&](const BiasOutcome& partial) {
        take_all(partial);
        results.status = "running";
        results.warnings = partial.warnings;
        results.warnings.insert(results.warnings.end(), caution.begin(), caution.end());
        write_results(path, results);
        last_checkpoint = Clock::now();
    };
    const BiasOutcome outcome = job.solve(asked, hooks);
    bar.clear();
    take_all(outcome);
    if (job.add) job.add(results);
    results.status = status_word(outcome.end);
    results.warnings = outcome.warnings;
    if (!outcome.message.empty()) results.warnings.push_back(outcome.message);
    results.warnings.insert(results.warnings.end(), caution.begin(), caution.end());
    const bool has_points = results.points.rows() > 0;
    if (has_points) write_results(path, results);

    for (const std::string& warning : results.warnings)
        if (warning != outcome.message || outcome.end == EndReason::current_limit) warn(warning);
    if (outcome.end == EndReason::stopped_short)
        complain(has_points ? fmt::format("{}. {} of {} points are saved in {}", outcome.message,
                                          results.points.rows(), request.biases.size(), path.string())
                            : outcome.message + ". No point was reached, so no file is written");
    if (outcome.end == EndReason::interrupted)
        complain(has_points ? fmt::format("interrupted; {} of {} points are saved in {}",
                                          results.points.rows(), request.biases.size(), path.string())
                            : "interrupted before the first point; no file is written");
    if (options.json)
        fmt::print("{}\n", summary_json(results));
    else if (!options.quiet && has_points)
        print_outcome(results, outcome, path, seconds_since(start), job);
    if (outcome.end == EndReason::stopped_short) return Exit::stopped_short;
    if (outcome.end == EndReason::interrupted) return Exit::interrupted;
    return Exit::done;
}

}  // namespace bandwright
