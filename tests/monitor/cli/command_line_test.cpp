// SPDX-License-Identifier: GPL-3.0-or-later
#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <nlohmann/json.hpp>

#include <algorithm>

#include "tests/monitor/cli/command_line.hpp"

namespace tw::monitor::cli::testing {
namespace {

using ::testing::HasSubstr;
using nlohmann::json;

const std::string kHealthy = "copper=22,ammonia=85,ph=10.2,temperature=40";

TEST(CommandLine, SolveAnswersOneJsonObject) {
  const Said said = say({"solve", "--recipe", bath("copper_ammine.toml"), "--reading", kHealthy, "--json"});
  ASSERT_EQ(said.status, 0) << said.err;
  const json object = json::parse(said.out);
  EXPECT_EQ(object.at("condition"), "fine");
  EXPECT_EQ(object.at("recipe"), "copper-ammine");
  EXPECT_TRUE(object.at("sludge").is_null());  // not computed in this version
}

TEST(CommandLine, AReadingMayCarryItsUnit) {
  // 22 g/L is 2.9376 oz/gal (avoirdupois ounce, US gallon: NIST SP 811, from memory); 104 degF is 40 degC.
  const Said plain = say({"solve", "--recipe", bath("copper_ammine.toml"), "--reading", kHealthy, "--json"});
  const Said units = say({"solve", "--recipe", bath("copper_ammine.toml"), "--reading",
                          "copper=2.9375823 oz/gal, ammonia=85 g/L, ph=10.2, temperature=104 degF", "--json"});
  ASSERT_EQ(units.status, 0) << units.err;
  EXPECT_NEAR(json::parse(units.out).at("pM").get<double>(), json::parse(plain.out).at("pM").get<double>(), 1e-6);
}

TEST(CommandLine, BuretteInputsComeThroughTheWorksheet) {
  // Copper by EDTA, 5.00 mL sample, 19.72 mL of 0.1000 mol/L: 19.72 x 0.1 x 63.546 / 5 = 25.06 g/L.
  const Said said = say({"solve", "--recipe", bath("copper_ammine.toml"), "--reading",
                         "copper.V=19.72,ammonia=85,ph=10.2,temperature=40", "--json"});
  ASSERT_EQ(said.status, 0) << said.err;
  EXPECT_NEAR(json::parse(said.out).at("totals_mol_L").at("Cu^2+").get<double>(), 25.06 / 63.546, 1e-4);
}

struct WrongReading {
  const char* name;
  const char* reading;
  const char* said;
};

class WrongReadings : public ::testing::TestWithParam<WrongReading> {};

TEST_P(WrongReadings, AreRefusedWithTheReason) {
  const Said said = say({"solve", "--recipe", bath("copper_ammine.toml"), "--reading", GetParam().reading});
  EXPECT_EQ(said.status, 1);
  EXPECT_THAT(said.err, HasSubstr("tankward: "));
  EXPECT_THAT(said.err, HasSubstr(GetParam().said));
}

INSTANTIATE_TEST_SUITE_P(
    Typed, WrongReadings,
    ::testing::Values(
        WrongReading{"missing", "copper=22,ph=10.2,temperature=40", "missing_channel"},
        WrongReading{"no_temperature", "copper=22,ammonia=85,ph=10.2", "temperature"},
        WrongReading{"decimal_comma", "copper=22,5,ammonia=85,ph=10.2,temperature=40", "expected channel=value"},
        WrongReading{"unknown", "cooper=22,ammonia=85,ph=10.2,temperature=40", "cooper"},
        WrongReading{"twice", "copper=22,copper=23,ammonia=85,ph=10.2,temperature=40", "channel_twice"},
        WrongReading{"unit", "copper=22 pH,ammonia=85,ph=10.2,temperature=40", "unit_mismatch"},
        WrongReading{"number", "copper=abc,ammonia=85,ph=10.2,temperature=40", "not a number"},
        WrongReading{"negative", "copper=-1,ammonia=85,ph=10.2,temperature=40", "negative_total"}),
    [](const auto& param) { return std::string(param.param.name); });

TEST(CommandLine, AnImplausibleValueOnlyWarns) {
  const Said said = say({"solve", "--recipe", bath("copper_ammine.toml"), "--reading",
                         "copper=22,ammonia=400,ph=10.2,temperature=40", "--json"});
  ASSERT_EQ(said.status, 0) << said.err;
  EXPECT_EQ(json::parse(said.out).at("warnings").front(), "implausible:ammonia");
}

TEST(CommandLine, AWrongCommandAnswersTwo) {
  EXPECT_EQ(say({}).status, 2);
  EXPECT_EQ(say({"solve"}).status, 2);
  EXPECT_EQ(say({"solve", "--recipe"}).status, 2);
  EXPECT_EQ(say({"boil"}).status, 2);
  EXPECT_EQ(say({"sweep", "--recipe", bath("copper_ammine.toml"), "--reading", kHealthy, "--over", "ph", "--from",
                 "7", "--to", "12", "--steps", "1"})
                .status,
            2);
  EXPECT_EQ(say({"sweep", "--recipe", bath("copper_ammine.toml"), "--reading", kHealthy, "--over", "wind",
                 "--from", "7", "--to", "12", "--steps", "3"})
                .status,
            2);
  EXPECT_EQ(say({"--help"}).status, 0);
}

TEST(CommandLine, ARecipeThatIsNotThereIsNamed) {
  const Said said = say({"solve", "--recipe", "no/such.toml", "--reading", kHealthy});
  EXPECT_EQ(said.status, 1);
  EXPECT_THAT(said.err, HasSubstr("no/such.toml"));
}

TEST(CommandLine, SweepHasBothEndsAndAHeader) {
  const Said said = say({"sweep", "--recipe", bath("copper_ammine.toml"), "--reading", kHealthy, "--over",
                         "ligand:NH3", "--from", "0.5", "--to", "6", "--steps", "12"});
  ASSERT_EQ(said.status, 0) << said.err;
  EXPECT_EQ(std::count(said.out.begin(), said.out.end(), '\n'), 13);
  EXPECT_EQ(said.out.rfind("x,ph,pM,lg_saturation:Cu(OH)2 fresh", 0), 0U);
  EXPECT_THAT(said.out, HasSubstr("\n0.5,"));
  EXPECT_THAT(said.out, HasSubstr("\n6,"));
}

TEST(CommandLine, CheckListsEveryFaultWithItsLine) {
  const auto folder = freshFolder("check");
  std::string text = slurp(bath("copper_ammine.toml"));
  const std::string broken = "horizon_hours = 48";
  text.replace(text.find("horizon_h = 48"), 14, broken);
  std::ofstream(folder / "broken.toml") << text;
  const auto line = std::count(text.begin(), text.begin() + static_cast<long>(text.find(broken)), '\n') + 1;
  const Said said = say({"check", (folder / "broken.toml").string()});
  EXPECT_EQ(said.status, 1);
  EXPECT_THAT(said.err, HasSubstr("broken.toml:" + std::to_string(line) + ": "));
  EXPECT_THAT(said.err, HasSubstr("horizon_h"));
  EXPECT_EQ(say({"check", std::string(TW_SOURCE_DIR) + "/baths"}).status, 0);
}

}  // namespace
}  // namespace tw::monitor::cli::testing
