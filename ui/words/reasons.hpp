// SPDX-License-Identifier: GPL-3.0-or-later
// The one plain sentence behind a condition or an alarm, made from the codes and numbers of the wire.
#pragma once

#include <QCoreApplication>
#include <QDateTime>
#include <QString>

#include "io/wire/api.hpp"
#include "ui/words/format.hpp"

namespace tw::ui {

class Reasons {
  Q_DECLARE_TR_FUNCTIONS(Reasons)

 public:
  explicit Reasons(const Format& format) : m_format(format) {}

  /// "ammonia reserve falling, 31 h to the caution limit".
  [[nodiscard]] QString sentence(const io::wire::ReasonView& reason, const io::wire::TankView& tank) const;
  /// The worst reason of a tank; for a fine tank how far its nearest margin is; what is missing else.
  [[nodiscard]] QString headline(const io::wire::TankView& tank, const QDateTime& now) const;
  /// What an alarm says: kind and subject with value and limit.
  [[nodiscard]] QString alarm(const io::wire::AlarmView& alarm, const io::wire::TankView* tank) const;
  /// What to do about an alarm, by kind and subject.
  [[nodiscard]] QString toDo(const io::wire::AlarmView& alarm, const io::wire::TankView* tank) const;
  /// A margin's judged number as printed: "24 %", "0.42 pH", "8.0 K", "7.0 times".
  [[nodiscard]] QString marginNumber(const std::string& id, double judged) const;
  /// Why a result is not reliable, from a warning "code" or "code:subject".
  [[nodiscard]] QString warning(const std::string& code) const;

 private:
  [[nodiscard]] QString margin(const io::wire::ReasonView& reason, const std::string& ligand) const;
  [[nodiscard]] QString outside(const io::wire::ReasonView& reason, const io::wire::TankView* tank,
                                bool guard) const;
  [[nodiscard]] QString staleSentence(const std::string& subject, const io::wire::TankView* tank) const;

  const Format& m_format;
};

/// Channel or ratio of a tank by id; nullptr when it has none.
[[nodiscard]] const io::wire::ChannelView* findChannel(const io::wire::TankView& tank, const std::string& id);
[[nodiscard]] const io::wire::MarginView* findMargin(const io::wire::TankView& tank, const std::string& id);
/// The limited margin that uses up most of its room: the one a screen shows first. nullptr when none.
[[nodiscard]] const io::wire::MarginView* nearestMargin(const io::wire::TankView& tank);

}  // namespace tw::ui
