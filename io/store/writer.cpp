// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/store/writer.hpp"

#include <time.h>

#include <condition_variable>
#include <deque>
#include <exception>
#include <mutex>
#include <thread>
#include <utility>
#include <vector>

#include "io/log.hpp"

namespace tw::io {

namespace {

/// A group ends after this many jobs or this long, whichever comes first (DESIGN section 2). It never
/// waits for company: what comes during a commit makes the next group.
constexpr std::size_t kGroupJobs = 256;
constexpr std::chrono::nanoseconds kGroupTime = std::chrono::milliseconds(5);

/// Time since some fixed moment: measures a duration, dates nothing.
std::chrono::nanoseconds monotonic() {
  timespec now{};
  ::clock_gettime(CLOCK_MONOTONIC, &now);
  return std::chrono::seconds(now.tv_sec) + std::chrono::nanoseconds(now.tv_nsec);
}

model::Fault bug(const char* what) {
  return {.code = "internal_error",
          .subject = "store job",
          .detail = what,
          .where = {},
          .kind = model::FaultKind::Machine};
}

}  // namespace

struct Writer::Impl {
  struct Entry {
    Job job;
    Completion completion;
    model::Result<model::Done> outcome = model::Done{};
  };

  std::unique_ptr<Store> store;
  std::size_t bound;
  mutable std::mutex mutex;
  std::condition_variable wake;
  std::deque<Entry> queue;
  std::size_t running = 0;  ///< taken from the queue, completion not yet called
  bool stopping = false;
  std::thread thread;

  /// Waits for the first job of a group; nothing left and stopping = empty.
  std::optional<Entry> waitForJob() {
    std::unique_lock lock(mutex);
    wake.wait(lock, [&] { return stopping || !queue.empty(); });
    return pop();
  }

  std::optional<Entry> tryJob() {
    const std::lock_guard lock(mutex);
    return pop();
  }

  /// With the mutex held.
  std::optional<Entry> pop() {
    if (queue.empty()) return std::nullopt;
    Entry entry = std::move(queue.front());
    queue.pop_front();
    ++running;
    return entry;
  }

  model::Result<model::Done> runJob(Entry& entry) {
    try {
      return store->transaction(entry.job);
    } catch (const std::exception& error) {
      return model::fail(bug(error.what()));
    }
  }

  void runGroup(std::vector<Entry>& group) {
    const auto end = monotonic() + kGroupTime;
    const auto committed = store->transaction([&](Store&) -> model::Result<model::Done> {
      for (std::size_t done = 0;;) {
        group[done].outcome = runJob(group[done]);
        if (++done == kGroupJobs || monotonic() >= end) break;
        std::optional<Entry> next = tryJob();
        if (!next) break;
        group.push_back(std::move(*next));
      }
      return model::Done{};
    });
    if (committed) return;
    for (Entry& entry : group) entry.outcome = committed;
  }

  void complete(Entry& entry) {
    try {
      if (entry.completion) entry.completion(std::move(entry.outcome));
    } catch (const std::exception& error) {
      log(LogLevel::Error, "completion_failed", {{"what", error.what()}});
    }
    const std::lock_guard lock(mutex);
    --running;
  }

  void run() {
    std::vector<Entry> group;
    while (std::optional<Entry> first = waitForJob()) {
      group.clear();
      group.push_back(std::move(*first));
      runGroup(group);
      for (Entry& entry : group) complete(entry);
    }
  }
};

Writer::Writer(std::unique_ptr<Store> store, std::size_t bound) : m_impl(std::make_unique<Impl>()) {
  m_impl->store = std::move(store);
  m_impl->bound = bound;
  m_impl->thread = std::thread([impl = m_impl.get()] { impl->run(); });
}

Writer::~Writer() {
  {
    const std::lock_guard lock(m_impl->mutex);
    m_impl->stopping = true;
  }
  m_impl->wake.notify_one();
  m_impl->thread.join();
}

bool Writer::submit(Job job, Completion completion) {
  {
    const std::lock_guard lock(m_impl->mutex);
    if (m_impl->stopping || m_impl->queue.size() >= m_impl->bound) return false;
    m_impl->queue.push_back({.job = std::move(job), .completion = std::move(completion)});
  }
  m_impl->wake.notify_one();
  return true;
}

std::size_t Writer::backlog() const {
  const std::lock_guard lock(m_impl->mutex);
  return m_impl->queue.size() + m_impl->running;
}

}  // namespace tw::io
