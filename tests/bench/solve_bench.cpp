// SPDX-License-Identifier: GPL-3.0-or-later
// Time of one solve of a bath of 25 species beside the time of the exponentials that it cannot do
// without (one per species and iteration), both taken in the same run. Constants are invented.
// Build with TW_BENCH=ON and an optimised build type; the ratio is what to watch, not the seconds.
#include <benchmark/benchmark.h>

#include <algorithm>
#include <chrono>
#include <cmath>
#include <cstdio>
#include <vector>

#include "model/analysis.hpp"
#include "model/closed_liquor.hpp"
#include "model/equilibrium.hpp"
#include "tests/support/bath_builder.hpp"

namespace tw::test {
namespace {

using namespace model;

constexpr int kRounds = 301;
constexpr double kNeighbour_pH = 0.01;  // how far a warm start is from its neighbour: a step of a margin search

BathBuilder bathOf25(ActivityModel activityModel) {
  BathBuilder bath(activityModel);
  bath.metal("Cu^2+", 2, 0.02).ligandTotal("NH3", 0, 0.3).ligandTotal("citrate^3-", -3, 0.02);
  bath.fixed("Na^+", 1, 0.1).fixed("SO4^2-", -2, 0.05).ph(9.4);
  const double ammine[] = {4.0, 7.5, 10.3, 12.0, 11.5};
  for (int n = 1; n <= 5; ++n) {
    bath.complex("Cu(NH3)" + std::to_string(n), 2, {{"Cu^2+", 1}, {"NH3", n}}, ammine[n - 1]);
  }
  bath.complex("NH4^+", 1, {{"NH3", 1}, {"H^+", 1}}, 9.25);
  const double protonated[] = {6.4, 11.1, 14.2};
  for (int n = 1; n <= 3; ++n) {
    bath.complex("H" + std::to_string(n) + "citrate", n - 3, {{"citrate^3-", 1}, {"H^+", n}}, protonated[n - 1]);
  }
  bath.complex("Cu(citrate)", -1, {{"Cu^2+", 1}, {"citrate^3-", 1}}, 7.6);
  bath.complex("CuH(citrate)", 0, {{"Cu^2+", 1}, {"citrate^3-", 1}, {"H^+", 1}}, 11.0);
  bath.complex("CuOH(citrate)", -2, {{"Cu^2+", 1}, {"citrate^3-", 1}, {"H^+", -1}, {"H2O", 1}}, 2.5);
  bath.complex("Cu2(citrate)2", -2, {{"Cu^2+", 2}, {"citrate^3-", 2}}, 15.0);
  bath.hydroxo("Cu^2+", 2, {-7.9, -16.2, -26.6, -39.7});
  bath.complex("CuSO4", 0, {{"Cu^2+", 1}, {"SO4^2-", 1}}, 2.3);
  bath.solid("Cu(OH)2 fresh", {{"Cu^2+", 1}, {"OH^-", 2}}, -19.0);
  return bath;
}

template <class F>
double median_us(const F& work) {
  std::vector<double> times;
  for (int i = 0; i < kRounds; ++i) {
    const auto start = std::chrono::steady_clock::now();
    work();
    times.push_back(std::chrono::duration<double, std::micro>(std::chrono::steady_clock::now() - start).count());
  }
  std::nth_element(times.begin(), times.begin() + kRounds / 2, times.end());
  return times[kRounds / 2];
}

double exponentials_us(std::size_t count) {
  std::vector<double> x(count), y(count);
  for (std::size_t i = 0; i < count; ++i) x[i] = -0.37 * static_cast<double>(i % 80);
  constexpr int kRepeat = 200;  // one lot is near the clock's own tick
  return median_us([&] {
    for (int r = 0; r < kRepeat; ++r) {
      for (std::size_t i = 0; i < count; ++i) y[i] = std::exp(x[i] + 1e-9 * r);
      benchmark::DoNotOptimize(y.data());
    }
  }) / kRepeat;
}

struct Bare {
  double us = 0.0;
  double iterations = 0.0;
};

/// The solver alone, laid out once: from nothing each time, or back and forth between two neighbours.
Bare bareSolve(BathBuilder& bath, bool warmStart) {
  const Layout layout = *layOut(bath.system());
  Constants constants;
  constantsAt(bath.system(), layout, bath.input().temperature_C, constants);
  Problem problem = *statedProblem(bath.system(), layout, bath.input());
  Equilibrium equilibrium(layout);
  Estimate estimate;
  equilibrium.solve(constants, problem, estimate);
  double& lnProton = problem.rows[bath.system().proton].value;
  const double here = lnProton;
  long iterations = 0, solves = 0;
  Bare bare;
  bare.us = median_us([&] {
    lnProton = lnProton == here ? here - kNeighbour_pH * std::log(10.0) : here;
    if (!warmStart) estimate = Estimate{};
    iterations += equilibrium.solve(constants, problem, estimate).iterations;
    ++solves;
  });
  bare.iterations = static_cast<double>(iterations) / static_cast<double>(solves);
  return bare;
}

void report(const char* name, ActivityModel activityModel) {
  BathBuilder bath = bathOf25(activityModel);
  const std::size_t species = bath.solve(40.0).species.size();
  const double pass = exponentials_us(species);
  const Bare cold = bareSolve(bath, false);
  const Bare warm = bareSolve(bath, true);
  const double whole = median_us([&] { benchmark::DoNotOptimize(analyse(bath.system(), bath.input(), {.margins = false})); });
  const double margins = median_us([&] { benchmark::DoNotOptimize(analyse(bath.system(), bath.input())); });
  std::printf("%-12s %zu species, one pass of exponentials %.3f us\n", name, species, pass);
  const auto line = [&](const char* what, const Bare& bare) {
    const double needed = pass * bare.iterations;
    std::printf("  %-22s %6.2f us in %4.1f iterations = %.1f x the exponentials it needs (%.2f us)\n", what, bare.us,
                bare.iterations, bare.us / needed, needed);
  };
  line("cold solve", cold);
  line("warm solve", warm);
  std::printf("  analyse %.1f us, with every margin %.0f us = %.0f warm solves\n", whole, margins, margins / warm.us);
}

void coldSolve(benchmark::State& state) {
  BathBuilder bath = bathOf25(state.range(0) == 0 ? ActivityModel::Conditional : ActivityModel::Davies);
  (void)bath.solve(40.0);
  for (auto _ : state) benchmark::DoNotOptimize(analyse(bath.system(), bath.input(), {.margins = false}));
}
BENCHMARK(coldSolve)->Arg(0)->Arg(1);

}  // namespace
}  // namespace tw::test

int main(int argc, char** argv) {
  benchmark::Initialize(&argc, argv);
  benchmark::RunSpecifiedBenchmarks();
  tw::test::report("conditional", tw::model::ActivityModel::Conditional);
  tw::test::report("davies", tw::model::ActivityModel::Davies);
  return 0;
}
