// SPDX-License-Identifier: GPL-3.0-or-later
// The demo shop, and what load and export make of it.
#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <nlohmann/json.hpp>

#include <map>
#include <set>
#include <sstream>

#include "tests/monitor/cli/command_line.hpp"

namespace tw::monitor::cli::testing {
namespace {

namespace fs = std::filesystem;
using ::testing::HasSubstr;

fs::path madeDemo(const std::string& name, const std::string& seed = "5") {
  const fs::path dir = freshFolder(name);
  const Said said = say({"demo", "--dir", dir.string(), "--days", "4", "--seed", seed, "--end",
                         "2026-03-02T06:00:00Z"});
  EXPECT_EQ(said.status, 0) << said.err;
  EXPECT_THAT(said.out, HasSubstr("tankward serve --config"));
  return dir;
}

std::map<std::string, std::string> filesOf(const fs::path& dir) {
  std::map<std::string, std::string> files;
  for (const auto& entry : fs::recursive_directory_iterator(dir)) {
    if (!entry.is_regular_file()) continue;
    const std::string name = fs::relative(entry.path(), dir).string();
    if (name.rfind("data/", 0) != 0) files[name] = slurp(entry.path());
  }
  return files;
}

std::string exported(const fs::path& dir, const std::string& tank, const std::string& form = "--csv") {
  const Said said = say({"export", "--config", (dir / "tankward.toml").string(), "--tank", tank, form});
  EXPECT_EQ(said.status, 0) << said.err;
  return said.out;
}

/// An export without its `id` column (the ninth): ids belong to one store.
std::string withoutIds(const std::string& csv) {
  std::istringstream lines(csv);
  std::string out;
  for (std::string line; std::getline(lines, line);) {
    std::size_t from = 0;
    for (int comma = 0; comma < 8; ++comma) from = line.find(',', from) + 1;
    out += line.erase(from, line.find(',', from) - from) + "\n";
  }
  return out;
}

TEST(Demo, SameSeedEndAndDaysGiveTheSameBytes) {
  const fs::path one = madeDemo("same_one");
  const fs::path two = madeDemo("same_two");
  EXPECT_EQ(filesOf(one), filesOf(two));
  EXPECT_EQ(exported(one, "L2-T1"), exported(two, "L2-T1"));
  EXPECT_EQ(exported(one, "L2-T1", "--json"), exported(two, "L2-T1", "--json"));
  const fs::path other = madeDemo("same_other", "6");
  EXPECT_NE(exported(one, "L2-T1"), exported(other, "L2-T1"));
}

TEST(Demo, LoadsItsHistoryAndSolvesIt) {
  const fs::path dir = madeDemo("history");
  const auto document = nlohmann::json::parse(exported(dir, "L2-T2", "--json"));
  EXPECT_GE(document.at("readings").size(), 20U);
  ASSERT_GE(document.at("results").size(), 8U);
  std::set<std::string> words;
  for (const auto& result : document.at("results")) words.insert(result.at("condition"));
  EXPECT_TRUE(words.count("fine") == 1 || words.count("tight") == 1);
}

TEST(Demo, RefusesToWriteOverAShop) {
  const fs::path dir = madeDemo("twice");
  const Said again = say({"demo", "--dir", dir.string(), "--days", "4"});
  EXPECT_EQ(again.status, 1);
  EXPECT_THAT(again.err, HasSubstr("demo_exists"));
}

TEST(Load, ReadsAnExportBackToTheSameReadingsAndIsSafeToRepeat) {
  const fs::path from = madeDemo("export_from");
  const fs::path to = freshFolder("export_to");
  fs::copy(from / "tankward.toml", to / "tankward.toml");
  fs::copy(from / "baths", to / "baths", fs::copy_options::recursive);
  const std::string text = exported(from, "L1-T3");
  std::ofstream(to / "all.csv", std::ios::binary) << text;
  const std::vector<std::string> load = {"load", "--config", (to / "tankward.toml").string(),
                                         (to / "all.csv").string()};
  const Said first = say(load);
  ASSERT_EQ(first.status, 0) << first.err;
  EXPECT_EQ(withoutIds(exported(to, "L1-T3")), withoutIds(text));
  const Said second = say(load);
  ASSERT_EQ(second.status, 0) << second.err;
  EXPECT_THAT(second.out, HasSubstr("0 readings"));
  EXPECT_EQ(withoutIds(exported(to, "L1-T3")), withoutIds(text));
}

TEST(Load, SaysWhatItRefusedAndWhere) {
  const fs::path dir = madeDemo("refuse");
  std::ofstream(dir / "bad.csv") << "time,tank,operator,copper,ammonia\n"
                                    "2026-03-02T05:00:00Z,L2-T1,kb,21.5,abc\n"
                                    "2026-03-02T05:30:00Z,L9-T9,kb,21.5,80\n";
  const Said said = say({"load", "--config", (dir / "tankward.toml").string(), (dir / "bad.csv").string()});
  EXPECT_EQ(said.status, 1);
  EXPECT_THAT(said.err, HasSubstr("bad.csv:2: "));
  EXPECT_THAT(said.err, HasSubstr("'abc'"));
  EXPECT_THAT(said.err, HasSubstr("bad.csv:3: "));
  EXPECT_THAT(said.out, HasSubstr("1 readings"));
}

TEST(Export, NamesAnUnknownTankAndAWrongTime) {
  const fs::path dir = madeDemo("names");
  const std::string config = (dir / "tankward.toml").string();
  const Said tank = say({"export", "--config", config, "--tank", "L9"});
  EXPECT_EQ(tank.status, 1);
  EXPECT_THAT(tank.err, HasSubstr("unknown_tank 'L9'"));
  const Said time = say({"export", "--config", config, "--tank", "L2-T1", "--since", "yesterday"});
  EXPECT_EQ(time.status, 1);
  EXPECT_THAT(time.err, HasSubstr("time_unreadable 'yesterday'"));
}

}  // namespace
}  // namespace tw::monitor::cli::testing
