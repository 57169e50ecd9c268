// SPDX-License-Identifier: GPL-3.0-or-later
// A shop of its own for one test: folder, shop file, real recipes, a clock that stands still.
#pragma once

#include <atomic>
#include <filesystem>
#include <functional>
#include <map>
#include <memory>
#include <string>

#include "io/clock.hpp"
#include "io/recipe/shop.hpp"
#include "io/store/store.hpp"
#include "monitor/pipeline/plant.hpp"

namespace tw::test {

/// "2026-03-02T06:00:00Z" or the test ends.
io::Instant at(const std::string& rfc3339);

class FakeClock : public io::Clock {
 public:
  explicit FakeClock(const std::string& rfc3339) { set(rfc3339); }
  [[nodiscard]] io::Instant now() const override { return io::Instant(std::chrono::milliseconds(m_ms)); }
  void set(const std::string& rfc3339) { m_ms = at(rfc3339).time_since_epoch().count(); }
  void advance(std::chrono::milliseconds by) { m_ms += by.count(); }

 private:
  std::atomic<std::int64_t> m_ms{0};
};

/// Removed with everything in it when the test ends.
class TempDir {
 public:
  TempDir();
  ~TempDir();
  TempDir(const TempDir&) = delete;
  TempDir& operator=(const TempDir&) = delete;
  [[nodiscard]] const std::filesystem::path& path() const { return m_path; }

 private:
  std::filesystem::path m_path;
};

void writeFile(const std::filesystem::path& file, const std::string& text);
std::string readFile(const std::filesystem::path& file);

/// Two tanks with ammoniacal copper ("T1", "T2"), a drop folder, loopback with a free port, no sign-in.
class TempShop {
 public:
  /// `extra` goes to the end of the shop file; `signIn` into it.
  explicit TempShop(const std::string& extra = "", const std::string& signIn = "none");

  [[nodiscard]] std::filesystem::path dir() const { return m_dir.path(); }
  [[nodiscard]] std::filesystem::path drop() const { return m_dir.path() / "drop"; }
  [[nodiscard]] std::filesystem::path config() const { return m_dir.path() / "tankward.toml"; }
  [[nodiscard]] const io::Shop& shop() const { return m_shop; }
  [[nodiscard]] const std::map<std::string, io::Recipe>& recipes() const { return m_recipes; }
  [[nodiscard]] monitor::Plant plant() const { return {m_shop, m_recipes}; }
  /// Renames a finished file into the drop folder.
  void dropFile(const std::string& name, const std::string& text) const;
  /// An open store with the recipes registered.
  [[nodiscard]] std::unique_ptr<io::Store> store() const;

 private:
  TempDir m_dir;
  io::Shop m_shop;
  std::map<std::string, io::Recipe> m_recipes;
};

/// A wide table of `rows` liquors of tank T1, one every `step_min` minutes from `first`; copper falls from
/// 22 to 21 g/L over the table, everything else stands at target.
std::string wideTable(int rows, const std::string& first, int step_min = 10, const std::string& tank = "T1");

/// Polls (real threads and files are at work) until `done`; false when that takes longer than `patience`. Long
/// enough for a thousand liquors in an unoptimised build on a busy machine.
[[nodiscard]] bool waitUntil(const std::function<bool()>& done,
                             std::chrono::seconds patience = std::chrono::seconds(180));

}  // namespace tw::test
