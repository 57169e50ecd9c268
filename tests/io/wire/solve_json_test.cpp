// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/wire/solve_json.hpp"

#include <gtest/gtest.h>

#include <clocale>
#include <cmath>
#include <limits>
#include <nlohmann/json.hpp>

namespace tw::io::wire {
namespace {

using model::Margin;
using model::MarginKind;
using nlohmann::ordered_json;

Recipe sampleRecipe() {
  Recipe recipe;
  recipe.id = "copper-ammine";
  recipe.sha256 = "aa";
  recipe.resolvedSha256 = "bb";
  recipe.system.activityModel = model::ActivityModel::Sit;
  return recipe;
}

Margin marginOf(double value, std::optional<double> fraction, const std::string& ligand = {}) {
  return {.value = value, .fraction = fraction, .solid = "Cu(OH)2 fresh", .ligand = ligand};
}

model::LiquorReport sampleReport() {
  model::LiquorReport report;
  report.temperature_C = 40.0;
  report.ph = 10.2;
  report.phMeasured = 10.6;
  report.phMeasuredAt_C = 25.0;
  report.ionicStrength_mol_L = 1.9;
  report.pM = 14.2;
  report.freeMetal_mol_L = 3e-15;
  report.freeLigands_mol_L = {{"NH3", 4.9}};
  report.totals_mol_L = {{"Cu^2+", 0.348}, {"NH3", 5.9}, {"H^+", 0.0}};
  report.species = {{"Cu(NH3)4^2+", 2, 0.33, -0.7, -1.2}, {"CuCl^+", 1, 0.0, std::nullopt, std::nullopt}};
  report.solids = {{"Cu(OH)2 fresh", model::SolidRole::Sludge, -2.1, 0.0},
                   {"CuO aged", model::SolidRole::Aged, std::nullopt, 0.25}};
  const auto set = [&](MarginKind kind) -> model::MarginSet& {
    return report.margins[static_cast<std::size_t>(kind)];
  };
  set(MarginKind::PhUp).smallest = marginOf(1.3, {});
  set(MarginKind::PhUp).bySolid = {{"Cu(OH)2 fresh", marginOf(1.3, {})}};
  set(MarginKind::LigandLoss).smallest = marginOf(3.1, 0.52, "NH3");
  set(MarginKind::LigandLoss).byLigand = {{"NH3", marginOf(3.1, 0.52, "NH3")}, {"en", std::nullopt}};
  set(MarginKind::MetalGain).smallest = marginOf(0.9, 2.6);
  set(MarginKind::MetalGain).bySolid = {{"Cu(OH)2 fresh", marginOf(0.9, 2.6)},
                                        {"Zn(OH)2 fresh", std::nullopt}};
  report.secondMetals = {{"Zn^2+", 9.1, 1e-10, std::nullopt}, {"Ni^2+", 8.0, 1e-9, marginOf(0.2, 4.0)}};
  report.warnings = {"no_sigma:CuOH^+"};
  report.noEnthalpy = {"CuOH^+"};
  report.solver = {.iterations = 6, .residual = 1e-15, .residualComponent = "NH3"};
  return report;
}

model::Judgement fine() { return {.condition = model::Condition::Tight, .doubtful = true, .findings = {}}; }

ordered_json sample() {
  return ordered_json::parse(solveJson(sampleRecipe(), sampleReport(), fine(), {"implausible:ph"}));
}

std::vector<std::string> keysOf(const ordered_json& object) {
  std::vector<std::string> keys;
  for (const auto& [key, value] : object.items()) keys.push_back(key);
  return keys;
}

using Keys = std::vector<std::string>;

TEST(SolveJson, HasEveryKeyOfTheContractInItsOrder) {
  EXPECT_EQ(keysOf(sample()), (Keys{"recipe",
                                    "recipe_sha256",
                                    "resolved_sha256",
                                    "activity_model",
                                    "temperature_C",
                                    "ph",
                                    "ph_measured",
                                    "ph_measured_at_C",
                                    "ionic_strength_mol_L",
                                    "water_activity",
                                    "pM",
                                    "lg_activity_metal",
                                    "free_metal_mol_L",
                                    "free_ligands_mol_L",
                                    "sigma",
                                    "totals_mol_L",
                                    "species",
                                    "solids",
                                    "margins",
                                    "sludge",
                                    "metals",
                                    "gases",
                                    "condition",
                                    "doubtful",
                                    "warnings",
                                    "no_enthalpy",
                                    "reliable",
                                    "solver"}));
}

TEST(SolveJson, HasEveryKeyInsideItsParts) {
  const auto json = sample();
  EXPECT_EQ(keysOf(json["species"][0]), (Keys{"formula", "mol_L", "lg_gamma", "lg_activity"}));
  EXPECT_EQ(keysOf(json["solids"][0]), (Keys{"id", "role", "lg_saturation", "threshold", "sigma", "p_over"}));
  const auto& margins = json["margins"];
  EXPECT_EQ(keysOf(margins),
            (Keys{"ph_up", "ph_down", "ligand_loss", "metal_gain", "warming", "cooling", "dilution"}));
  EXPECT_EQ(keysOf(margins["ph_up"]), (Keys{"value", "solid", "sigma"}));
  EXPECT_EQ(keysOf(margins["ligand_loss"]),
            (Keys{"ligand", "mol_L", "fraction", "solid", "sigma", "by_ligand"}));
  EXPECT_EQ(keysOf(margins["ligand_loss"]["by_ligand"]["NH3"]), (Keys{"mol_L", "fraction", "solid"}));
  EXPECT_EQ(keysOf(margins["metal_gain"]), (Keys{"mol_L", "fraction", "solid", "sigma", "by_solid"}));
  EXPECT_EQ(keysOf(json["metals"]["Zn^2+"]), (Keys{"pM", "free_mol_L", "metal_gain"}));
  EXPECT_EQ(keysOf(json["solver"]), (Keys{"iterations", "residual"}));
  EXPECT_EQ(keysOf(json["sigma"]), Keys{"pM"});
}

TEST(SolveJson, CarriesTheNumbersOfTheReport) {
  const auto json = sample();
  EXPECT_EQ(json["recipe"], "copper-ammine");
  EXPECT_EQ(json["activity_model"], "sit");
  EXPECT_EQ(json["ph_measured"], 10.6);
  EXPECT_EQ(json["pM"], 14.2);
  EXPECT_EQ(json["lg_activity_metal"], -14.2);
  EXPECT_EQ(json["free_metal_mol_L"], 3e-15);
  EXPECT_EQ(json["free_ligands_mol_L"]["NH3"], 4.9);
  EXPECT_EQ(keysOf(json["totals_mol_L"]), (Keys{"Cu^2+", "NH3", "H^+"}));
  EXPECT_EQ(json["margins"]["ph_up"]["value"], 1.3);
  EXPECT_EQ(json["margins"]["ligand_loss"]["ligand"], "NH3");
  EXPECT_EQ(json["margins"]["metal_gain"]["by_solid"]["Cu(OH)2 fresh"]["fraction"], 2.6);
  EXPECT_EQ(json["metals"]["Ni^2+"]["metal_gain"]["mol_L"], 0.2);
  EXPECT_EQ(json["condition"], "tight");
  EXPECT_EQ(json["doubtful"], true);
  EXPECT_EQ(json["reliable"], true);
  EXPECT_EQ(json["warnings"], (ordered_json{"implausible:ph", "no_sigma:CuOH^+"}));
  EXPECT_EQ(json["no_enthalpy"], ordered_json::array({"CuOH^+"}));
  EXPECT_EQ(json["solids"][1]["role"], "aged");
  EXPECT_EQ(json["solids"][1]["threshold"], 0.25);
}

TEST(SolveJson, SaysNullWhereThereIsNoNumber) {
  const auto json = sample();
  EXPECT_TRUE(json["sludge"].is_null());
  EXPECT_TRUE(json["gases"].is_null());
  EXPECT_TRUE(json["sigma"]["pM"].is_null());
  EXPECT_TRUE(json["margins"]["ph_down"].is_null());
  EXPECT_TRUE(json["margins"]["ph_up"]["sigma"].is_null());
  EXPECT_TRUE(json["margins"]["ligand_loss"]["by_ligand"]["en"].is_null());
  EXPECT_TRUE(json["margins"]["metal_gain"]["by_solid"]["Zn(OH)2 fresh"].is_null());
  EXPECT_TRUE(json["metals"]["Zn^2+"]["metal_gain"].is_null());
  EXPECT_TRUE(json["species"][1]["lg_gamma"].is_null());
  EXPECT_TRUE(json["solids"][1]["lg_saturation"].is_null());
  EXPECT_TRUE(json["solids"][0]["sigma"].is_null());
  EXPECT_TRUE(json["solids"][0]["p_over"].is_null());
  auto report = sampleReport();
  report.pM.reset();
  report.phMeasured.reset();
  report.ionicStrength_mol_L = std::numeric_limits<double>::quiet_NaN();
  const auto bare = ordered_json::parse(solveJson(sampleRecipe(), report, fine(), {}));
  EXPECT_TRUE(bare["pM"].is_null());
  EXPECT_TRUE(bare["lg_activity_metal"].is_null());
  EXPECT_TRUE(bare["ph_measured"].is_null());
  EXPECT_TRUE(bare["ionic_strength_mol_L"].is_null());
}

TEST(SolveJson, ShowsAScalesOwnMarginWhereTheBathHasNone) {
  auto report = sampleReport();
  auto& set = report.margins[static_cast<std::size_t>(MarginKind::PhDown)];
  set.bySolid = {{"CuO aged", marginOf(0.4, {})}};
  const auto json = ordered_json::parse(solveJson(sampleRecipe(), report, fine(), {}));
  EXPECT_TRUE(json["margins"]["ph_down"]["value"].is_null());
  EXPECT_EQ(json["margins"]["ph_down"]["by_solid"]["CuO aged"]["value"], 0.4);
}

TEST(SolveJson, LosesNoDigitInAnyLocale) {
  auto report = sampleReport();
  report.ph = 0.1 + 0.2;
  report.freeMetal_mol_L = 1.0 / 3.0 * 1e-300;
  const char* before = std::setlocale(LC_ALL, "de_DE.UTF-8");  // a decimal comma, where it is installed
  const std::string text = solveJson(sampleRecipe(), report, fine(), {}, -1);
  if (before != nullptr) std::setlocale(LC_ALL, "C");
  EXPECT_EQ(text.find('\n'), std::string::npos);
  const auto json = ordered_json::parse(text);
  EXPECT_EQ(json["ph"].get<double>(), 0.1 + 0.2);
  EXPECT_EQ(json["free_metal_mol_L"].get<double>(), 1.0 / 3.0 * 1e-300);
}

}  // namespace
}  // namespace tw::io::wire
