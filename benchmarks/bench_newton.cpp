// What one Newton iteration costs a node, in units of one scalar std::exp of the same run, and how it grows
// with the mesh. Right answers are checked before anything is timed. What the numbers mean: README.md beside
// this file. SPDX-License-Identifier: MIT
#include <benchmark/benchmark.h>

#include <cmath>
#include <cstdio>
#include <cstdlib>
#include <ctime>
#include <map>
#include <string>
#include <vector>

#include "core/base/constants.hpp"
#include "io/input/read_structure.hpp"
#include "solvers/adaptive.hpp"

using namespace bandwright;

namespace {

std::string structure_text(bool plain, std::size_t nodes) {
    const std::string models =
        plain ? R"("models":{"statistics":"boltzmann","mobility":"constant","recombination":["srh"]},)" : "";
    return R"({"format":"bandwright-structure 1",)" + models +
           R"("materials":{"m":{"based_on":"Si","electron_lifetime":"1e-7 s","hole_lifetime":"1e-7 s"}},
"layers":[{"name":"p","material":"m","thickness":"2 um"},{"name":"n","material":"m","thickness":"10 um"}],
"doping":[{"kind":"uniform","dopant":"B","concentration":"1e18 cm-3","layer":"p"},
{"kind":"uniform","dopant":"P","concentration":"1e16 cm-3","layer":"n"}],"mesh":{"nodes":)" +
           std::to_string(nodes) + "}}";
}

const DiscreteSystem& system_of(bool plain, std::size_t nodes) {
    static std::map<std::pair<bool, std::size_t>, DiscreteSystem> made;
    const std::pair key{plain, nodes};
    if (const auto found = made.find(key); found != made.end()) return found->second;
    const Structure s = read_structure_text(structure_text(plain, nodes), "bench.json", ".").structure;
    return made.emplace(key, discretize(s, adapted_mesh(s, {-20}, 1e10).mesh)).first->second;
}

/// Processor time since it was made, which a busy machine does not stretch [s].
class Seconds {
  public:
    double spent() const { return static_cast<double>(std::clock() - start_) / CLOCKS_PER_SEC; }

  private:
    std::clock_t start_ = std::clock();
};

// Seconds of one scalar std::exp among many independent ones.
double exp_seconds() {
    std::vector<double> x(1000);
    for (std::size_t k = 0; k < x.size(); ++k) x[k] = -20 + 0.04 * static_cast<double>(k);
    double best = 1;
    for (int round = 0; round < 20; ++round) {
        const Seconds start;
        double sum = 0;
        for (int pass = 0; pass < 200; ++pass) {
            x[static_cast<std::size_t>(pass)] += 1e-9;
            for (const double value : x) sum += std::exp(value);
        }
        benchmark::DoNotOptimize(sum);
        best = std::min(best, start.spent() / (200.0 * static_cast<double>(x.size())));
    }
    return best;
}

void newton(benchmark::State& state, bool plain) {
    const DiscreteSystem& system = system_of(plain, static_cast<std::size_t>(state.range(0)));
    constexpr int points = 20;
    long iterations = 0;
    double seconds = 0;
    for (auto _ : state) {
        BiasWalk walk(system);
        walk.start();
        const long before = walk.iterations();
        const Seconds start;
        for (int k = 1; k <= points; ++k) walk.walk_to(-20.0 * k / points / system.thermal_voltage, 1e40);
        const double spent = start.spent();
        iterations += walk.iterations() - before;
        seconds += spent;
        state.SetIterationTime(spent);
    }
    const double each = seconds / static_cast<double>(iterations) / static_cast<double>(system.nodes());
    state.counters["nodes"] = static_cast<double>(system.nodes());
    state.counters["ns_per_node"] = 1e9 * each;
    state.counters["exp_units"] = each / exp_seconds();
    state.counters["iterations_per_point"] =
        static_cast<double>(iterations) / (static_cast<double>(state.iterations()) * points);
}

// The leakage at -20 V agrees between two meshes within 1e-3.
bool answers_are_right() {
    const DiscreteSystem& system = system_of(true, 5000);
    BiasWalk walk(system);
    walk.start();
    if (walk.walk_to(-20 / system.thermal_voltage, 1e40) != BiasWalk::Arrival::arrived) return false;
    const DiscreteSystem& coarse = system_of(true, 2500);
    BiasWalk other(coarse);
    other.start();
    other.walk_to(-20 / coarse.thermal_voltage, 1e40);
    return walk.flux() < 0 && std::abs(other.flux() / walk.flux() - 1) < 1e-3;
}

}  // namespace

BENCHMARK_CAPTURE(newton, boltzmann_constant_mobility_srh, true)
    ->Arg(500)
    ->Arg(1000)
    ->Arg(10000)
    ->Arg(100000)
    ->Arg(1000000)
    ->UseManualTime()
    ->Unit(benchmark::kMillisecond);
BENCHMARK_CAPTURE(newton, silicon_defaults, false)
    ->Arg(500)
    ->Arg(10000)
    ->UseManualTime()
    ->Unit(benchmark::kMillisecond);

int main(int argc, char** argv) {
    if (!answers_are_right()) {
        std::fprintf(stderr, "the answers are wrong; nothing is timed\n");
        return EXIT_FAILURE;
    }
    benchmark::Initialize(&argc, argv);
    benchmark::RunSpecifiedBenchmarks();
    return EXIT_SUCCESS;
}
