// SPDX-License-Identifier: GPL-3.0-or-later
// What the strip above the line lists: who needs somebody, what must be acknowledged, what is due. Pure.
#pragma once

#include <QCoreApplication>
#include <QDateTime>
#include <QString>
#include <optional>
#include <string>
#include <vector>

#include "model/condition.hpp"
#include "ui/client/shop_data.hpp"
#include "ui/words/reasons.hpp"

namespace tw::ui {

/// One row of the strip.
struct StripEntry {
  std::string key;    ///< tank id or alarm id; rows with equal keys are updated in place
  std::string tank;
  std::optional<model::Condition> condition;
  QString title, detail;
  QString action;     ///< words on the button, empty = the row itself opens the tank
  QString tip;
  bool urgent = false;///< overdue, high priority
};

/// What the one button under a tank does.
struct TankHelp {
  enum class Kind { OpenTank, Acknowledge, Titrate };
  Kind kind = Kind::OpenTank;
  QString text;
  std::int64_t alarm = 0;  ///< for Acknowledge
};

class Entries {
  Q_DECLARE_TR_FUNCTIONS(Entries)

 public:
  Entries(const ShopData& data, const Format& format) : m_data(data), m_format(format), m_reasons(format) {}

  /// Tanks that are not fine, worst first; equal words in shop order.
  [[nodiscard]] std::vector<StripEntry> needSomebody() const;
  /// Unacknowledged alarms as the service orders them.
  [[nodiscard]] std::vector<StripEntry> toAcknowledge() const;
  /// Overdue first, as the service orders them.
  [[nodiscard]] std::vector<StripEntry> due() const;
  /// An unacknowledged alarm of the tank, else an overdue titration, else "open".
  [[nodiscard]] TankHelp helpFor(const io::wire::TankView& tank) const;

 private:
  const ShopData& m_data;
  const Format& m_format;
  Reasons m_reasons;
};

}  // namespace tw::ui
