// SPDX-License-Identifier: GPL-3.0-or-later
// No bytes on a line may crash the reader. RapidCheck prints its seed.
#include <gtest/gtest.h>
#include <rapidcheck.h>

#include <cmath>
#include <string>
#include <vector>

#include "io/serial/frame.hpp"

namespace {

void checkFrames(const std::string& bytes, tw::io::FrameKind kind, const std::string& separator) {
  tw::io::SerialPort settings;
  settings.frame = kind;
  settings.separator = separator;
  settings.columns = {"ph", "temperature"};
  settings.pattern = "(?<ph>\\S+)";
  tw::io::FrameReader reader(settings);
  for (const auto& outcome : reader.feed(bytes)) {
    RC_ASSERT(outcome.fault.empty() == !outcome.values.empty());
    RC_ASSERT(outcome.line.size() <= 256U);
    for (const auto& value : outcome.values) {
      RC_ASSERT(!value.channel.empty());
      RC_ASSERT(std::isfinite(value.value));
    }
  }
}

}  // namespace

TEST(FrameBytes, SurviveNoise) {
  const auto kind = rc::gen::element(tw::io::FrameKind::Named, tw::io::FrameKind::Columns, tw::io::FrameKind::Pattern);
  EXPECT_TRUE(rc::check("noise", [&](const std::vector<std::string>& lines) {
    std::string bytes;
    for (const auto& line : lines) bytes += line + '\n';
    checkFrames(bytes, *kind, *rc::gen::element(std::string(";"), std::string(" "), std::string("\t"), std::string("")));
  }));
}

TEST(FrameBytes, SurviveMutatedFrames) {
  EXPECT_TRUE(rc::check("mutated frames", [] {
    std::string line = *rc::gen::element(std::string("ph=10.21 temperature=41.5"),
                                         std::string("ph 10.21 pH; temperature 41.5 degC*33"), std::string("ph=-.5e-3"));
    for (int i = *rc::gen::inRange(1, 6); i > 0; --i) {
      const auto at = *rc::gen::inRange<std::size_t>(0, line.size());
      line[at] = *rc::gen::oneOf(rc::gen::arbitrary<char>(), rc::gen::elementOf(std::string("=;,.+-* eE0")));
    }
    checkFrames(line + '\n', tw::io::FrameKind::Named, ";");
  }));
}
