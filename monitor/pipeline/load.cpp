// SPDX-License-Identifier: GPL-3.0-or-later
#include "monitor/pipeline/load.hpp"

#include <algorithm>
#include <atomic>
#include <exception>
#include <fstream>
#include <map>
#include <sstream>
#include <thread>
#include <utility>

#include "io/drop/table.hpp"
#include "io/local_time.hpp"
#include "io/log.hpp"
#include "monitor/pipeline/intake.hpp"
#include "monitor/pipeline/liquor.hpp"
#include "monitor/pipeline/pipeline.hpp"

namespace tw::monitor {
namespace {

/// Liquors solved and settled in one transaction: small enough that a stop loses little.
constexpr std::size_t kChunk = 1024;

model::Result<std::string> readFile(const std::filesystem::path& file) {
  std::ifstream in(file, std::ios::binary);
  std::ostringstream bytes;
  bytes << in.rdbuf();
  if (!in || !bytes) {
    return model::fail(model::Fault{"file_unreadable", file.string(), "the file cannot be read", file.string(),
                                    model::FaultKind::Machine});
  }
  return bytes.str();
}

struct Solving {
  io::PendingLiquor liquor;
  LiquorPick pick;
  std::optional<io::ResultRow> result;
  std::optional<model::Fault> fault;
};

void solveOne(const Plant& plant, const io::Clock& clock, Solving& each) {
  if (!each.pick.complete()) return;
  try {
    auto row = solveLiquor(*plant.tank(each.liquor.tank), each.pick, clock.now());
    if (row) {
      each.result = std::move(*row);
    } else {
      each.fault = row.error();
    }
  } catch (const std::exception& e) {
    each.fault = model::Fault{"internal_error", each.liquor.tank, e.what(), "", model::FaultKind::Machine};
  }
}

void solveAll(const Plant& plant, const io::Clock& clock, std::vector<Solving>& chunk, unsigned threads) {
  std::atomic<std::size_t> nextIndex{0};
  const auto work = [&] {
    for (std::size_t i = nextIndex++; i < chunk.size(); i = nextIndex++) solveOne(plant, clock, chunk[i]);
  };
  std::vector<std::jthread> helpers;
  for (unsigned i = 1; i < threads; ++i) helpers.emplace_back(work);
  work();
}

class PendingSolver {
 public:
  PendingSolver(const Plant& plant, io::Store& store, const io::Clock& clock, unsigned threads)
      : m_plant(plant), m_store(store), m_clock(clock), m_threads(std::max(1U, threads)) {}

  model::Result<model::Done> run(LoadReport& report, const std::function<void(const LoadProgress&)>& progress) {
    std::size_t settledCount = 0;
    for (;;) {
      auto chunk = next();
      if (!chunk) return model::fail(chunk.error());
      if (chunk->empty()) return model::Done{};
      solveAll(m_plant, m_clock, *chunk, m_threads);
      const auto settled = settle(*chunk, report);
      if (!settled) return settled;
      settledCount += chunk->size();
      if (progress) progress({LoadProgress::Stage::Solving, "", settledCount, 0});
    }
  }

 private:
  model::Result<std::vector<Solving>> next() {
    // Liquors of a tank that left the shop stay on the list: ask for that many more.
    const auto pending = m_store.pendingLiquors(kChunk + m_foreign);
    if (!pending) return model::fail(pending.error());
    std::vector<Solving> chunk;
    m_foreign = 0;
    for (const io::PendingLiquor& liquor : *pending) {
      const TankSetup* setup = m_plant.tank(liquor.tank);
      if (setup == nullptr) {
        ++m_foreign;
        continue;
      }
      const auto newest = m_store.newestAccepted(liquor.tank, liquor.sampledAt);
      if (!newest) return model::fail(newest.error());
      chunk.push_back({liquor, pickLiquor(*setup, *newest, liquor.sampledAt), {}, {}});
    }
    return chunk;
  }

  model::Result<model::Done> settle(std::vector<Solving>& chunk, LoadReport& report) {
    for (Solving& each : chunk) {
      const auto latest = latestSample(each.liquor.tank);
      if (!latest) return model::fail(latest.error());
      if (each.result) each.result->historic = each.liquor.sampledAt < *latest;
    }
    return m_store.transaction([&](io::Store& store) -> model::Result<model::Done> {
      for (const Solving& each : chunk) {
        const auto id = store.settleLiquor(each.liquor, each.result);
        if (!id) return model::fail(id.error());
        if (each.result) {
          ++report.solved;
        } else if (each.fault) {
          ++report.unsolvable;
          io::log(io::LogLevel::Warning, "liquor_unsolved",
                  {{"tank", each.liquor.tank},
                   {"sampled_at", io::toRfc3339(each.liquor.sampledAt)},
                   {"code", each.fault->code},
                   {"detail", each.fault->detail}});
        } else {
          ++report.incomplete;
        }
      }
      return model::Done{};
    });
  }

  /// Sample time of the newest accepted reading of a tank; everything before is the past.
  model::Result<io::Instant> latestSample(const std::string& tank) {
    const auto known = m_latest.find(tank);
    if (known != m_latest.end()) return known->second;
    const auto newest = m_store.newestAccepted(tank, io::Instant::max());
    if (!newest) return model::fail(newest.error());
    io::Instant latest = io::Instant::min();
    for (const auto& [channel, reading] : *newest) latest = std::max(latest, reading.sampledAt.at);
    return m_latest[tank] = latest;
  }

  const Plant& m_plant;
  io::Store& m_store;
  const io::Clock& m_clock;
  unsigned m_threads;
  std::size_t m_foreign = 0;
  std::map<std::string, io::Instant> m_latest;
};

}  // namespace

model::Result<model::Done> solvePending(const Plant& plant, io::Store& store, const io::Clock& clock,
                                        unsigned threads, LoadReport& report,
                                        const std::function<void(const LoadProgress&)>& progress) {
  return PendingSolver(plant, store, clock, threads).run(report, progress);
}

model::Result<LoadReport> loadFiles(const io::Shop& shop, const std::map<std::string, io::Recipe>& recipes,
                                    io::Store& store, const std::vector<std::filesystem::path>& files,
                                    const io::Clock& clock, unsigned threads,
                                    const std::function<void(const LoadProgress&)>& progress) {
  const auto zone = io::TimeZone::named(shop.timeZone);
  if (!zone) return model::fail(zone.error());
  const Plant plant(shop, recipes);
  LoadReport report;
  for (const std::filesystem::path& file : files) {
    const auto bytes = readFile(file);
    if (!bytes) return model::fail(bytes.error());
    io::IncomingBatch batch = io::parseTable(*bytes, file.filename().string(), *zone);
    batch.source = "load:" + file.filename().string();
    const IntakeOutcome outcome =
        judgeIntake(plant, batch, clock.now(), [&](const std::string& tank, io::Instant at) {
          return knownValues(store, tank, at);
        });
    LoadedFile loaded;
    loaded.file = file;
    loaded.headerReadable = batch.headerReadable;
    const auto stored = store.transaction([&](io::Store& within) -> model::Result<model::Done> {
      const auto done = storeBatch(within, outcome);
      if (!done) return model::fail(done.error());
      loaded.accepted = done->answer.accepted;
      loaded.duplicates = done->answer.duplicates;
      loaded.suspicious = done->answer.conflicts.size();
      loaded.events = done->answer.events;
      loaded.refused = done->answer.refused;
      return model::Done{};
    });
    if (!stored) return model::fail(stored.error());
    report.files.push_back(std::move(loaded));
    if (progress) {
      progress({LoadProgress::Stage::File, file.string(), report.files.size(), files.size()});
    }
  }
  const auto solved = solvePending(plant, store, clock, threads, report, progress);
  if (!solved) return model::fail(solved.error());
  return report;
}

}  // namespace tw::monitor
