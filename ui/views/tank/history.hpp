// SPDX-License-Identifier: GPL-3.0-or-later
// From what the service keeps to what the strips draw. Pure.
#pragma once

#include <QCoreApplication>
#include <QDateTime>
#include <QString>
#include <string>

#include "ui/client/desk_values.hpp"
#include "ui/widgets/strip_set.hpp"
#include "ui/words/reasons.hpp"

namespace tw::ui {

/// Seconds since 1970 UTC: the shared time axis.
[[nodiscard]] double axisTime(const QDateTime& at);
[[nodiscard]] double axisTime(const std::string& rfc3339);

class History {
  Q_DECLARE_TR_FUNCTIONS(History)

 public:
  explicit History(const Format& format) : m_format(format) {}
  /// `margin` = id of the margin shown in the first strip.
  [[nodiscard]] StripSet strips(const io::wire::TankView& tank, const TankHistory& history,
                                const std::string& margin, const QDateTime& now) const;

 private:
  [[nodiscard]] Strip marginStrip(const io::wire::TankView& tank, const TankHistory& history,
                                  const std::string& margin) const;
  [[nodiscard]] Strip channelStrip(const io::wire::ChannelView& channel, const TankHistory& history) const;
  [[nodiscard]] std::vector<TimeMark> marks(const TankHistory& history) const;

  const Format& m_format;
};

}  // namespace tw::ui
