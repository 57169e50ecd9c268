// SPDX-License-Identifier: GPL-3.0-or-later
// One mistake in a good recipe, and the fault it must give.
#include <gtest/gtest.h>

#include <random>

#include "files.hpp"
#include "io/recipe/recipe.hpp"

namespace tw::io {
namespace {

using test::Folder;
using test::kConstants;
using test::kRecipe;
using test::lineOf;
using test::shown;
using test::with;

struct FaultRow {
  const char* id;
  const char* from;
  const char* to;
  const char* code;
  const char* near;  ///< the fault's line is the first that holds this
  const char* says;
};
void PrintTo(const FaultRow& row, std::ostream* out) { *out << row.id; }
class BadRecipe : public testing::TestWithParam<FaultRow> {};

TEST_P(BadRecipe, NamesFileLineValueAndExpectation) {
  const auto& row = GetParam();
  const Folder folder;
  folder.write("constants/a.toml", kConstants);
  const std::string text = with(kRecipe, row.from, row.to);
  const auto file = folder.write("r.toml", text);
  const auto recipe = loadRecipe(file);
  ASSERT_FALSE(recipe);
  const std::string where = file.string() + ":" + std::to_string(lineOf(text, row.near));
  bool found = false;
  for (const auto& fault : recipe.error()) {
    found = found || (fault.code == row.code && fault.where == where &&
                      fault.detail.find(row.says) != std::string::npos);
  }
  EXPECT_TRUE(found) << "expected " << where << " [" << row.code << "] " << row.says << "\n"
                     << shown(recipe.error());
}

std::string rowName(const testing::TestParamInfo<FaultRow>& info) { return info.param.id; }

INSTANTIATE_TEST_SUITE_P(
    Bath, BadRecipe,
    testing::Values(
        FaultRow{"no_format", "format = \"tankward-recipe/1\"", "format = \"tankward-recipe/2\"",
                 "unknown_format", "format", "tankward-recipe/1"},
        FaultRow{"no_volume", "volume_L = 900\n", "", "missing_key", "[bath]", "bath.volume_L is missing"},
        FaultRow{"negative_volume", "volume_L = 900", "volume_L = -900", "out_of_range", "volume_L", "-900"},
        FaultRow{"typo", "horizon_h", "horizont_h", "unknown_key", "horizont_h",
                 "did you mean \"horizon_h\"?"},
        FaultRow{"activity_model", "\"davies\"", "\"davis\"", "unknown_value", "davis",
                 "did you mean \"davies\"?"},
        FaultRow{"text_for_number", "horizon_h = 24", "horizon_h = \"24\"", "wrong_type", "horizon_h",
                 "a number"},
        FaultRow{"number_for_text", "title = \"Sample\"", "title = 3", "wrong_type", "title = 3",
                 "text in quotes"},
        FaultRow{"hazard", "hazards = [\"ammonia\"]", "hazards = [\"amonia\"]", "unknown_caution", "hazards",
                 "did you mean \"ammonia\"?"},
        FaultRow{"metal", "metal = \"Cu^2+\"", "metal = \"Cu^+\"", "unknown_component", "metal = ", "Cu^2+"},
        FaultRow{"ligand", "ligands = [\"NH3\"]", "ligands = [\"NH4\"]", "unknown_component", "ligands",
                 "\"NH4\""},
        FaultRow{"set", "volume_L = 900", "sets = [\"saltty\"]\nvolume_L = 900", "unknown_set",
                 "sets =", "did you mean \"salty\"?"},
        FaultRow{"exclude", "volume_L = 900", "exclude = [\"CuOH+\"]\nvolume_L = 900", "unknown_species",
                 "exclude", "did you mean \"CuOH^+\"?"},
        FaultRow{"margins_off", "volume_L = 900", "margins_off = [\"ph_don\"]\nvolume_L = 900",
                 "unknown_value", "margins_off", "ph_down"},
        FaultRow{"water_activity", "volume_L = 900", "water_activity = true\nvolume_L = 900", "not_used",
                 "water_activity", "sit"},
        FaultRow{"sample", "volume_L = 900", "ph_taken_at = \"sample\"\nvolume_L = 900", "missing_key",
                 "ph_taken_at", "sample_temperature_C"}),
    rowName);

INSTANTIATE_TEST_SUITE_P(
    Component, BadRecipe,
    testing::Values(
        FaultRow{"set_by", "set_by = \"total\"", "set_by = \"totl\"", "unknown_value", "totl",
                 "did you mean \"total\"?"},
        FaultRow{"no_set_by", "set_by = \"total\"\n", "", "missing_key", "[[component]]",
                 "set_by is missing"},
        FaultRow{"no_channel", "set_by = \"total\"\nchannel = \"copper\"", "set_by = \"total\"",
                 "missing_key", "[[component]]", "either channel or mol_L"},
        FaultRow{"unknown_channel", "channel = \"copper\"", "channel = \"coper\"", "unknown_channel", "coper",
                 "did you mean \"copper\"?"},
        FaultRow{"shared_channel", "channel = \"ammonia\"", "channel = \"copper\"", "duplicate",
                 "channel = \"copper\"\n\n[[component]]\nformula = \"H^+\"", "Cu^2+ already"},
        FaultRow{"fixed_without_amount", "mol_L = 0.45\n", "", "missing_key",
                 "[[component]]\nformula = \"SO4^2-\"", "mol_L is missing"},
        FaultRow{"negative_amount", "mol_L = 0.45", "mol_L = -0.45", "out_of_range", "-0.45", "0 or more"},
        FaultRow{"ph_for_a_metal", "set_by = \"total\"\nchannel = \"copper\"", "set_by = \"ph\"",
                 "bad_set_by", "set_by = \"ph\"", "other than H^+"},
        FaultRow{"free_proton", "set_by = \"ph\"\nchannel = \"ph\"", "set_by = \"free\"\nchannel = \"ph\"",
                 "bad_set_by", "set_by = \"free\"\nchannel = \"ph\"", "ph, hydroxide or proton_total"},
        FaultRow{"excess_without_metal", "set_by = \"free\"", "set_by = \"excess\"", "missing_key",
                 "[[component]]\nformula = \"NH3\"", "per_metal is missing"},
        FaultRow{"per_no_metal", "set_by = \"free\"", "set_by = \"excess\"\nper_metal = { \"Zn^2+\" = 2 }",
                 "unknown_component", "per_metal", "Zn^2+"},
        FaultRow{"two_balances", "set_by = \"fixed\"\nmol_L = 0.45", "set_by = \"balance\"", "bad_balance",
                 "set_by = \"balance\"\nother", "only one"},
        FaultRow{"balance_same_sign", "other = \"Cl^-\"", "other = \"K^+\"", "bad_balance",
                 "other =", "other sign"},
        FaultRow{"neutral_balance", "formula = \"Na^+\"", "formula = \"HCN\"", "bad_balance",
                 "set_by = \"balance\"", "no charge"},
        FaultRow{"unused_key", "mol_L = 0.45", "mol_L = 0.45\nother = \"K^+\"", "not_used", "other = \"K^+\"",
                 "no meaning"},
        FaultRow{"duplicate", "formula = \"SO4^2-\"", "formula = \"NH3\"", "duplicate",
                 "formula = \"NH3\"\nset_by = \"fixed\"", "twice"},
        FaultRow{"water", "formula = \"SO4^2-\"", "formula = \"OH^-\"", "reserved_species",
                 "formula = \"OH^-\"", "H^+"},
        FaultRow{"dependent", "formula = \"SO4^2-\"", "formula = \"NH4^+\"", "component_not_independent",
                 "formula = \"NH4^+\"", "other components make"},
        FaultRow{"formula", "formula = \"SO4^2-\"", "formula = \"SO4--\"", "bad_formula", "SO4--", "SO4--"}),
    rowName);

INSTANTIATE_TEST_SUITE_P(
    Channel, BadRecipe,
    testing::Values(
        FaultRow{"unit", "unit = \"g/L\"", "unit = \"g/l\"", "unit_unknown", "g/l", "oz/gal"},
        FaultRow{"unit_of_another_kind", "unit = \"g/L\"", "unit = \"degC\"", "unit_mismatch",
                 "unit = \"degC\"", "concentration"},
        FaultRow{"no_window", "low = 18.0\n", "", "missing_key", "[[channel]]", "low is missing"},
        FaultRow{"window_order", "target = 22.0", "target = 17.0", "bad_window", "target = 17.0",
                 "low 18, target 17, high 26"},
        FaultRow{"window_outside", "plausible = [0.0, 80.0]", "plausible = [0.0, 25.0]", "bad_window",
                 "plausible = [0.0, 25.0]", "window inside"},
        FaultRow{"plausible_order", "plausible = [0.0, 80.0]", "plausible = [80.0, 0.0]", "bad_window",
                 "[80.0, 0.0]", "lower number first"},
        FaultRow{"plausible_shape", "plausible = [0.0, 80.0]", "plausible = 80.0", "wrong_type",
                 "plausible = 80.0", "[low, high]"},
        FaultRow{"typo_in_limit", "sigma_rel", "sigma_real", "unknown_key", "sigma_real",
                 "did you mean \"sigma_rel\"?"},
        FaultRow{"guard_order", "act_low = 10, caution_low = 12", "act_low = 12, caution_low = 10",
                 "bad_limit", "act_low", "act_low < caution_low"},
        FaultRow{"guard_typo", "caution_low = 12", "caution_lo = 12", "unknown_key", "caution_lo",
                 "caution_low"},
        FaultRow{"duplicate", "id = \"ammonia\"\nunit", "id = \"copper\"\nunit", "duplicate",
                 "id = \"copper\"\nunit", "twice"},
        FaultRow{"bad_id", "id = \"ammonia\"\nunit", "id = \"free ammonia\"\nunit", "bad_id", "free ammonia",
                 "a letter"},
        FaultRow{"column_name", "id = \"ammonia\"\nunit", "id = \"lot\"\nunit", "bad_id", "id = \"lot\"",
                 "drop files"},
        FaultRow{"ph_unit", "unit = \"pH\"", "unit = \"mV\"", "unit_mismatch", "unit = \"mV\"", "pH"}),
    rowName);

INSTANTIATE_TEST_SUITE_P(
    Worksheet, BadRecipe,
    testing::Values(
        FaultRow{"units_do_not_work_out", "c_EDTA * M_Cu / sample", "c_EDTA / sample", "unit_mismatch",
                 "value = \"(V", "works out to mol/L; expected g/L"},
        FaultRow{"adds_unlike", "(V - blank)", "(V - c_EDTA)", "unit_mismatch", "value = \"(V",
                 "subtracts mol/L from L"},
        FaultRow{"unknown_name", "(V - blank)", "(V - blnk)", "unknown_name", "value = \"(V",
                 "did you mean \"blank\"?"},
        FaultRow{"syntax", "(V - blank)", "((V - blank)", "bad_expression", "value = \"((V", "parenthesis"},
        FaultRow{"input_unit", "title = \"Burette\", unit = \"mL\"", "title = \"Burette\", unit = \"ml\"",
                 "unit_unknown", "inputs", "\"ml\""},
        FaultRow{"titrant", "titrant = \"c_EDTA\"", "titrant = \"c_EDAT\"", "unknown_name", "titrant",
                 "did you mean \"c_EDTA\"?"},
        FaultRow{"caution", "steps = [\"Pipette the sample.\"]\ncaution = [\"ammonia\"]",
                 "steps = [\"Pipette the sample.\"]\ncaution = [\"poison\"]", "unknown_caution", "poison",
                 "\"poison\""},
        FaultRow{"itself", "(V - blank)", "copper / copper * (V - blank)", "unknown_name", "value = \"copper",
                 "\"copper\""},
        FaultRow{
            "circular", "max_age_h = 12",
            "max_age_h = 12\n[channel.worksheet]\nvalue = \"copper * f\"\nconstants = { f = { value = 2 } }\n"
            "[[channel]]\nid = \"third\"\nunit = \"g/L\"\nlow = 1\ntarget = 2\nhigh = 3\nplausible = [0, 9]\n"
            "[channel.worksheet]\nvalue = \"third2\"\n"
            "[[channel]]\nid = \"third2\"\nunit = \"g/L\"\nlow = 1\ntarget = 2\nhigh = 3\nplausible = [0, "
            "9]\n"
            "[channel.worksheet]\nvalue = \"third + ammonia\"",
            "circular", "value = \"third2\"", "itself"}),
    rowName);

INSTANTIATE_TEST_SUITE_P(
    Rest, BadRecipe,
    testing::Values(
        FaultRow{"ratio_channel", "of = \"ammonia\"", "of = \"amonia\"", "unknown_channel", "amonia",
                 "did you mean \"ammonia\"?"},
        FaultRow{"ratio_unit", "of = \"ammonia\"", "of = \"temperature\"", "unit_mismatch", "of = \"temp",
                 "degC"},
        FaultRow{"ratio_by", "by = \"mole\"", "by = \"moles\"", "unknown_value", "moles",
                 "did you mean \"mole\"?"},
        FaultRow{"ratio_name", "id = \"ammonia-to-copper\"", "id = \"copper\"", "duplicate",
                 "id = \"copper\"\nof", "already"},
        FaultRow{"solid", "solid = \"Cu(OH)2 fresh\"", "solid = \"Cu(OH)2 frsh\"", "unknown_solid", "frsh",
                 "did you mean \"Cu(OH)2 fresh\"?"},
        FaultRow{"role", "role = \"aged\"", "role = \"old\"", "unknown_value", "role = \"old\"", "sludge"},
        FaultRow{"watched_twice", "solid = \"CuO aged\"", "solid = \"Cu(OH)2 fresh\"", "duplicate",
                 "solid = \"Cu(OH)2 fresh\"\nrole = \"aged\"", "already"},
        FaultRow{"saturation_limit_of_aged", "role = \"aged\"",
                 "role = \"aged\"\nlimits = { lg_saturation = { caution = -0.3, act = 0 } }", "not_used",
                 "lg_saturation", "scale"},
        FaultRow{"limit_order", "ph_up = { caution = 0.6, act = 0.3 }",
                 "ph_up = { caution = 0.3, act = 0.6 }", "bad_limit", "ph_up", "act is 0.6, caution is 0.3"},
        FaultRow{"limit_typo", "ph_up = {", "ph_upp = {", "unknown_key", "ph_upp", "did you mean \"ph_up\"?"},
        FaultRow{"limit_without_act", "caution = 0.6, act = 0.3", "caution = 0.6", "missing_key", "ph_up",
                 "act is missing"},
        FaultRow{"stock_charge", "\"SO4^2-\" = 4.0", "\"SO4^2-\" = 3.0", "charge_unbalanced",
                 "\"SO4^2-\" = 3.0", "+2"},
        FaultRow{"stock_component", "{ \"NH3\" = 13.4 }", "{ \"HCN\" = 13.4 }", "unknown_component", "HCN",
                 "NH3"},
        FaultRow{"stock_kind", "kind = [\"salt\"]", "kind = [\"slat\"]", "unknown_value", "slat",
                 "did you mean \"salt\"?"},
        FaultRow{"stock_unit", "unit = \"kg\"", "unit = \"lb\"", "unknown_value", "unit = \"lb\"", "L, kg"},
        FaultRow{"stock_volume", "volume_L_per_kg = 0.2\n", "", "missing_key",
                 "[[stock]]\nid = \"copper-sulfate\"", "volume_L_per_kg"},
        FaultRow{"stock_after", "after = [\"aqua-ammonia\"]", "after = [\"aqua\"]", "unknown_stock", "after",
                 "\"aqua\""},
        FaultRow{"stock_caution", "\"ventilation\"]", "\"ventilator\"]", "unknown_caution", "ventilator",
                 "did you mean \"ventilation\"?"},
        FaultRow{"unknown_table", "[limits]", "[limit]", "unknown_key", "[limit]",
                 "did you mean \"limits\"?"}),
    rowName);

TEST(BadRecipes, ListEveryFaultInTheOrderOfLines) {
  const Folder folder;
  folder.write("constants/a.toml", kConstants);
  std::string text = with(kRecipe, "volume_L = 900", "volum_L = 900");
  text = with(text, "unit = \"g/L\"", "unit = \"g/l\"");
  text = with(text, "by = \"mole\"", "by = \"moles\"");
  const auto recipe = loadRecipe(folder.write("r.toml", text));
  ASSERT_FALSE(recipe);
  ASSERT_GE(recipe.error().size(), 4u) << shown(recipe.error());  // volume_L missing and volum_L unknown
  EXPECT_EQ(recipe.error().front().code, "missing_key");
  EXPECT_EQ(recipe.error().back().code, "unknown_value");
}

TEST(BadRecipes, NameTheTableInTheMessageItself) {
  const Folder folder;
  folder.write("constants/a.toml", kConstants);
  const auto recipe = loadRecipe(folder.write("r.toml", with(kRecipe, "low = 18.0", "low = \"18\"")));
  ASSERT_FALSE(recipe);
  EXPECT_NE(recipe.error()[0].detail.find("channel copper"), std::string::npos) << shown(recipe.error());
  EXPECT_NE(recipe.error()[0].detail.find("18"), std::string::npos);
  EXPECT_NE(recipe.error()[0].detail.find("expected a number"), std::string::npos);
}

TEST(BadRecipes, NoDamageToTheTextMakesTheReaderFall) {
  const Folder folder;
  folder.write("constants/a.toml", kConstants);
  const std::string good = kRecipe;
  const std::string marks = "[]{}=\"#^+-.,0a \n";
  std::mt19937 random(99);
  std::uniform_int_distribution<std::size_t> place(0, good.size() - 1), mark(0, marks.size() - 1), kind(0, 2);
  int refused = 0;
  for (int i = 0; i < 300; ++i) {
    std::string text = good;
    const auto at = place(random);
    switch (kind(random)) {
      case 0:
        text[at] = marks[mark(random)];
        break;
      case 1:
        text.erase(at, 1 + place(random) / 20);
        break;
      default:
        text.insert(at, 1, marks[mark(random)]);
    }
    const auto recipe = loadRecipe(folder.write("r.toml", text));
    if (recipe) continue;
    ++refused;
    for (const auto& fault : recipe.error()) {
      EXPECT_FALSE(fault.code.empty());
      EXPECT_FALSE(fault.where.empty()) << fault.detail;
      EXPECT_FALSE(fault.detail.empty());
    }
  }
  EXPECT_GT(refused, 100);
}

TEST(BadRecipes, AnOwnRowForWhichAComponentIsMissingIsAFault) {
  const Folder folder;
  folder.write("constants/a.toml", kConstants);
  const auto recipe = loadRecipe(folder.write("r.toml", std::string(kRecipe) + R"(
[[species]]
formula = "CuCN"
from = { "Cu^+" = 1, "CN^-" = 1 }
lg_K = 9
source = "invented"
provenance = "from memory"
)"));
  ASSERT_FALSE(recipe);
  EXPECT_EQ(recipe.error()[0].code, "unknown_component") << shown(recipe.error());
}

TEST(BadRecipes, AFileThatIsNotThereIsWrongInput) {
  const auto recipe = loadRecipe("/nowhere/at/all.toml");
  ASSERT_FALSE(recipe);
  EXPECT_EQ(recipe.error()[0].code, "cannot_read");
  EXPECT_EQ(recipe.error()[0].kind, model::FaultKind::Input);
}

}  // namespace
}  // namespace tw::io
