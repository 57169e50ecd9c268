// SPDX-License-Identifier: GPL-3.0-or-later
#include "monitor/pipeline/service.hpp"

#include <sys/stat.h>

#include <algorithm>
#include <cstdio>
#include <filesystem>
#include <optional>
#include <set>
#include <thread>
#include <utility>
#include <vector>

#include <fmt/format.h>
#include <nlohmann/json.hpp>

#include "io/drop/table.hpp"
#include "io/drop/watcher.hpp"
#include "io/local_time.hpp"
#include "io/log.hpp"
#include "io/serial/link.hpp"
#include "io/wire/api_json.hpp"
#include "monitor/api/api.hpp"
#include "monitor/api/http_server.hpp"
#include "monitor/pipeline/alarm_keeper.hpp"
#include "monitor/pipeline/board.hpp"
#include "monitor/pipeline/metrics.hpp"
#include "monitor/pipeline/pipeline.hpp"
#include "monitor/pipeline/recipes_in_force.hpp"

namespace tw::monitor {
namespace {

namespace fs = std::filesystem;
using io::LogLevel;

constexpr std::chrono::minutes kTick{1};
constexpr std::chrono::milliseconds kBusyRetry{500};     // a full writer queue empties in less
constexpr std::chrono::milliseconds kFailureRetry{5000};  // a failing disk
constexpr std::chrono::milliseconds kDrainStep{20};
constexpr int kDrainSteps = 500;  // ten seconds
constexpr mode_t kOwnerOnly = 0700;

model::Result<model::Done> makeDataDir(const fs::path& dir) {
  std::error_code error;
  fs::create_directories(dir, error);
  if (!error && ::chmod(dir.c_str(), kOwnerOnly) != 0) error = {errno, std::generic_category()};
  if (error) {
    return model::fail(model::Fault{"data_dir_failed", dir.string(),
                                    fmt::format("{}: {}", dir.string(), error.message()), "",
                                    model::FaultKind::Machine});
  }
  return model::Done{};
}

std::string liveText(const io::wire::LiveMessage& message) {
  return nlohmann::json(message).dump(-1, ' ', false, nlohmann::json::error_handler_t::replace);
}

}  // namespace

struct Service::Impl {
  Impl(io::Loop& l, const io::Clock& c, io::Shop shop, const std::map<std::string, io::Recipe>& recipes)
      : loop(l), clock(c), plant(std::move(shop), recipes) {}
  ~Impl();

  model::Result<model::Done> start();
  model::Result<model::Done> openStores(std::unique_ptr<io::Store>& writable);
  void compose(std::unique_ptr<io::Store> writable);
  void openInlets();
  void onFile(std::size_t index, const fs::path& file, std::string bytes);
  void storeFile(std::size_t index, const fs::path& file, std::shared_ptr<io::IncomingBatch> batch,
                 IntakeOutcome outcome);
  void onSerial(const io::IncomingBatch& batch);
  void count(const BatchAnswer& answer);
  void push(const io::wire::LiveMessage& message);
  void readAgain();
  void armTimer();
  void tick();
  void drain(int stepsLeft);
  [[nodiscard]] std::string metrics() const;
  [[nodiscard]] bool idle() const { return pipeline->idle() && keeper->idle(); }

  io::Loop& loop;
  const io::Clock& clock;
  Plant plant;
  std::optional<io::TimeZone> zone;
  std::optional<io::StoreLock> lock;
  std::unique_ptr<io::Store> view;  ///< the loop thread's read-only store
  std::unique_ptr<Pipeline> pipeline;
  std::unique_ptr<Board> board;
  std::unique_ptr<AlarmKeeper> keeper;
  std::unique_ptr<ApiContext> context;
  Router router;
  std::unique_ptr<HttpServer> server;
  std::vector<std::unique_ptr<io::DropWatcher>> drops;
  std::vector<std::unique_ptr<io::SerialLink>> serials;
  Counters counters;
  std::set<std::string> changedPast;  ///< tanks to read again
  bool stopping = false;
  /// Guards timers that outlive the service on a loop that goes on.
  std::shared_ptr<bool> alive = std::make_shared<bool>(true);
};

/// The writer's store closes last: only then can SQLite fold its log into the file.
Service::Impl::~Impl() {
  drops.clear();
  serials.clear();
  server.reset();
  if (pipeline) pipeline->stop();
  context.reset();
  keeper.reset();
  board.reset();
  view.reset();
  pipeline.reset();
}

model::Result<model::Done> Service::Impl::openStores(std::unique_ptr<io::Store>& writable) {
  const io::Shop& shop = plant.shop();
  auto named = io::TimeZone::named(shop.timeZone);
  if (!named) return model::fail(named.error());
  zone = std::move(*named);
  if (const auto made = makeDataDir(shop.dataDir); !made) return made;
  auto taken = io::StoreLock::take(shop.dataDir);
  if (!taken) return model::fail(taken.error());
  lock.emplace(std::move(*taken));
  auto opened = io::openStore(shop.dataDir, io::StoreMode::ReadWrite);
  if (!opened) return model::fail(opened.error());
  if (const auto known = registerRecipes(plant, **opened, clock.now()); !known) return known;
  auto readOnly = io::openStore(shop.dataDir, io::StoreMode::ReadOnly);
  if (!readOnly) return model::fail(readOnly.error());
  view = std::move(*readOnly);
  writable = std::move(*opened);
  return model::Done{};
}

void Service::Impl::compose(std::unique_ptr<io::Store> writable) {
  PipelineListener listener;
  listener.onReadings = [this](const auto& stored) { board->onReadings(stored); };
  listener.onEvents = [this](const auto& stored) { board->onEvents(stored); };
  listener.onResult = [this](const io::ResultRow& row) {
    ++counters.results;
    io::log(row.historic ? LogLevel::Debug : LogLevel::Info, "result_stored",
            {{"tank", row.tank},
             {"id", std::to_string(row.id)},
             {"sampled_at", io::toRfc3339(row.sampledAt)},
             {"condition", row.condition},
             {"historic", row.historic ? "true" : "false"}});
    board->onResult(row);
  };
  listener.onChangedPast = [this](const std::string& tank) {
    if (changedPast.empty()) loop.post([this] { readAgain(); });
    changedPast.insert(tank);
  };
  listener.onUnsolved = [this](const io::PendingLiquor& liquor, const model::Fault& fault) {
    ++counters.unsolved;
    io::log(LogLevel::Warning, "liquor_unsolved",
            {{"tank", liquor.tank},
             {"sampled_at", io::toRfc3339(liquor.sampledAt)},
             {"code", fault.code},
             {"subject", fault.subject},
             {"detail", fault.detail}});
    board->onUnsolved(liquor, fault);
  };
  pipeline = std::make_unique<Pipeline>(loop, clock, plant, std::move(writable), std::move(listener));
  board = std::make_unique<Board>(plant, clock, *view,
                                  Board::Outlets{[this](const auto& message) { push(message); },
                                                 [this](auto changes) { keeper->save(std::move(changes)); }});
  keeper = std::make_unique<AlarmKeeper>(
      *pipeline, clock,
      AlarmKeeper::Outlets{[this](const io::AlarmRow& saved) { board->assignAlarmId(saved); },
                           [this](const AlarmChange& saved) { board->alarmSaved(saved); }});
  context = std::make_unique<ApiContext>(ApiContext{
      plant, clock, *zone, *view, *board, *pipeline, loop,
      [this](AlarmChange change, auto then) { keeper->save(std::move(change), std::move(then)); },
      [this] { return metrics(); }});
  router = makeRouter(*context);
  HttpServer::Hooks hooks;
  hooks.answer = [this](const Request& request, Reply reply) {
    ++counters.requests;
    router.handle(request, std::move(reply));
  };
  hooks.refuseLive = [this](const Request& request) -> std::unique_ptr<Response> {
    if (!Router::allowed(request)) {
      return std::make_unique<Response>(
          problem(403, "foreign_origin", "this service answers programs on this machine only"));
    }
    if (plant.shop().signIn != "none") {
      return std::make_unique<Response>(problem(401, "sign_in_required", "this shop requires signing in"));
    }
    return nullptr;
  };
  hooks.hello = [this] {
    io::wire::LiveMessage hello;
    hello.type = "hello";
    hello.at = io::toRfc3339(clock.now());
    return liveText(hello);
  };
  server = std::make_unique<HttpServer>(loop, std::move(hooks));
}

model::Result<model::Done> Service::Impl::start() {
  std::unique_ptr<io::Store> writable;
  if (const auto opened = openStores(writable); !opened) return opened;
  for (const auto& setup : plant.tanks()) {
    if (!setup->atTarget) {
      io::log(LogLevel::Warning, "target_unsolved", {{"tank", setup->tank.id}, {"recipe", setup->recipe.id}});
    }
  }
  compose(std::move(writable));
  for (const auto& setup : plant.tanks()) {
    const auto newest = view->newestResult(setup->tank.id);
    if (!newest) return model::fail(newest.error());
    if (*newest) pipeline->pool().seedNewest(setup->tank.id, (*newest)->sampledAt);
  }
  if (const auto loaded = board->load(); !loaded) return loaded;
  if (const auto listening = server->listen(plant.shop().listen); !listening) return listening;
  const unsigned processors = std::max(2U, std::thread::hardware_concurrency());
  if (const auto started = pipeline->start(processors - 1); !started) return started;
  openInlets();
  armTimer();
  io::log(LogLevel::Info, "started",
          {{"version", TW_VERSION},
           {"shop", plant.shop().title},
           {"tanks", std::to_string(plant.tanks().size())},
           {"port", std::to_string(server->port())},
           {"data_dir", plant.shop().dataDir.string()}});
  return model::Done{};
}

void Service::Impl::openInlets() {
  const io::Shop& shop = plant.shop();
  for (std::size_t i = 0; i < shop.drops.size(); ++i) {
    drops.push_back(std::make_unique<io::DropWatcher>(
        loop, clock, shop.drops[i],
        [this, i](const fs::path& file, std::string bytes) { onFile(i, file, std::move(bytes)); },
        [this, i](bool up, const std::string& reason) {
          board->onLink("", plant.shop().drops[i].path.string(), up, reason);
        }));
  }
  for (const io::SerialPort& port : shop.serials) {
    serials.push_back(std::make_unique<io::SerialLink>(
        loop, clock, port, [this](const io::IncomingBatch& batch) { onSerial(batch); },
        [this, &port](bool up, const std::string& reason) { board->onLink(port.tank, port.port, up, reason); }));
  }
  for (const auto& drop : drops) drop->start();
  for (const auto& serial : serials) serial->start();
}

/// Reading and judging a file takes a processor for a while: on a solver's thread.
void Service::Impl::onFile(std::size_t index, const fs::path& file, std::string bytes) {
  const auto text = std::make_shared<const std::string>(std::move(bytes));
  pipeline->background([this, index, file, text](io::Store& store) {
    const io::DropFolder& folder = plant.shop().drops[index];
    auto batch = std::make_shared<io::IncomingBatch>(
        io::parseTable(*text, file.filename().string(), *zone,
                       {folder.decimal, folder.separator, folder.encoding, folder.dateOrder}));
    if (!folder.source.empty()) batch->source = "drop:" + folder.source;
    auto outcome = std::make_shared<IntakeOutcome>(judgeIntake(
        plant, *batch, clock.now(),
        [&](const std::string& tank, io::Instant at) { return knownValues(store, tank, at); }));
    loop.post([this, index, file, batch, outcome] { storeFile(index, file, batch, std::move(*outcome)); });
  });
}

void Service::Impl::storeFile(std::size_t index, const fs::path& file,
                              std::shared_ptr<io::IncomingBatch> batch, IntakeOutcome outcome) {
  batch->refused = outcome.refusals;
  const bool taken =
      pipeline->add(std::move(outcome), [this, index, file, batch](const model::Result<BatchAnswer>& answer) {
        if (!answer) {
          ++counters.filesPostponed;
          io::log(LogLevel::Error, "file_postponed",
                  {{"file", file.string()}, {"detail", answer.error().detail}});
          drops[index]->postponed(file, kFailureRetry);
          return;
        }
        count(*answer);
        ++counters.filesTaken;
        io::log(LogLevel::Info, "file_taken",
                {{"file", file.string()},
                 {"accepted", std::to_string(answer->accepted)},
                 {"duplicates", std::to_string(answer->duplicates)},
                 {"suspicious", std::to_string(answer->conflicts.size())},
                 {"events", std::to_string(answer->events)},
                 {"refused", std::to_string(answer->refused.size())}});
        drops[index]->filed(file, *batch);
      });
  if (taken) return;
  ++counters.filesPostponed;
  drops[index]->postponed(file, kBusyRetry);
}

void Service::Impl::onSerial(const io::IncomingBatch& batch) {
  auto outcome = judgeIntake(plant, batch, clock.now());
  for (const io::Refusal& refusal : outcome.refusals) {
    io::log(LogLevel::Warning, "serial_refused",
            {{"source", batch.source},
             {"channel", refusal.column},
             {"value", refusal.value},
             {"code", refusal.code}});
  }
  const bool taken = pipeline->add(std::move(outcome), [this](const model::Result<BatchAnswer>& answer) {
    if (answer) {
      count(*answer);
    } else {
      ++counters.serialSkipped;
      io::log(LogLevel::Error, "serial_not_stored", {{"detail", answer.error().detail}});
    }
  });
  // The next interval brings a newer value: a busy store costs this one, and it is counted.
  if (!taken) ++counters.serialSkipped;
}

void Service::Impl::count(const BatchAnswer& answer) {
  counters.readingsAccepted += answer.accepted;
  counters.readingsDuplicate += answer.duplicates;
  counters.readingsSuspicious += answer.conflicts.size();
  counters.readingsRefused += answer.refused.size();
}

void Service::Impl::push(const io::wire::LiveMessage& message) {
  if (server && server->liveClients() > 0) server->push(liveText(message));
}

void Service::Impl::readAgain() {
  for (const std::string& tank : std::exchange(changedPast, {})) {
    const auto done = board->reload(tank);
    if (!done) io::log(LogLevel::Error, "tank_unreadable", {{"tank", tank}, {"detail", done.error().detail}});
  }
}

void Service::Impl::armTimer() {
  loop.after(kTick, [this, guard = std::weak_ptr<bool>(alive)] {
    if (guard.expired() || stopping) return;
    tick();
    armTimer();
  });
}

void Service::Impl::tick() {
  board->tick();
  keeper->flush();
  pipeline->wake();
}

void Service::Impl::drain(int stepsLeft) {
  if (idle() || stepsLeft == 0) {
    io::log(LogLevel::Info, "stopped",
            {{"pending", std::to_string(pipeline->pendingLiquors())},
             {"backlog", std::to_string(pipeline->writerBacklog())}});
    return loop.stop();
  }
  loop.after(kDrainStep, [this, stepsLeft] { drain(stepsLeft - 1); });
}

std::string Service::Impl::metrics() const {
  Gauges gauges;
  gauges.pendingLiquors = pipeline->pendingLiquors();
  gauges.writerBacklog = pipeline->writerBacklog();
  gauges.liveClients = server->liveClients();
  gauges.connections = server->connections();
  gauges.links = board->links();
  gauges.alarmsByPriority = {{"high", 0}, {"medium", 0}, {"low", 0}};
  for (const auto& alarm : board->standingAlarms()) ++gauges.alarmsByPriority[alarm.priority];
  return metricsText(counters, gauges);
}

Service::Service(io::Loop& loop, const io::Clock& clock, io::Shop shop,
                 std::map<std::string, io::Recipe> recipes)
    : m_impl(std::make_unique<Impl>(loop, clock, std::move(shop), recipes)) {}

Service::~Service() = default;

model::Result<model::Done> Service::start() { return m_impl->start(); }
unsigned Service::port() const { return m_impl->server->port(); }
bool Service::idle() const { return m_impl->idle(); }
void Service::tick() { m_impl->tick(); }

void Service::stop() {
  if (std::exchange(m_impl->stopping, true)) return;
  io::log(LogLevel::Info, "stopping");
  for (const auto& drop : m_impl->drops) drop->stop();
  for (const auto& serial : m_impl->serials) serial->stop();
  m_impl->server->stop();
  m_impl->drain(kDrainSteps);
}

int serve(const io::Shop& shop, std::map<std::string, io::Recipe> recipes, const io::Clock& clock) {
  io::Loop loop;
  Service service(loop, clock, shop, std::move(recipes));
  if (const auto started = service.start(); !started) {
    const model::Fault& fault = started.error();
    const std::string where = fault.where.empty() ? shop.file.string() : fault.where;
    fmt::print(stderr, "tankward: {}: {}\n", where, fault.detail);
    return static_cast<int>(fault.kind);
  }
  loop.onStopSignal([&service] { service.stop(); });
  const std::string host = shop.listen.substr(0, shop.listen.rfind(':'));
  fmt::print("listening on http://{}:{}\n", host, service.port());
  std::fflush(stdout);
  loop.run([](const char* what) { io::log(LogLevel::Error, "handler_failed", {{"what", what}}); });
  return 0;
}

}  // namespace tw::monitor
