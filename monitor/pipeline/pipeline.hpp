// SPDX-License-Identifier: GPL-3.0-or-later
// From what came in to what is known: intake -> store (one commit) -> pending liquor -> solver threads ->
// stored result -> whoever listens.
//
// Durable before answered: every callback comes after the commit. Nothing is lost in a crash: a liquor
// whose result is not stored stands on the store's pending list, and is solved at the next start.
// Queues are bounded: a call that answers false took nothing, and its callback is never called.
#pragma once

#include <cstddef>
#include <functional>
#include <memory>
#include <string>
#include <vector>

#include "io/clock.hpp"
#include "io/incoming.hpp"
#include "io/loop.hpp"
#include "io/store/store.hpp"
#include "io/store/writer.hpp"
#include "monitor/pipeline/intake.hpp"
#include "monitor/pipeline/plant.hpp"
#include "monitor/pipeline/solver_pool.hpp"

namespace tw::monitor {

/// What became of one batch, for its sender.
struct BatchAnswer {
  std::size_t accepted = 0;    ///< stored and usable
  std::size_t duplicates = 0;
  std::size_t events = 0;      ///< stored
  std::vector<io::Refusal> refused;
  std::vector<io::Reading> conflicts;  ///< stored as suspicious
  std::vector<std::int64_t> ids;       ///< of every reading, duplicates with the row they repeat
  std::vector<std::int64_t> eventIds;
};

/// Who wants to know. All calls on the loop's thread, after the commit.
struct PipelineListener {
  std::function<void(const std::vector<io::Reading>& stored)> onReadings;
  std::function<void(const std::vector<io::EventRow>& stored)> onEvents;
  std::function<void(const io::ResultRow& row)> onResult;
  /// A correction or a withdrawn result: what was known of the tank must be read again.
  std::function<void(const std::string& tank)> onChangedPast;
  /// A complete liquor without a solution.
  std::function<void(const io::PendingLiquor& liquor, const model::Fault& fault)> onUnsolved;
};

class Pipeline {
 public:
  template <class T>
  using Then = std::function<void(model::Result<T>)>;

  /// `store` goes to the one writer. Everything else must outlive the pipeline.
  Pipeline(io::Loop& loop, const io::Clock& clock, const Plant& plant, std::unique_ptr<io::Store> store,
           PipelineListener listener);
  ~Pipeline();

  /// Starts `threads` solvers and solves what a crash left pending.
  model::Result<model::Done> start(unsigned threads);

  /// Judged already. One transaction. False: the writer's queue is full.
  [[nodiscard]] bool add(IntakeOutcome outcome, Then<BatchAnswer> then);
  /// Faults of Store::correctReading; `then` gets the new id.
  [[nodiscard]] bool correct(std::int64_t id, io::NewReading corrected, Then<std::int64_t> then);
  [[nodiscard]] bool confirm(std::int64_t id, std::string person, Then<std::int64_t> then);
  /// Any other write, on the writer's thread; `then` on the loop's.
  [[nodiscard]] bool write(io::Writer::Job job, Then<model::Done> then);

  /// Work for a solver thread that has a read-only store at hand.
  void background(SolverPool::Task task) { m_pool.post(std::move(task)); }
  /// Looks again for pending liquors (once a minute, should a settle have failed).
  void wake() { m_pool.wake(); }
  SolverPool& pool() { return m_pool; }

  [[nodiscard]] bool idle() const;
  [[nodiscard]] std::size_t pendingLiquors() const { return m_pool.pending(); }
  [[nodiscard]] std::size_t writerBacklog() const { return m_writer.backlog(); }
  /// Ends the solver threads; the writer ends with the object.
  void stop() { m_pool.stop(); }

 private:
  void onOutcome(LiquorOutcome outcome);
  void settle(LiquorOutcome outcome);

  io::Loop& m_loop;
  const io::Clock& m_clock;
  const Plant& m_plant;
  PipelineListener m_listener;
  SolverPool m_pool;
  io::Writer m_writer;
};

/// Canonical values of a tank's newest accepted readings at a time, for worksheets that name other
/// channels; empty when the store cannot be read.
[[nodiscard]] io::ChannelValues knownValues(io::Store& store, const std::string& tank, io::Instant at);

/// Stores a judged batch: readings, events, and the marks for later liquors that a late reading changes.
/// Call inside a transaction. Fills `stored` with the new rows of readings and events.
struct StoredBatch {
  BatchAnswer answer;
  std::vector<io::Reading> readings;
  std::vector<io::EventRow> events;
};
model::Result<StoredBatch> storeBatch(io::Store& store, const IntakeOutcome& outcome);

}  // namespace tw::monitor
