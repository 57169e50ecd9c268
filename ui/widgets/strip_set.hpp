// SPDX-License-Identifier: GPL-3.0-or-later
// What the strips draw: curves over one time axis, in seconds since 1970 UTC. Plain values.
#pragma once

#include <QString>
#include <optional>
#include <string>
#include <vector>

namespace tw::ui {

struct StripPoint {
  double t = 0.0, value = 0.0;
};

struct StripLimit {
  double value = 0.0;
  bool act = false;  ///< else caution
};

/// One strip: a curve over the shared time axis and what frames it.
struct Strip {
  std::string id;                    ///< "margin:ligand_loss", "pM", or a channel's id
  QString title, unit;
  QString shortTitle;                ///< on its fold button
  std::vector<StripPoint> points;    ///< by time; a NaN value breaks the line
  std::vector<StripPoint> hollow;    ///< superseded readings
  std::vector<StripPoint> waiting;   ///< suspicious readings: nobody has decided yet
  std::vector<StripLimit> limits;
  std::optional<double> low, high;   ///< the window
  std::vector<StripPoint> projection;///< two points, or none
  bool folded = true;                ///< how a new user finds it
};

struct TimeMark {
  double t = 0.0;
  bool dump = false;                 ///< a break; else an addition or another event
  QString text;
};

struct AlarmSpan {
  double from = 0.0, to = 0.0;
  bool high = false;
  QString text;
};

/// Where a result lies, to be clicked.
struct ResultMark {
  double t = 0.0;
  qint64 id = 0;
  std::string sampledAt;
};

struct StripSet {
  std::vector<Strip> strips;
  std::vector<TimeMark> marks;
  std::vector<AlarmSpan> alarms;
  std::vector<ResultMark> results;
  double now = 0.0, horizon_s = 0.0;
};

}  // namespace tw::ui
