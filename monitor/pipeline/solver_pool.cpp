// SPDX-License-Identifier: GPL-3.0-or-later
#include "monitor/pipeline/solver_pool.hpp"

#include <algorithm>
#include <exception>
#include <utility>

#include "io/log.hpp"
#include "monitor/pipeline/liquor.hpp"

namespace tw::monitor {
namespace {

/// How many pending liquors are known at a time; the rest waits in the store.
constexpr std::size_t kFetchLimit = 20000;
/// Results in hand that wait for their commit: two groups of the writer, so that requests still find room
/// in its queue.
constexpr std::size_t kMostInHand = 512;

model::Fault bug(const char* what) {
  return {"internal_error", "liquor", what, "", model::FaultKind::Machine};
}

}  // namespace

SolverPool::SolverPool(const Plant& plant, const io::Clock& clock,
                       std::function<void(LiquorOutcome)> onOutcome)
    : m_plant(plant), m_clock(clock), m_onOutcome(std::move(onOutcome)) {}

SolverPool::~SolverPool() { stop(); }

model::Result<model::Done> SolverPool::start(const std::filesystem::path& dataDir, unsigned threads) {
  for (unsigned i = 0; i < threads; ++i) {
    auto store = io::openStore(dataDir, io::StoreMode::ReadOnly);
    if (!store) return model::fail(store.error());
    m_stores.push_back(std::move(*store));
  }
  for (const auto& store : m_stores) {
    m_threads.emplace_back([this, view = store.get()] { run(*view); });
  }
  return model::Done{};
}

void SolverPool::stop() {
  {
    const std::lock_guard lock(m_mutex);
    m_stopping = true;
  }
  m_wake.notify_all();
  for (std::thread& thread : m_threads) thread.join();
  m_threads.clear();
  m_stores.clear();
}

void SolverPool::wake() {
  {
    const std::lock_guard lock(m_mutex);
    m_fetchWanted = true;
  }
  m_wake.notify_one();
}

void SolverPool::post(Task task) {
  {
    const std::lock_guard lock(m_mutex);
    m_tasks.push_back(std::move(task));
  }
  m_wake.notify_one();
}

void SolverPool::settled(const io::PendingLiquor& liquor, bool withResult) {
  {
    const std::lock_guard lock(m_mutex);
    --m_inHand;
    if (m_fetching) m_settledDuringFetch.insert(liquor.mark);
    if (withResult) {
      auto [newest, first] = m_newestSettled.try_emplace(liquor.tank, liquor.sampledAt);
      newest->second = std::max(newest->second, liquor.sampledAt);
    }
    Queue& queue = m_queues[liquor.tank];
    const auto item = queue.find(liquor.sampledAt);
    if (item != queue.end() && item->second.again) {
      item->second.inHand = item->second.again = false;
    } else if (item != queue.end()) {
      queue.erase(item);
      --m_pending;
    }
    if (m_listWasCut && m_pending < kFetchLimit / 2) m_fetchWanted = true;
  }
  m_wake.notify_one();
}

void SolverPool::seedNewest(const std::string& tank, io::Instant sampledAt) {
  const std::lock_guard lock(m_mutex);
  m_newestSettled[tank] = sampledAt;
}

bool SolverPool::idle() const {
  const std::lock_guard lock(m_mutex);
  return m_pending == 0 && m_inHand == 0 && m_tasks.empty() && m_busyTasks == 0 && !m_fetchWanted &&
         !m_fetching;
}

std::size_t SolverPool::pending() const {
  const std::lock_guard lock(m_mutex);
  return m_pending;
}

/// With the lock held; released while the store is read.
bool SolverPool::fetch(io::Store& store, std::unique_lock<std::mutex>& lock) {
  if (!m_fetchWanted || m_fetching) return false;
  m_fetchWanted = false;
  m_fetching = true;
  m_settledDuringFetch.clear();
  lock.unlock();
  const auto list = store.pendingLiquors(kFetchLimit);
  lock.lock();
  m_fetching = false;
  if (!list) {
    io::log(io::LogLevel::Error, "pending_list_unreadable", {{"detail", list.error().detail}});
    return true;
  }
  for (const io::PendingLiquor& liquor : *list) {
    // Liquors of a tank that left the shop wait for its return.
    if (m_settledDuringFetch.contains(liquor.mark) || m_plant.tank(liquor.tank) == nullptr) continue;
    auto [item, fresh] = m_queues[liquor.tank].try_emplace(liquor.sampledAt, Item{liquor.mark, false, false});
    if (fresh) {
      ++m_pending;
    } else if (item->second.mark != liquor.mark) {
      item->second.mark = liquor.mark;
      item->second.again = item->second.inHand;
    }
  }
  m_listWasCut = list->size() == kFetchLimit;
  m_wake.notify_all();
  return true;
}

/// Newest first within a tank, tanks in turn. With the lock held.
std::optional<io::PendingLiquor> SolverPool::take() {
  if (m_inHand >= kMostInHand || m_queues.empty()) return std::nullopt;
  auto tank = m_queues.upper_bound(m_lastTank);
  for (std::size_t i = 0; i < m_queues.size(); ++i, ++tank) {
    if (tank == m_queues.end()) tank = m_queues.begin();
    const auto item = std::find_if(tank->second.rbegin(), tank->second.rend(),
                                   [](const auto& entry) { return !entry.second.inHand; });
    if (item == tank->second.rend()) continue;
    item->second.inHand = true;
    ++m_inHand;
    m_lastTank = tank->first;
    return io::PendingLiquor{tank->first, item->first, item->second.mark};
  }
  return std::nullopt;
}

void SolverPool::run(io::Store& store) {
  std::unique_lock lock(m_mutex);
  while (!m_stopping) {
    if (!m_tasks.empty()) {
      Task task = std::move(m_tasks.front());
      m_tasks.pop_front();
      ++m_busyTasks;
      lock.unlock();
      try {
        task(store);
      } catch (const std::exception& e) {
        io::log(io::LogLevel::Error, "task_failed", {{"what", e.what()}});
      }
      lock.lock();
      --m_busyTasks;
      continue;
    }
    if (fetch(store, lock)) continue;
    const auto liquor = take();
    if (!liquor) {
      m_wake.wait(lock);
      continue;
    }
    lock.unlock();
    LiquorOutcome outcome = solve(*liquor, store);
    lock.lock();
    if (outcome.result) outcome.result->historic = newerKnown(*liquor);
    lock.unlock();
    m_onOutcome(std::move(outcome));
    lock.lock();
  }
}

bool SolverPool::newerKnown(const io::PendingLiquor& liquor) const {
  const auto settledAt = m_newestSettled.find(liquor.tank);
  if (settledAt != m_newestSettled.end() && settledAt->second > liquor.sampledAt) return true;
  const auto queue = m_queues.find(liquor.tank);
  return queue != m_queues.end() && !queue->second.empty() &&
         queue->second.rbegin()->first > liquor.sampledAt;
}

LiquorOutcome SolverPool::solve(const io::PendingLiquor& liquor, io::Store& store) const {
  LiquorOutcome outcome{liquor, std::nullopt, std::nullopt};
  try {
    const TankSetup* setup = m_plant.tank(liquor.tank);
    const auto newest = store.newestAccepted(liquor.tank, liquor.sampledAt);
    if (!newest) {
      outcome.fault = newest.error();
      return outcome;
    }
    const LiquorPick pick = pickLiquor(*setup, *newest, liquor.sampledAt);
    if (!pick.complete()) return outcome;
    auto row = solveLiquor(*setup, pick, m_clock.now());
    if (row) {
      outcome.result = std::move(*row);
    } else {
      outcome.fault = row.error();
    }
  } catch (const std::exception& e) {
    outcome.fault = bug(e.what());
  }
  return outcome;
}

}  // namespace tw::monitor
