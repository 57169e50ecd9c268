// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/log.hpp"

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <string>

using testing::EndsWith;
using testing::StartsWith;
using tw::io::LogLevel;

namespace {

std::string logged(LogLevel level, const std::string& value) {
  testing::internal::CaptureStderr();
  tw::io::log(level, "reading_stored", {{"tank", "L2-T4"}, {"value", value}});
  return testing::internal::GetCapturedStderr();
}

}  // namespace

TEST(Log, WritesKeysAndValuesOnOneLine) {
  const std::string line = logged(LogLevel::Info, "10.21");
  EXPECT_THAT(line, StartsWith("time="));
  EXPECT_THAT(line, EndsWith("Z level=info event=reading_stored tank=L2-T4 value=10.21\n"));
}

TEST(Log, QuotesBlanksAndEmptyValues) {
  EXPECT_THAT(logged(LogLevel::Warning, "a b"), EndsWith(" value=\"a b\"\n"));
  EXPECT_THAT(logged(LogLevel::Warning, ""), EndsWith(" value=\"\"\n"));
  EXPECT_THAT(logged(LogLevel::Warning, "a=b"), EndsWith(" value=\"a=b\"\n"));
}

TEST(Log, LetsNoValueForgeASecondEntry) {
  EXPECT_THAT(logged(LogLevel::Error, "x\nlevel=info event=\"y\"\x1b"),
              EndsWith(" value=\"x\\nlevel=info event=\\\"y\\\"\\x1b\"\n"));
}

TEST(Log, DropsEntriesBelowItsLevel) {
  EXPECT_EQ(logged(LogLevel::Debug, "1"), "");
  tw::io::setLogLevel(LogLevel::Error);
  EXPECT_EQ(logged(LogLevel::Warning, "1"), "");
  tw::io::setLogLevel(LogLevel::Info);
}
