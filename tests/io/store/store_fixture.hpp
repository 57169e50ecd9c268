// SPDX-License-Identifier: GPL-3.0-or-later
// What the store's tests share: a fresh folder per test, rows with few words, and the list of forms of
// Store that the contract tests run against.
#pragma once

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <filesystem>
#include <functional>
#include <memory>
#include <string>

#include <unistd.h>

#include "io/store/store.hpp"

namespace tw::io::test {

using namespace std::chrono_literals;

/// A folder under the build folder, gone at the end of the test.
class TempFolder {
 public:
  TempFolder() {
    const auto* info = testing::UnitTest::GetInstance()->current_test_info();
    std::string name = std::string(info->test_suite_name()) + "." + info->name();
    for (char& c : name) {
      if (c == '/') c = '-';
    }
    m_path = std::filesystem::path(TW_BINARY_DIR) / "test-data" / (name + "-" + std::to_string(::getpid()));
    std::filesystem::remove_all(m_path);
    std::filesystem::create_directories(m_path);
  }
  ~TempFolder() {
    std::error_code ignored;
    std::filesystem::remove_all(m_path, ignored);
  }
  TempFolder(const TempFolder&) = delete;
  TempFolder& operator=(const TempFolder&) = delete;
  [[nodiscard]] const std::filesystem::path& path() const { return m_path; }

 private:
  std::filesystem::path m_path;
};

/// 2026-03-02T06:00:00Z and so many minutes.
inline Instant minute(int minutes) {
  return Instant(std::chrono::sys_days(std::chrono::year{2026} / 3 / 2)) + 6h + std::chrono::minutes(minutes);
}

inline NewReading make(const std::string& channel, Instant at, double value,
                       ReadingState state = ReadingState::Accepted) {
  NewReading reading;
  reading.tank = "T1";
  reading.channel = channel;
  reading.sampledAt = {at, 60min};
  reading.value = value;
  reading.unit = "mol/L";
  reading.entered = std::to_string(value);
  reading.op = "AB";
  reading.source = "drop:morning.csv";
  reading.state = state;
  reading.receivedAt = at + 1min;
  return reading;
}

inline ResultRow resultOf(Instant at, std::vector<std::int64_t> readings, double pM = 14.25) {
  ResultRow result;
  result.tank = "T1";
  result.sampledAt = at;
  result.computedAt = at + 2min;
  result.recipeSha256 = "aa";
  result.programVersion = "0.1.0";
  result.condition = "fine";
  result.pM = pM;
  result.json = "{}";
  result.readings = std::move(readings);
  return result;
}

/// The value, or a failed test that says why there is none.
template <class T>
T must(model::Result<T> result) {
  if (!result) throw std::runtime_error(result.error().code + ": " + result.error().detail);
  return std::move(*result);
}

/// One form of Store; opening the same folder again gives the same rows.
struct StoreForm {
  std::string name;
  std::function<model::Result<std::unique_ptr<Store>>(const std::filesystem::path& dataDir)> open;
};

inline const StoreForm kSqlite{"Sqlite", [](const std::filesystem::path& dataDir) {
                                 return openStore(dataDir, StoreMode::ReadWrite);
                               }};

/// Written against the interface alone: another form is one more line in the instantiation.
class StoreContract : public testing::TestWithParam<StoreForm> {
 protected:
  void SetUp() override { open(); }
  void open() { m_store = must(GetParam().open(m_folder.path())); }
  void reopen() {
    m_store.reset();
    open();
  }
  Store& store() { return *m_store; }

  Added add(const NewReading& reading) { return must(store().addReadings({reading})).at(0); }
  std::int64_t settle(const ResultRow& result) {
    return must(store().settleLiquor({.tank = result.tank, .sampledAt = result.sampledAt}, result));
  }
  std::vector<Instant> pendingTimes() {
    std::vector<Instant> times;
    for (const PendingLiquor& liquor : must(store().pendingLiquors(0))) times.push_back(liquor.sampledAt);
    return times;
  }
  void settleAll() {
    for (const PendingLiquor& liquor : must(store().pendingLiquors(0))) {
      must(store().settleLiquor(liquor, resultOf(liquor.sampledAt, {})));
    }
  }

  TempFolder m_folder;
  std::unique_ptr<Store> m_store;
};

inline std::string formName(const testing::TestParamInfo<StoreForm>& info) { return info.param.name; }

}  // namespace tw::io::test
