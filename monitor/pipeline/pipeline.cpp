// SPDX-License-Identifier: GPL-3.0-or-later
#include "monitor/pipeline/pipeline.hpp"

#include <algorithm>
#include <exception>
#include <map>
#include <thread>
#include <utility>

#include "io/log.hpp"

namespace tw::monitor {
namespace {

/// How long a solver waits before it offers a result to a full writer again.
constexpr std::chrono::milliseconds kWriterFull{5};

/// Newest accepted sample time of each tank of a batch, before the batch.
model::Result<std::map<std::string, io::Instant>> newestBefore(io::Store& store, const IntakeOutcome& outcome) {
  std::map<std::string, io::Instant> newest;
  for (const io::NewReading& row : outcome.readings) {
    if (newest.contains(row.tank)) continue;
    const auto accepted = store.newestAccepted(row.tank, io::Instant::max());
    if (!accepted) return model::fail(accepted.error());
    io::Instant latest = io::Instant::min();
    for (const auto& [channel, reading] : *accepted) latest = std::max(latest, reading.sampledAt.at);
    newest[row.tank] = latest;
  }
  return newest;
}

/// A listener's bug must not keep a sender waiting for its answer.
void tell(const std::function<void()>& call) {
  try {
    call();
  } catch (const std::exception& e) {
    io::log(io::LogLevel::Error, "listener_failed", {{"what", e.what()}});
  }
}

io::Reading rowOf(const io::NewReading& added, std::int64_t id, io::ReadingState state) {
  io::Reading row;
  static_cast<io::NewReading&>(row) = added;
  row.id = id;
  row.state = state;
  return row;
}

}  // namespace

io::ChannelValues knownValues(io::Store& store, const std::string& tank, io::Instant at) {
  io::ChannelValues values;
  const auto newest = store.newestAccepted(tank, at);
  if (!newest) return values;
  for (const auto& [channel, reading] : *newest) {
    if (reading.value) values[channel] = *reading.value;
  }
  return values;
}

model::Result<StoredBatch> storeBatch(io::Store& store, const IntakeOutcome& outcome) {
  StoredBatch batch;
  batch.answer.refused = outcome.refusals;
  batch.answer.duplicates = outcome.duplicates;
  const auto before = newestBefore(store, outcome);
  if (!before) return model::fail(before.error());
  const auto added = store.addReadings(outcome.readings);
  if (!added) return model::fail(added.error());
  for (std::size_t i = 0; i < added->size(); ++i) {
    const io::NewReading& row = outcome.readings[i];
    const io::Added& done = (*added)[i];
    batch.answer.ids.push_back(done.id);
    if (done.outcome == io::AddOutcome::Duplicate) {
      if (row.state == io::ReadingState::Accepted) ++batch.answer.duplicates;
      continue;
    }
    const bool conflict = done.outcome == io::AddOutcome::Conflict;
    batch.readings.push_back(rowOf(row, done.id, conflict ? io::ReadingState::Suspicious : row.state));
    if (conflict) batch.answer.conflicts.push_back(batch.readings.back());
    if (conflict || row.state != io::ReadingState::Accepted) continue;
    ++batch.answer.accepted;
    // Only a late reading can change what was solved before.
    if (row.sampledAt.at > before->at(row.tank)) continue;
    const auto marked = store.markLaterPending(row.tank, row.channel, row.sampledAt.at);
    if (!marked) return model::fail(marked.error());
  }
  const auto events = store.addEvents(outcome.events);
  if (!events) return model::fail(events.error());
  for (std::size_t i = 0; i < events->size(); ++i) {
    batch.answer.eventIds.push_back((*events)[i].id);
    if ((*events)[i].outcome == io::AddOutcome::Duplicate) continue;
    ++batch.answer.events;
    batch.events.push_back(outcome.events[i]);
    batch.events.back().id = (*events)[i].id;
  }
  return batch;
}

Pipeline::Pipeline(io::Loop& loop, const io::Clock& clock, const Plant& plant,
                   std::unique_ptr<io::Store> store, PipelineListener listener)
    : m_loop(loop),
      m_clock(clock),
      m_plant(plant),
      m_listener(std::move(listener)),
      m_pool(plant, clock, [this](LiquorOutcome outcome) { onOutcome(std::move(outcome)); }),
      m_writer(std::move(store)) {}

Pipeline::~Pipeline() { m_pool.stop(); }

model::Result<model::Done> Pipeline::start(unsigned threads) {
  const auto started = m_pool.start(m_plant.shop().dataDir, threads);
  if (!started) return started;
  m_pool.wake();
  return model::Done{};
}

bool Pipeline::add(IntakeOutcome outcome, Then<BatchAnswer> then) {
  auto batch = std::make_shared<StoredBatch>();
  auto judged = std::make_shared<const IntakeOutcome>(std::move(outcome));
  return m_writer.submit(
      [batch, judged](io::Store& store) -> model::Result<model::Done> {
        auto stored = storeBatch(store, *judged);
        if (!stored) return model::fail(stored.error());
        *batch = std::move(*stored);
        return model::Done{};
      },
      [this, batch, then = std::move(then)](model::Result<model::Done> done) {
        m_pool.wake();
        m_loop.post([this, batch, then, done = std::move(done)] {
          if (!done) return then(model::fail(done.error()));
          tell([&] {
            if (!batch->readings.empty()) m_listener.onReadings(batch->readings);
            if (!batch->events.empty()) m_listener.onEvents(batch->events);
          });
          then(std::move(batch->answer));
        });
      });
}

bool Pipeline::correct(std::int64_t id, io::NewReading corrected, Then<std::int64_t> then) {
  auto newId = std::make_shared<std::int64_t>(0);
  auto row = std::make_shared<const io::NewReading>(std::move(corrected));
  return m_writer.submit(
      [id, newId, row](io::Store& store) -> model::Result<model::Done> {
        const auto stored = store.correctReading(id, *row);
        if (!stored) return model::fail(stored.error());
        *newId = *stored;
        const auto marked = store.markLaterPending(row->tank, row->channel, row->sampledAt.at);
        if (!marked) return model::fail(marked.error());
        return model::Done{};
      },
      [this, newId, row, then = std::move(then)](model::Result<model::Done> done) {
        m_pool.wake();
        m_loop.post([this, newId, row, then, done = std::move(done)] {
          if (!done) return then(model::fail(done.error()));
          tell([&] {
            m_listener.onReadings({rowOf(*row, *newId, row->state)});
            m_listener.onChangedPast(row->tank);
          });
          then(*newId);
        });
      });
}

bool Pipeline::confirm(std::int64_t id, std::string person, Then<std::int64_t> then) {
  auto row = std::make_shared<io::Reading>();
  return m_writer.submit(
      [this, id, person = std::move(person), row](io::Store& store) -> model::Result<model::Done> {
        const auto confirmed = store.confirmReading(id, person, m_clock.now());
        if (!confirmed) return model::fail(confirmed.error());
        const auto stored = store.reading(*confirmed);
        if (!stored) return model::fail(stored.error());
        *row = stored->value();
        const auto marked = store.markLaterPending(row->tank, row->channel, row->sampledAt.at);
        if (!marked) return model::fail(marked.error());
        return model::Done{};
      },
      [this, row, then = std::move(then)](model::Result<model::Done> done) {
        m_pool.wake();
        m_loop.post([this, row, then, done = std::move(done)] {
          if (!done) return then(model::fail(done.error()));
          tell([&] {
            m_listener.onReadings({*row});
            m_listener.onChangedPast(row->tank);
          });
          then(row->id);
        });
      });
}

bool Pipeline::write(io::Writer::Job job, Then<model::Done> then) {
  return m_writer.submit(std::move(job), [this, then = std::move(then)](model::Result<model::Done> done) {
    m_loop.post([then, done = std::move(done)] { then(done); });
  });
}

bool Pipeline::idle() const { return m_pool.idle() && m_writer.backlog() == 0; }

/// On a solver's thread.
void Pipeline::onOutcome(LiquorOutcome outcome) {
  if (outcome.fault && outcome.fault->kind == model::FaultKind::Machine &&
      outcome.fault->code != "internal_error") {
    // The store could not be read: nothing is known of this liquor, so it stays pending.
    io::log(io::LogLevel::Error, "liquor_unreadable",
            {{"tank", outcome.liquor.tank}, {"detail", outcome.fault->detail}});
    m_pool.settled(outcome.liquor, false);
    return;
  }
  settle(std::move(outcome));
}

void Pipeline::settle(LiquorOutcome outcome) {
  auto shared = std::make_shared<LiquorOutcome>(std::move(outcome));
  const auto job = [shared](io::Store& store) -> model::Result<model::Done> {
    const auto id = store.settleLiquor(shared->liquor, shared->result);
    if (!id) return model::fail(id.error());
    if (shared->result) shared->result->id = *id;
    return model::Done{};
  };
  const auto completion = [this, shared](model::Result<model::Done> done) {
    m_pool.settled(shared->liquor, done.has_value() && shared->result.has_value());
    m_loop.post([this, shared, done = std::move(done)] {
      if (!done) {
        io::log(io::LogLevel::Error, "result_not_stored",
                {{"tank", shared->liquor.tank}, {"detail", done.error().detail}});
      } else if (shared->result) {
        m_listener.onResult(*shared->result);
      } else if (shared->fault) {
        m_listener.onUnsolved(shared->liquor, *shared->fault);
      } else {
        m_listener.onChangedPast(shared->liquor.tank);
      }
    });
  };
  while (!m_writer.submit(job, completion)) std::this_thread::sleep_for(kWriterFull);
}

}  // namespace tw::monitor
