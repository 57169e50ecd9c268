// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/app/options.hpp"

#include <gtest/gtest.h>

#include "ui/app/start.hpp"

namespace tw::ui {
namespace {

model::Result<DeskOptions> parse(const char* line) {
  return parseOptions(QString::fromUtf8(line).split(QLatin1Char(' '), Qt::SkipEmptyParts));
}

TEST(DeskOptions, HaveTheDocumentedDefaults) {
  const auto options = parse("");
  ASSERT_TRUE(options);
  EXPECT_EQ(options->url, QUrl(QStringLiteral("http://127.0.0.1:8484")));
  EXPECT_TRUE(options->snapshotDir.isEmpty());
  EXPECT_EQ(options->size, QSize(1400, 900));
}

TEST(DeskOptions, ReadASnapshotLine) {
  const auto options = parse("--url http://127.0.0.1:9 --snapshot out --size 1366x768 --view tank --tank L2-T4 "
                             "--theme dark --lang de --scale 2");
  ASSERT_TRUE(options);
  EXPECT_EQ(options->size, QSize(1366, 768));
  EXPECT_EQ(options->views, QStringList(QStringLiteral("tank")));
  EXPECT_EQ(options->tank, QStringLiteral("L2-T4"));
  EXPECT_EQ(options->theme, ThemeName::Dark);
  EXPECT_EQ(options->language, QStringLiteral("de"));
  EXPECT_DOUBLE_EQ(options->scale, 2.0);
}

TEST(DeskOptions, GrabBothViewsWithoutAView) {
  const auto options = parse("--snapshot out");
  ASSERT_TRUE(options);
  EXPECT_EQ(options->views, (QStringList{QStringLiteral("line"), QStringLiteral("tank")}));
}

class BadLine : public ::testing::TestWithParam<const char*> {};

TEST_P(BadLine, IsAUsageFault) {
  const auto options = parse(GetParam());
  ASSERT_FALSE(options) << GetParam();
  EXPECT_EQ(options.error().kind, model::FaultKind::Usage);
  EXPECT_FALSE(options.error().detail.empty());
}

INSTANTIATE_TEST_SUITE_P(Lines, BadLine,
                         ::testing::Values("--view map", "--view", "--size 1400", "--size 0x900", "--size 99999x900",
                                           "--theme pink", "--lang fr", "--scale 0", "--scale two", "--url nonsense",
                                           "--url ftp://127.0.0.1", "--report", "--colour", "stray"));

TEST(DeskOptions, ATokenFileThatIsNotThereIsBadInput) {
  const auto options = parse("--token-file /nowhere/at/all");
  ASSERT_FALSE(options);
  EXPECT_EQ(options.error().kind, model::FaultKind::Input);
}

TEST(Display, IsOnlyNeededByTheInteractiveForm) {
  EXPECT_TRUE(chooseDisplay(true, false, false).offscreen);
  EXPECT_TRUE(chooseDisplay(true, false, false).refusal.empty());
  EXPECT_FALSE(chooseDisplay(false, false, false).refusal.empty());
  EXPECT_TRUE(chooseDisplay(false, true, false).refusal.empty());
  EXPECT_TRUE(chooseDisplay(false, false, true).refusal.empty());
  EXPECT_FALSE(chooseDisplay(true, false, true).offscreen);
}

}  // namespace
}  // namespace tw::ui
