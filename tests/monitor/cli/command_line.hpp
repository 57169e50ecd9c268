// SPDX-License-Identifier: GPL-3.0-or-later
// Runs one command line in this process and keeps what it said.
#pragma once

#include <filesystem>
#include <fstream>
#include <sstream>
#include <string>
#include <vector>

#include "io/clock.hpp"
#include "monitor/cli/commands.hpp"

namespace tw::monitor::cli::testing {

class FixedClock : public io::Clock {
 public:
  [[nodiscard]] io::Instant now() const override { return io::parseRfc3339("2026-03-02T06:00:00Z")->at; }
};

struct Said {
  int status = 0;
  std::string out, err;
};

inline Said say(const std::vector<std::string>& arguments) {
  std::ostringstream out;
  std::ostringstream err;
  Streams streams{out, err};
  const int status = run(arguments, FixedClock{}, streams);
  return {status, out.str(), err.str()};
}

inline std::string bath(const std::string& name) { return std::string(TW_SOURCE_DIR) + "/baths/" + name; }

inline std::string slurp(const std::filesystem::path& path) {
  std::ifstream file(path, std::ios::binary);
  return {std::istreambuf_iterator<char>(file), {}};
}

/// An empty folder of its own under the build tree, removed first.
inline std::filesystem::path freshFolder(const std::string& name) {
  const std::filesystem::path folder = std::filesystem::path(TW_BINARY_DIR) / "cli_test" / name;
  std::filesystem::remove_all(folder);
  std::filesystem::create_directories(folder);
  return folder;
}

}  // namespace tw::monitor::cli::testing
