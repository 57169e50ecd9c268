// SPDX-License-Identifier: GPL-3.0-or-later
// The solver threads: each has a read-only view of the store, takes the newest pending liquor of a tank
// first (the present matters more than the past), and hands what came out to a callback.
//
// What is pending stands in the store, not here: the pool reads the list when woken, so that nothing is
// lost in a crash and nothing is solved twice while it runs.
#pragma once

#include <condition_variable>
#include <cstddef>
#include <cstdint>
#include <deque>
#include <filesystem>
#include <functional>
#include <map>
#include <memory>
#include <mutex>
#include <optional>
#include <set>
#include <string>
#include <thread>
#include <vector>

#include "io/clock.hpp"
#include "io/store/store.hpp"
#include "monitor/pipeline/plant.hpp"

namespace tw::monitor {

/// What became of one pending liquor.
struct LiquorOutcome {
  io::PendingLiquor liquor;
  std::optional<io::ResultRow> result;   ///< absent: incomplete, or `fault`
  std::optional<model::Fault> fault;     ///< complete, and no solution exists
};

class SolverPool {
 public:
  using Task = std::function<void(io::Store& readOnly)>;
  /// `onOutcome` runs on a solver thread and leads to exactly one call of settled().
  SolverPool(const Plant& plant, const io::Clock& clock, std::function<void(LiquorOutcome)> onOutcome);
  /// Stops after the liquors at hand.
  ~SolverPool();

  /// Opens one view of the store a thread; fault of openStore.
  model::Result<model::Done> start(const std::filesystem::path& dataDir, unsigned threads);
  void stop();

  /// The newest result the store holds of a tank: earlier liquors are historic. Before start().
  void seedNewest(const std::string& tank, io::Instant sampledAt);
  /// The list of pending liquors has grown. Any thread.
  void wake();
  /// Other work that wants a processor and the store (reading a drop file). Goes before liquors. Any thread.
  void post(Task task);
  /// The outcome is in the store (`withResult`: as a result), or could not be put there: then wake() will
  /// find the liquor again.
  void settled(const io::PendingLiquor& liquor, bool withResult);

  /// Nothing pending as far as the pool knows, nothing at hand.
  [[nodiscard]] bool idle() const;
  [[nodiscard]] std::size_t pending() const;

 private:
  struct Item {
    std::int64_t mark = 0;
    bool inHand = false;
    bool again = false;  ///< marked anew while in hand
  };
  using Queue = std::map<io::Instant, Item>;

  void run(io::Store& store);
  bool fetch(io::Store& store, std::unique_lock<std::mutex>& lock);
  std::optional<io::PendingLiquor> take();
  LiquorOutcome solve(const io::PendingLiquor& liquor, io::Store& store) const;
  bool newerKnown(const io::PendingLiquor& liquor) const;

  const Plant& m_plant;
  const io::Clock& m_clock;
  std::function<void(LiquorOutcome)> m_onOutcome;

  mutable std::mutex m_mutex;
  std::condition_variable m_wake;
  std::deque<Task> m_tasks;
  std::map<std::string, Queue> m_queues;               ///< by tank
  std::string m_lastTank;                              ///< tanks take turns
  std::map<std::string, io::Instant> m_newestSettled;
  std::set<std::int64_t> m_settledDuringFetch;         ///< marks that may still stand in the list being read
  std::size_t m_inHand = 0, m_busyTasks = 0, m_pending = 0;
  bool m_fetchWanted = false, m_fetching = false, m_stopping = false;
  bool m_listWasCut = false;
  std::vector<std::unique_ptr<io::Store>> m_stores;
  std::vector<std::thread> m_threads;
};

}  // namespace tw::monitor
