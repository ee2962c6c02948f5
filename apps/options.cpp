#include "apps/options.hpp"

#include <fmt/format.h>

#include <CLI/CLI.hpp>
#include <sstream>

#include "core/base/error.hpp"
#include "core/base/text.hpp"
#include "core/base/version.hpp"
#include "io/input/quantity.hpp"

namespace bandwright {

namespace {

void add_common(CLI::App& app, CommonOptions& common) {
    app.add_option("FILE", common.file, "structure file (JSON)")->required();
    app.add_option("-o,--output", common.output,
                   "result file; default: structure and command, in the working directory");
    app.add_option("--set", common.overrides,
                   "POINTER=VALUE: replace one value of the structure (repeatable)")
        ->allow_extra_args(false);
    app.add_option("--junction", common.junction, "depth of the junction that figures speak of (um)");
    app.add_option("--max-current", common.max_current,
                   "current density at which a sweep ends (A cm-2, default 1e6)");
    app.add_flag("--no-error-bars", common.no_error_bars, "solve one mesh alone: faster, without errors");
    app.add_flag("--resume", common.resume,
                 "go on from the result file that an interrupted run of the same request left");
    app.add_flag("--json", common.json, "print the summary as JSON on standard output, nothing else there");
    app.add_flag("--quiet", common.quiet, "no progress, no table");
}

// Names that could have been meant by a word, from the app and the command in use.
std::vector<std::string> option_names(const CLI::App& app) {
    std::vector<std::string> names;
    for (const CLI::Option* option : app.get_options())
        for (const std::string& name : option->get_lnames()) names.push_back("--" + name);
    return names;
}

[[noreturn]] void refuse(const std::string& text) { throw InputError("", {{"", text}}); }

void explain(const CLI::ParseError& error, const CLI::App& app, int argc, char** argv) {
    std::vector<std::string> verbs;
    for (const Command& command : commands()) verbs.push_back(command.name);
    if (argc < 2)
        refuse(fmt::format("a command is needed: {}; \"bandwright --help\" says more", joined(verbs)));
    const std::string verb = argv[1];
    const CLI::App* used = nullptr;
    for (const CLI::App* candidate : app.get_subcommands([](const CLI::App*) { return true; }))
        if (candidate->get_name() == verb) used = candidate;
    if (!used) {
        const std::string near = nearest_name(verb, verbs);
        refuse(fmt::format("there is no command \"{}\"{} The commands are {}", verb,
                           near.empty() ? "." : fmt::format("; did you mean \"{}\"?", near), joined(verbs)));
    }
    const std::vector<std::string> names = option_names(*used);
    for (int k = 2; k < argc; ++k) {
        std::string word = argv[k];
        word = word.substr(0, word.find('='));
        if (!word.starts_with("--") || std::find(names.begin(), names.end(), word) != names.end()) continue;
        const std::string near = nearest_name(word, names);
        refuse(fmt::format("{} has no option \"{}\"{}", verb, word,
                           near.empty() ? fmt::format("; it has {}", joined(names))
                                        : fmt::format("; did you mean \"{}\"?", near)));
    }
    if (dynamic_cast<const CLI::RequiredError*>(&error))
        refuse(fmt::format("{} needs a structure file: bandwright {} FILE", verb, verb));
    refuse(fmt::format("{}: {}", verb, error.what()));
}

}  // namespace

double option_value(const std::string& option, const std::string& text, Unit unit) {
    try {
        return parse_quantity(text, unit, BareNumber::in_shown_unit);
    } catch (const QuantityError& error) {
        throw InputError("", {{option, error.what()}});
    }
}

std::vector<double> option_values(const std::string& option, const std::string& text, Unit unit) {
    std::vector<double> values;
    std::stringstream stream(text);
    std::string part;
    while (std::getline(stream, part, ',')) values.push_back(option_value(option, part, unit));
    return values;
}

Exit run_command_line(int argc, char** argv) {
    CLI::App app{"Bandwright solves 1-D Poisson and drift-diffusion equations for a layered structure."};
    app.name("bandwright");
    app.set_version_flag("--version", std::string("bandwright ") + version);
    app.require_subcommand(1);
    CommonOptions common;
    for (int k = 0; k < argc; ++k)
        common.command_line += (k ? " " : "") + std::string(k ? argv[k] : "bandwright");
    std::vector<std::pair<CLI::App*, std::function<Exit(const CommonOptions&)>>> runs;
    for (const Command& command : commands()) {
        CLI::App* sub = app.add_subcommand(command.name, command.help);
        add_common(*sub, common);
        runs.emplace_back(sub, command.prepare(*sub));
    }
    try {
        app.parse(argc, argv);
    } catch (const CLI::Success& success) {
        app.exit(success);  // help and version go to standard output
        return Exit::done;
    } catch (const CLI::ParseError& error) {
        explain(error, app, argc, argv);
    }
    for (const auto& [sub, run] : runs)
        if (sub->parsed()) return run(common);
    return Exit::wrong_input;
}

}  // namespace bandwright
