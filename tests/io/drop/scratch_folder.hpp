// SPDX-License-Identifier: GPL-3.0-or-later
// A real folder under the build directory, empty at the start and gone at the end.
#pragma once

#include <gtest/gtest.h>

#include <algorithm>
#include <filesystem>
#include <fstream>
#include <sstream>
#include <string>
#include <vector>

namespace tw::test {

class ScratchFolder {
 public:
  ScratchFolder() {
    const auto* info = testing::UnitTest::GetInstance()->current_test_info();
    m_path = std::filesystem::path(TW_BINARY_DIR) / "scratch" /
             (std::string(info->test_suite_name()) + '.' + info->name());
    std::filesystem::remove_all(m_path);
    std::filesystem::create_directories(m_path);
  }
  ScratchFolder(const ScratchFolder&) = delete;
  ScratchFolder& operator=(const ScratchFolder&) = delete;
  ~ScratchFolder() {
    std::error_code ignored;
    std::filesystem::remove_all(m_path, ignored);
  }

  [[nodiscard]] const std::filesystem::path& path() const { return m_path; }

  void write(const std::string& name, const std::string& bytes) const {
    std::ofstream(m_path / name, std::ios::binary) << bytes;
  }
  [[nodiscard]] std::string read(const std::string& name) const {
    std::ifstream in(m_path / name, std::ios::binary);
    std::ostringstream out;
    out << in.rdbuf();
    return out.str();
  }
  [[nodiscard]] bool has(const std::string& name) const { return std::filesystem::exists(m_path / name); }
  /// Names in a folder inside, sorted.
  [[nodiscard]] std::vector<std::string> names(const std::string& inside = ".") const {
    std::vector<std::string> out;
    for (const auto& entry : std::filesystem::directory_iterator(m_path / inside)) {
      out.push_back(entry.path().filename().string());
    }
    std::sort(out.begin(), out.end());
    return out;
  }

 private:
  std::filesystem::path m_path;
};

}  // namespace tw::test
