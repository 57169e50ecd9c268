// SPDX-License-Identifier: GPL-3.0-or-later
// The one writer: jobs from any thread, run on its own thread against the store, several in one commit
// (at most 5 ms or 256 jobs), each told of its outcome only after the commit is durable.
#pragma once

#include <cstddef>
#include <functional>
#include <memory>

#include "io/store/store.hpp"

namespace tw::io {

class Writer {
 public:
  using Job = std::function<model::Result<model::Done>(Store&)>;
  using Completion = std::function<void(model::Result<model::Done>)>;

  /// Queues at most `bound` jobs.
  Writer(std::unique_ptr<Store> store, std::size_t bound = 1024);
  /// Finishes what was queued, then joins.
  ~Writer();

  /// False when the queue is full (the caller answers 503 or waits); then neither is called. A job that
  /// faults is undone alone (savepoint) and its completion gets the fault; a failed commit faults all of
  /// its group. Completions run on the writer's thread: hand over to the loop there.
  [[nodiscard]] bool submit(Job job, Completion completion);
  /// Jobs queued or running.
  [[nodiscard]] std::size_t backlog() const;

 private:
  struct Impl;
  std::unique_ptr<Impl> m_impl;
};

}  // namespace tw::io
