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
#include "tests/support/bath_builder.hpp"

namespace tw::test {
namespace {

using namespace model;

constexpr int kRounds = 301;
constexpr int kSweepPoints = 201;  // neighbours close enough that each starts from the last

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

void report(const char* name, ActivityModel activityModel) {
  BathBuilder bath = bathOf25(activityModel);
  const LiquorReport once = bath.solve(40.0);
  const std::size_t species = once.species.size();
  const double cold = median_us([&] { benchmark::DoNotOptimize(analyse(bath.system(), bath.input(), {.margins = false})); });
  SweepRequest request;
  request.over = SweepOver::Ph;
  request.from = 9.4;
  request.to = 9.8;
  request.points = kSweepPoints;
  const double warm = median_us([&] { benchmark::DoNotOptimize(sweep(bath.system(), bath.input(), request)); }) / kSweepPoints;
  const double all = median_us([&] { benchmark::DoNotOptimize(analyse(bath.system(), bath.input())); });
  const double one = exponentials_us(species);
  const double needed = one * std::max(1, once.solver.iterations);
  std::printf("%-12s %zu species, %d iterations: cold %.2f us, warm %.2f us, exponentials %.3f us a pass, "
              "%.2f us in all; cold/exponentials %.1f, warm/pass %.1f; with margins %.0f us\n",
              name, species, once.solver.iterations, cold, warm, one, needed, cold / needed, warm / one, all);
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
