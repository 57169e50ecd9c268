// SPDX-License-Identifier: GPL-3.0-or-later
// What the service knows of every tank now, kept in step with the store: facts, alarms, views. Lives on
// the loop's thread; does no waiting. Changes go out through callbacks.
#pragma once

#include <functional>
#include <map>
#include <set>
#include <string>
#include <vector>

#include "io/clock.hpp"
#include "io/store/store.hpp"
#include "io/wire/api.hpp"
#include "monitor/alarm/engine.hpp"
#include "monitor/alarm/observe.hpp"
#include "monitor/pipeline/plant.hpp"
#include "monitor/pipeline/tank_view.hpp"

namespace tw::monitor {

class Board {
 public:
  struct Outlets {
    std::function<void(io::wire::LiveMessage)> push;
    /// Alarms to save; their ids come back through assignAlarmId().
    std::function<void(std::vector<AlarmChange>)> save;
  };
  /// `store`: a read-only view that outlives the board.
  Board(const Plant& plant, const io::Clock& clock, io::Store& store, Outlets outlets);

  /// Reads everything from the store and judges it once. Call after the outlets are ready.
  model::Result<model::Done> load();

  void onReadings(const std::vector<io::Reading>& stored);
  void onEvents(const std::vector<io::EventRow>& stored);
  void onResult(const io::ResultRow& row);
  void onUnsolved(const io::PendingLiquor& liquor, const model::Fault& fault);
  /// Reads one tank again.
  model::Result<model::Done> reload(const std::string& tank);
  /// Serial port (with its tank) or drop folder (tank empty).
  void onLink(const std::string& tank, const std::string& link, bool up, const std::string& reason);
  /// Once a minute: age of readings, forecasts.
  void tick();

  /// nullopt: no standing alarm has this id. The change still has to be saved when it is not empty.
  std::optional<AlarmChange> acknowledge(std::int64_t id, const std::string& person,
                                         const std::string& comment);
  void assignAlarmId(const io::AlarmRow& saved);
  /// Pushes the tank after an alarm change has become durable.
  void alarmSaved(const AlarmChange& change);

  /// nullopt: no such tank.
  [[nodiscard]] std::optional<io::wire::TankView> tank(const std::string& id) const;
  [[nodiscard]] std::vector<io::wire::TankView> tanks() const;
  [[nodiscard]] std::vector<DueView> due() const;
  [[nodiscard]] std::vector<io::wire::AlarmView> standingAlarms() const;
  [[nodiscard]] const std::map<std::string, bool>& links() const { return m_links; }
  [[nodiscard]] const TankFacts* facts(const std::string& tank) const;

 private:
  struct Place {
    const TankSetup* setup = nullptr;
    RelaxedLimits relaxed;
    TankFacts facts;
    io::wire::TankView view;  ///< as of the last change or tick
    std::string pushed;       ///< signature of the view that was last pushed
  };

  model::Result<model::Done> read(Place& place);
  void takeNewest(Place& place, const io::ResultRow& row);
  void takeEvent(Place& place, const io::EventRow& event);
  /// Alarms, then the view.
  void judge(Place& place);
  void emit(std::vector<AlarmChange> changes);
  void pushIfChanged(Place& place);
  [[nodiscard]] io::wire::TankView viewOf(const Place& place) const;
  /// Alarms of tanks, ports and folders that left the shop.
  void silenceStrangers();
  [[nodiscard]] io::wire::LiveMessage message(const std::string& type, const std::string& tank) const;

  const Plant& m_plant;
  const io::Clock& m_clock;
  io::Store& m_store;
  Outlets m_outlets;
  AlarmEngine m_alarms;
  std::map<std::string, Place> m_places;
  std::map<std::string, bool> m_links;
};

}  // namespace tw::monitor
