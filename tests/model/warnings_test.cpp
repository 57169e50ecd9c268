// SPDX-License-Identifier: GPL-3.0-or-later
// Constants here are invented.
#include <gtest/gtest.h>

#include <algorithm>

#include "model/analysis.hpp"
#include "tests/support/bath_builder.hpp"

namespace tw::test {
namespace {

using namespace model;

bool warns(const LiquorReport& report, const std::string& warning) {
  return std::count(report.warnings.begin(), report.warnings.end(), warning) > 0;
}

BathBuilder bathWith(double background, ActivityModel model) {
  BathBuilder bath(model);
  bath.metal("M^2+", 2, 0.01).ligandTotal("L", 0, 0.1).ph(7.0).fixed("X^-", -1, background);
  bath.complex("ML^2+", 2, {{"M^2+", 1}, {"L", 1}}, 4.0);
  bath.complex("ML2^2+", 2, {{"M^2+", 1}, {"L", 2}}, 2.0);  // under 1 % of anything
  bath.solid("M(OH)2", {{"M^2+", 1}, {"OH^-", 2}}, -17.0);
  return bath;
}

TEST(Warnings, DaviesSaysWhenItIsOutOfItsRange) {
  // I = 0.02 + background/2.
  EXPECT_TRUE(bathWith(1.2, ActivityModel::Davies).solve(25.0).reliable);
  const LiquorReport beyond = bathWith(1.5, ActivityModel::Davies).solve(25.0);
  EXPECT_TRUE(warns(beyond, "activity_model_out_of_range"));
  EXPECT_FALSE(beyond.reliable);
  EXPECT_TRUE(bathWith(1.5, ActivityModel::Conditional).solve(25.0).reliable);
}

TEST(Warnings, RowsKeptAsWrittenAreListed) {
  const BathBuilder bath = bathWith(0.1, ActivityModel::Conditional);
  ChemicalSystem system = bath.system();
  system.species[0].formation.K.dH_kJ_mol = -20.0;
  LiquorInput input = bath.input();
  input.temperature_C = 30.0;
  const LiquorReport report = analyse(system, input).value();
  EXPECT_EQ(report.noEnthalpy, (std::vector<std::string>{"ML2^2+", "M(OH)2"}));
  EXPECT_TRUE(report.warnings.empty());
  EXPECT_TRUE(report.reliable);
  input.temperature_C = 25.0;
  EXPECT_TRUE(analyse(system, input).value().noEnthalpy.empty());
}

TEST(Warnings, FarFromItsTemperatureADecidingRowMakesTheResultUnreliable) {
  BathBuilder bath = bathWith(0.1, ActivityModel::Conditional);
  EXPECT_TRUE(bath.solve(40.0, true).reliable);  // 15 K are not more than 15 K
  const LiquorReport report = bath.solve(40.5, true);
  EXPECT_TRUE(warns(report, "no_enthalpy_far:ML^2+"));
  EXPECT_FALSE(warns(report, "no_enthalpy_far:ML2^2+"));
  EXPECT_TRUE(warns(report, "no_enthalpy_far:M(OH)2"));  // it limits ph_up
  EXPECT_FALSE(report.reliable);
}

}  // namespace
}  // namespace tw::test
