// SPDX-License-Identifier: GPL-3.0-or-later
// The model against the independent solver (tests/support) on random liquors. Every expected number is
// computed here by that solver in 34 digits; constants and amounts are invented.
#include <gtest/gtest.h>

#include <algorithm>
#include <cmath>
#include <cstdlib>
#include <iostream>
#include <map>

#include "model/analysis.hpp"
#include "tests/property/random_liquors.hpp"
#include "tests/support/independent_solver.hpp"

namespace tw::test {
namespace {

using namespace model;

constexpr double kLgTolerance = 1e-8;      // pM and lg saturation
constexpr double kMarginTolerance = 1e-6;  // of the margin's scale
// Beyond this, rounding of the input alone (1e-16) moves a logarithm by more than 1e-10: such a liquor
// (an unbuffered proton total) is judged by its residual only, in never_fails_test.
constexpr double kConditionMost = 1e5;

int longer(int shortForm, int longForm) { return std::getenv("TW_LONG") != nullptr ? longForm : shortForm; }

struct Worst {
  double value = 0.0;
  std::uint64_t seed = 0;
  void see(double x, std::uint64_t from) {
    if (x > value) value = x, seed = from;
  }
};

std::optional<double> saturation(const LiquorReport& report, const std::string& id) {
  for (const SolidState& solid : report.solids) {
    if (solid.id == id) return solid.lgSaturation;
  }
  ADD_FAILURE() << "no solid " << id;
  return std::nullopt;
}

void compareLg(const char* what, std::optional<double> found, std::optional<double> expected,
               const RandomLiquor& liquor, Worst& worst) {
  ASSERT_EQ(found.has_value(), expected.has_value()) << what << ", " << liquor.describe();
  if (!found) return;
  worst.see(std::abs(*found - *expected), liquor.seed);
  EXPECT_NEAR(*found, *expected, kLgTolerance) << what << ", " << liquor.describe();
}

void compareEquilibrium(const RandomLiquor& liquor, const LiquorReport& report,
                        const Reference& reference, Worst& worst) {
  compareLg("pM", report.pM, reference.pM, liquor, worst);
  compareLg("pH", report.ph, reference.ph, liquor, worst);
  for (std::size_t s = 0; s < liquor.system.solids.size(); ++s) {
    const auto& id = liquor.system.solids[s].id;
    compareLg(id.c_str(), saturation(report, id), reference.lgSaturation[s], liquor, worst);
  }
  const double I = reference.ionicStrength_mol_L;
  EXPECT_NEAR(report.ionicStrength_mol_L, I, 1e-8 * I) << liquor.describe();
  std::string closing;
  for (const Component& component : liquor.system.components) closing += component.other;
  for (std::size_t i = 0; i < liquor.system.components.size(); ++i) {
    if (i == liquor.system.proton) continue;  // cancels to anything: judged by the residual
    const double T = reference.totals_mol_L[i];
    // A balance total is a difference of all the others: near zero charge only rounding is left of it.
    const bool balance = liquor.system.components[i].setBy == SetBy::Balance ||
                         liquor.system.components[i].formula == closing;
    const double allowed = 1e-8 * std::abs(T) + (balance ? 1e-12 * (1.0 + I) : 0.0);
    EXPECT_NEAR(report.totals_mol_L.at(i).second, T, allowed)
        << "total of " << liquor.system.components[i].formula << ", " << liquor.describe();
  }
  for (std::size_t l = 0; l < liquor.system.ligands.size(); ++l) {
    const double F = reference.freeLigands_mol_L[l];
    EXPECT_NEAR(report.freeLigands_mol_L.at(l).second, F, 1e-8 * F) << "free ligand, " << liquor.describe();
  }
}

/// `scale`: what a value of this kind is measured against (1 for pH, K and factor, else the total).
void compareMargin(const std::string& what, const std::optional<Margin>& found,
                   const OptionalMargin& expected, double scale, const RandomLiquor& liquor,
                   Worst& worst) {
  ASSERT_EQ(found.has_value(), expected.has_value())
      << what << ": found " << (found ? found->value : std::nan("")) << ", expected "
      << (expected ? expected->value : std::nan("")) << "; " << liquor.describe();
  if (!found) return;
  const double size = std::max(std::abs(expected->value), scale);
  const double allowed = kMarginTolerance * size + expected->tolerance;
  worst.see(std::abs(found->value - expected->value) / size, liquor.seed);
  EXPECT_NEAR(found->value, expected->value, allowed) << what << "; " << liquor.describe();
  ASSERT_EQ(found->fraction.has_value(), expected->fraction.has_value()) << what << "; " << liquor.describe();
  if (!found->fraction) return;
  EXPECT_NEAR(*found->fraction, *expected->fraction,
              kMarginTolerance * std::max(1.0, *expected->fraction) + expected->tolerance / scale)
      << what << " fraction; " << liquor.describe();
}

template <class List>
auto named(const List& list, const std::string& name) -> decltype(list.front().second) {
  for (const auto& [key, value] : list) {
    if (key == name) return value;
  }
  ADD_FAILURE() << "no entry for " << name;
  return std::nullopt;
}

struct Seen {
  int liquors = 0, margins = 0, nulls = 0, undecided = 0, pastLine = 0, illConditioned = 0;
  std::map<std::string, int> cells;
};

bool pastLine(const RandomLiquor& liquor, const Reference& reference, bool& near) {
  bool past = false;
  for (std::size_t s = 0; s < liquor.system.solids.size(); ++s) {
    const Solid& solid = liquor.system.solids[s];
    if (solid.role != SolidRole::Sludge || !reference.lgSaturation[s]) continue;
    const double over = *reference.lgSaturation[s] - solid.threshold;
    past = past || over > 0.0;
    near = near || std::abs(over) < kLgTolerance;
  }
  return past;
}

double scaleOf(MarginKind kind, const RandomLiquor& liquor, const Reference& reference) {
  if (kind == MarginKind::MetalGain) return reference.totals_mol_L[liquor.system.metal];
  return 1.0;
}

void compareLigandLoss(const RandomLiquor& liquor, const MarginSet& found,
                       const ReferenceMarginSet& expected, const Reference& reference, Worst& worst) {
  for (const auto& [ligand, margin] : expected.byLigand) {
    double scale = reference.hydroxide_mol_L;
    for (std::size_t i = 0; i < liquor.system.components.size(); ++i) {
      if (liquor.system.components[i].formula == ligand) scale = reference.totals_mol_L[i];
    }
    const auto own = named(found.byLigand, ligand);
    compareMargin("ligand_loss of " + ligand, own, margin, scale, liquor, worst);
  }
  ASSERT_EQ(found.smallest.has_value(), expected.smallest.has_value()) << liquor.describe();
  if (!found.smallest) return;
  EXPECT_NEAR(*found.smallest->fraction, *expected.smallest->fraction,
              kMarginTolerance + expected.smallest->tolerance / expected.smallest->value)
      << "ligand_loss, " << liquor.describe();
}

void compareMargins(const RandomLiquor& liquor, const LiquorReport& report, const Reference& reference,
                    Seen& seen, Worst& worst) {
  bool near = false;
  const bool past = pastLine(liquor, reference, near);
  if (near) return;
  for (std::size_t k = 0; k < kMarginCount; ++k) {
    const auto kind = static_cast<MarginKind>(k);
    const MarginSet& found = report.margins[k];
    if (past) {
      EXPECT_FALSE(found.smallest) << name(kind) << " past the line, " << liquor.describe();
      continue;
    }
    const ReferenceMarginSet& expected = reference.margins[k];
    const double total = reference.totals_mol_L[liquor.system.metal];
    if (expected.undecided || (kind == MarginKind::MetalGain && total <= 0.0)) {
      ++seen.undecided;
      continue;
    }
    ++(expected.smallest ? seen.margins : seen.nulls);
    if (kind == MarginKind::LigandLoss) {
      compareLigandLoss(liquor, found, expected, reference, worst);
      continue;
    }
    const double scale = scaleOf(kind, liquor, reference);
    compareMargin(name(kind), found.smallest, expected.smallest, scale, liquor, worst);
    for (const auto& [id, margin] : expected.bySolid) {
      compareMargin(std::string(name(kind)) + " of " + id, named(found.bySolid, id), margin, scale, liquor,
                    worst);
    }
  }
  seen.pastLine += past ? 1 : 0;
  if (past || reference.margins[static_cast<std::size_t>(MarginKind::MetalGain)].undecided) return;
  for (const auto& [metal, margin] : reference.metalGain) {
    for (const SecondMetal& second : report.secondMetals) {
      if (second.formula != metal) continue;
      double total = 0.0;
      for (const auto& [formula, T] : report.totals_mol_L) total = formula == metal ? T : total;
      if (total > 0.0) compareMargin("metal_gain of " + metal, second.metalGain, margin, total, liquor, worst);
    }
  }
}

void printCells(const Seen& seen) {
  for (const std::string& cell : allCells()) {
    const auto at = seen.cells.find(cell);
    const int count = at == seen.cells.end() ? 0 : at->second;
    std::cout << "  " << cell << " " << count << "\n";
    EXPECT_GT(count, 0) << "nothing covers " << cell;
  }
}

TEST(Independent, EquilibriumAgreesOnRandomLiquors) {
  Seen seen;
  Worst worst;
  const int count = longer(800, 20000);
  std::vector<std::uint64_t> seeds = regressionSeeds();
  for (int i = 0; i < count; ++i) seeds.push_back(static_cast<std::uint64_t>(1000000 + i));
  for (const std::uint64_t seed : seeds) {
    RandomLiquor liquor = randomLiquor(seed);
    if (seed % 5 == 0) liquor = withOtherAsComponent(std::move(liquor));
    const Reference reference = solveIndependently(liquor.system, liquor.input, false);
    ASSERT_EQ(reference.fault, "") << liquor.describe();
    if (reference.condition > kConditionMost) {
      ++seen.illConditioned;
      continue;
    }
    const auto report = analyse(liquor.system, liquor.input, {.margins = false});
    if (!report) {
      ADD_FAILURE() << report.error().code << " " << report.error().subject << " "
                    << report.error().detail << "; " << liquor.describe();
      continue;
    }
    ++seen.liquors;
    for (const auto& cell : liquor.cells) ++seen.cells[cell];
    compareEquilibrium(liquor, *report, reference, worst);
  }
  EXPECT_LT(seen.illConditioned, count / 25);
  std::cout << seen.liquors << " liquors, worst lg deviation " << worst.value << " (seed " << worst.seed
            << "), " << seen.illConditioned << " left to the residual test\n";
  printCells(seen);
}

TEST(Independent, MarginsAgreeOnRandomLiquors) {
  Seen seen;
  Worst worst, worstLg;
  const int count = longer(240, 3000);
  for (int i = 0; i < count; ++i) {
    RandomLiquor liquor = randomLiquor(static_cast<std::uint64_t>(2000000 + i));
    if (i % 5 == 0) liquor = withOtherAsComponent(std::move(liquor));
    const Reference reference = solveIndependently(liquor.system, liquor.input, true);
    ASSERT_EQ(reference.fault, "") << liquor.describe();
    if (reference.condition > kConditionMost) {
      ++seen.illConditioned;
      continue;
    }
    const auto report = analyse(liquor.system, liquor.input);
    if (!report) {
      ADD_FAILURE() << report.error().code << " " << report.error().subject << "; " << liquor.describe();
      continue;
    }
    ++seen.liquors;
    for (const auto& cell : liquor.cells) ++seen.cells[cell];
    compareEquilibrium(liquor, *report, reference, worstLg);
    compareMargins(liquor, *report, reference, seen, worst);
  }
  std::cout << seen.liquors << " liquors (" << seen.pastLine << " past a line), " << seen.margins
            << " margins and " << seen.nulls << " nulls compared, " << seen.undecided
            << " decided by rounding; worst relative margin deviation " << worst.value << " (seed "
            << worst.seed << "), worst lg deviation " << worstLg.value << "\n";
  EXPECT_GE(seen.liquors, 200);
  EXPECT_GT(seen.margins, seen.liquors);
  printCells(seen);
}

}  // namespace
}  // namespace tw::test
