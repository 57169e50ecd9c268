// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/widgets/strips.hpp"

#include <qcustomplot.h>

#include <QKeyEvent>
#include <QPainter>
#include <QVBoxLayout>
#include <algorithm>
#include <cmath>

#include "ui/theme/style.hpp"
#include "ui/widgets/strip_decor.hpp"

namespace tw::ui {
namespace {

constexpr double kHour = 3600.0;
constexpr double kDay = 24.0 * kHour;
constexpr double kShortest = kHour;
constexpr double kLongest = 6.0 * 366.0 * kDay;
constexpr int kLaneHeight = 112;
constexpr int kNameRoom = 22;
constexpr int kAxisHeight = 44;
constexpr double kAir = 0.10;            // of the height, above and below a curve
constexpr std::size_t kDotsUpTo = 160;   // visible points; above that the line speaks alone
constexpr int kClickSlack = 5;           // px a press may wander and still be a click
constexpr double kReach = 26.0;          // px around a click in which a result is found

double spanSeconds(Strips::Span span) {
  switch (span) {
    case Strips::Span::Day: return kDay;
    case Strips::Span::Week: return 7.0 * kDay;
    case Strips::Span::Month: return 31.0 * kDay;
    case Strips::Span::Year: return 366.0 * kDay;
  }
  return 7.0 * kDay;
}

std::optional<StripPoint> nearest(const std::vector<StripPoint>& points, double t) {
  std::optional<StripPoint> best;
  auto at = std::lower_bound(points.begin(), points.end(), t, [](const StripPoint& p, double v) { return p.t < v; });
  const auto consider = [&](const StripPoint& point) {
    if (std::isnan(point.value)) return;
    if (!best || std::abs(point.t - t) < std::abs(best->t - t)) best = point;
  };
  if (at != points.end()) consider(*at);
  if (at != points.begin()) consider(*std::prev(at));
  return best;
}

void putPoints(QCPGraph* graph, const std::vector<StripPoint>& points) {
  QVector<QCPGraphData> data;
  data.reserve(static_cast<qsizetype>(points.size()));
  for (const StripPoint& point : points) data.append(QCPGraphData(point.t, point.value));
  graph->data()->set(data, true);
}

}  // namespace

struct Strips::Parts {
  struct Lane {
    const Strip* strip = nullptr;
    QCPAxisRect* rect = nullptr;
    QCPGraph* curve = nullptr;
    StripCursor* cursor = nullptr;
  };
  QCustomPlot* plot = nullptr;
  std::vector<Lane> lanes;
  QCPRange range;
  QPoint pressed;
  bool moving = false;  ///< guards against ranges answering ranges
};

Strips::Strips(const Look& look, const Format& format, QWidget* parent)
    : QWidget(parent), m_look(look), m_format(format), m_parts(std::make_unique<Parts>()) {
  setFocusPolicy(Qt::StrongFocus);
  setAccessibleName(tr("Strips over time"));
  setAccessibleDescription(tr("d, w, m, y choose day, week, month, year; Left and Right move the crosshair; "
                              "Enter opens the analysis."));
  m_parts->plot = new QCustomPlot(this);
  m_parts->plot->setInteractions(QCP::iRangeDrag | QCP::iRangeZoom);
  m_parts->plot->setLocale(m_format.locale());
  m_parts->plot->setNoAntialiasingOnDrag(true);
  m_parts->plot->setFocusPolicy(Qt::NoFocus);
  m_parts->plot->setMouseTracking(true);
  m_parts->plot->installEventFilter(this);
  m_parts->plot->layer(QStringLiteral("overlay"))->setMode(QCPLayer::lmBuffered);
  m_parts->plot->plotLayout()->clear();
  m_parts->plot->plotLayout()->setRowSpacing(4);
  auto* all = new QVBoxLayout(this);
  all->setContentsMargins(3, 3, 3, 3);
  all->addWidget(m_parts->plot);
}

Strips::~Strips() = default;

double Strips::from() const { return m_parts->range.lower; }
double Strips::to() const { return m_parts->range.upper; }

std::vector<std::string> Strips::shown() const {
  std::vector<std::string> ids;
  for (const Parts::Lane& lane : m_parts->lanes) ids.push_back(lane.strip->id);
  return ids;
}

QSize Strips::minimumSizeHint() const {
  return {360, kLaneHeight * static_cast<int>(std::max<std::size_t>(m_parts->lanes.size(), 1)) + kAxisHeight};
}

void Strips::setStrips(const StripSet& set, const std::set<std::string>& folded, bool keepRange) {
  m_set = set;
  m_folded = folded;
  rebuild();
  if (keepRange && m_parts->range.size() > kShortest / 2) {
    setRange(m_parts->range.lower, m_parts->range.upper);
  } else {
    setSpan(Span::Week);
  }
  if (m_cursor) moveCursor(m_cursor);
}

void Strips::setSpan(Span span) {
  const double length = spanSeconds(span);
  const double ahead = std::min(m_set.horizon_s, length * 0.3);
  setRange(m_set.now + ahead - length, m_set.now + ahead);
  Q_EMIT spanChosen(span);
}

void Strips::rebuild() {
  QCustomPlot* plot = m_parts->plot;
  plot->clearItems();
  plot->clearPlottables();
  m_parts->lanes.clear();
  plot->plotLayout()->clear();
  std::vector<const Strip*> wanted;
  for (const Strip& strip : m_set.strips) {
    if (!m_folded.contains(strip.id)) wanted.push_back(&strip);
  }
  for (std::size_t i = 0; i < wanted.size(); ++i) addLane(*wanted[i], i == 0, i + 1 == wanted.size());
  auto* sides = new QCPMarginGroup(plot);
  for (const Parts::Lane& lane : m_parts->lanes) lane.rect->setMarginGroup(QCP::msLeft | QCP::msRight, sides);
  paintAxes();
  updateGeometry();
}

void Strips::addLane(const Strip& strip, bool first, bool last) {
  QCustomPlot* plot = m_parts->plot;
  Parts::Lane lane;
  lane.strip = &strip;
  lane.rect = new QCPAxisRect(plot);
  for (QCPAxis* axis : lane.rect->axes()) {
    axis->setLayer(QStringLiteral("axes"));
    axis->grid()->setLayer(QStringLiteral("grid"));  // before the decor, which lies over it
  }
  lane.rect->setMinimumMargins(QMargins(6, kNameRoom, 10, last ? 6 : 4));
  lane.rect->setMinimumSize(80, 40);
  lane.rect->setRangeDrag(Qt::Horizontal);
  lane.rect->setRangeZoom(Qt::Horizontal);
  const int row = plot->plotLayout()->rowCount();
  plot->plotLayout()->addElement(row, 0, lane.rect);
  plot->plotLayout()->setRowStretchFactor(row, first ? 1.35 : 1.0);
  QCPAxis* time = lane.rect->axis(QCPAxis::atBottom);
  QCPAxis* level = lane.rect->axis(QCPAxis::atLeft);
  time->setTickLabels(last);
  auto clock = QSharedPointer<QCPAxisTickerDateTime>::create();
  clock->setTickCount(6);
  time->setTicker(clock);
  level->ticker()->setTickCount(3);
  level->setTickLabelFont(textFont(12));
  time->setTickLabelFont(textFont(12));
  level->setNumberFormat(QStringLiteral("gb"));
  level->setNumberPrecision(4);
  connect(time, qOverload<const QCPRange&>(&QCPAxis::rangeChanged), this, [this, time] {
    if (m_parts->moving) return;
    setRange(time->range().lower, time->range().upper);
  });

  new StripDecor(plot, lane.rect, m_look, strip, m_set, 
                 {tr("now"), tr("caution"), tr("act"), tr("dashed: straight line ahead")}, m_format, first);
  const QColor ink = m_look.theme().color(Role::Curve);
  lane.curve = plot->addGraph(time, level);
  lane.curve->setPen(QPen(ink, 2.0));
  putPoints(lane.curve, strip.points);
  const auto loose = [&](const std::vector<StripPoint>& points, QCPScatterStyle::ScatterShape shape, double size) {
    if (points.empty()) return;
    QCPGraph* graph = plot->addGraph(time, level);
    graph->setLineStyle(QCPGraph::lsNone);
    graph->setScatterStyle(QCPScatterStyle(shape, QPen(ink, 1.6), QBrush(m_look.theme().color(Role::Surface)), size));
    putPoints(graph, points);
  };
  loose(strip.hollow, QCPScatterStyle::ssCircle, 8);
  loose(strip.waiting, QCPScatterStyle::ssDiamond, 10);
  if (!strip.projection.empty()) {
    QCPGraph* ahead = plot->addGraph(time, level);
    ahead->setPen(QPen(ink, 2.0, Qt::DashLine));
    putPoints(ahead, strip.projection);
  }
  lane.cursor = new StripCursor(plot, lane.rect, m_look);
  m_parts->lanes.push_back(lane);
}

void Strips::paintAxes() {
  const Theme& theme = m_look.theme();
  m_parts->plot->setBackground(QBrush(theme.color(Role::Surface)));
  const QPen edge(theme.color(Role::Edge), 1.0);
  for (const Parts::Lane& lane : m_parts->lanes) {
    for (QCPAxis* axis : lane.rect->axes()) {
      axis->setBasePen(edge);
      axis->setTickPen(edge);
      axis->setSubTickPen(Qt::NoPen);
      axis->setTickLabelColor(theme.color(Role::InkSoft));
      axis->grid()->setPen(QPen(theme.color(Role::Hairline), 1.0, Qt::DotLine));
      axis->grid()->setZeroLinePen(QPen(theme.color(Role::Hairline), 1.0));
    }
  }
}

void Strips::setRange(double from, double to) {
  double length = std::clamp(to - from, kShortest, kLongest);
  const double latest = m_set.now + std::max(m_set.horizon_s, length * 0.3);
  const double end = m_set.now > 0.0 ? std::min(from + length, latest) : from + length;
  m_parts->range = QCPRange(end - length, end);
  rangeMoved();
}

void Strips::rangeMoved() {
  m_parts->moving = true;
  const double length = m_parts->range.size();
  const QString pattern = length < 2.5 * kDay ? QStringLiteral("HH:mm\nd MMM")
                          : length < 200.0 * kDay ? QStringLiteral("d MMM")
                                                  : QStringLiteral("MMM yyyy");
  for (const Parts::Lane& lane : m_parts->lanes) {
    QCPAxis* time = lane.rect->axis(QCPAxis::atBottom);
    time->setRange(m_parts->range);
    if (auto clock = qSharedPointerDynamicCast<QCPAxisTickerDateTime>(time->ticker())) {
      clock->setDateTimeFormat(pattern);
    }
  }
  m_parts->moving = false;
  fitHeights();
  m_parts->plot->replot(QCustomPlot::rpQueuedReplot);
  Q_EMIT rangeShown(m_parts->range.lower, m_parts->range.upper);
}

void Strips::fitHeights() {
  for (const Parts::Lane& lane : m_parts->lanes) {
    double low = 0.0, high = 0.0;
    std::size_t count = 0;
    const auto include = [&](double value) {
      low = count == 0 ? value : std::min(low, value);
      high = count == 0 ? value : std::max(high, value);
      ++count;
    };
    for (const auto* points : {&lane.strip->points, &lane.strip->hollow, &lane.strip->waiting}) {
      for (const StripPoint& point : *points) {
        if (m_parts->range.contains(point.t) && !std::isnan(point.value)) include(point.value);
      }
    }
    const bool dots = count > 0 && count <= kDotsUpTo;
    lane.curve->setScatterStyle(dots ? QCPScatterStyle(QCPScatterStyle::ssDisc, 5.5) : QCPScatterStyle());
    for (const StripPoint& point : lane.strip->projection) {
      if (m_parts->range.contains(point.t)) include(point.value);
    }
    for (const StripLimit& limit : lane.strip->limits) include(limit.value);
    if (lane.strip->low) include(*lane.strip->low);
    if (lane.strip->high) include(*lane.strip->high);
    if (count == 0) include(0.0);
    const double air = std::max((high - low) * kAir, std::max(std::abs(high) * 0.01, 1e-3));
    lane.rect->axis(QCPAxis::atLeft)->setRange(low - air, high + air);
  }
}

void Strips::moveCursor(std::optional<double> t) {
  m_cursor = t;
  bool first = true;
  for (const Parts::Lane& lane : m_parts->lanes) {
    const auto point = t ? nearest(lane.strip->points, *t) : std::nullopt;
    QString text;
    if (point) {
      text = (m_format.number(point->value) + QLatin1Char(' ') + lane.strip->unit).trimmed();
      if (first) {
        const QDateTime at = QDateTime::fromMSecsSinceEpoch(static_cast<qint64>(point->t * 1000.0), Qt::UTC);
        text += QStringLiteral("   ") + m_format.clock(at, at.addYears(-1));
      }
    }
    lane.cursor->place(t, point, text);
    first = false;
  }
  m_parts->plot->layer(QStringLiteral("overlay"))->replot();
}

void Strips::chooseAt(double t, double reach_s) {
  const ResultMark* best = nullptr;
  for (const ResultMark& mark : m_set.results) {
    if (best == nullptr || std::abs(mark.t - t) < std::abs(best->t - t)) best = &mark;
  }
  if (best == nullptr || std::abs(best->t - t) > reach_s) return;
  moveCursor(best->t);
  Q_EMIT resultChosen(best->id, best->sampledAt);
}

bool Strips::eventFilter(QObject* watched, QEvent* event) {
  if (m_parts->lanes.empty()) return QWidget::eventFilter(watched, event);
  QCPAxis* time = m_parts->lanes.front().rect->axis(QCPAxis::atBottom);
  if (event->type() == QEvent::MouseMove) {
    moveCursor(time->pixelToCoord(static_cast<QMouseEvent*>(event)->position().x()));
  } else if (event->type() == QEvent::Leave) {
    moveCursor(std::nullopt);
  } else if (event->type() == QEvent::MouseButtonPress) {
    m_parts->pressed = static_cast<QMouseEvent*>(event)->pos();
    setFocus(Qt::MouseFocusReason);
  } else if (event->type() == QEvent::MouseButtonRelease) {
    const auto* mouse = static_cast<QMouseEvent*>(event);
    if ((mouse->pos() - m_parts->pressed).manhattanLength() <= kClickSlack) {
      const double per_px = time->range().size() / std::max(m_parts->lanes.front().rect->width(), 1);
      chooseAt(time->pixelToCoord(mouse->position().x()), kReach * per_px);
    }
  }
  return QWidget::eventFilter(watched, event);
}

void Strips::keyPressEvent(QKeyEvent* event) {
  const auto step = [this](int by) {
    if (m_set.results.empty()) return;
    const double here = m_cursor.value_or(by > 0 ? m_parts->range.lower : m_parts->range.upper);
    const auto& results = m_set.results;
    auto at = std::lower_bound(results.begin(), results.end(), here,
                               [](const ResultMark& mark, double t) { return mark.t < t; });
    if (by < 0) {
      at = at == results.begin() ? at : std::prev(at);
    } else if (at != results.end() && at->t <= here + 0.5) {
      ++at;
    }
    if (at == results.end()) at = std::prev(results.end());
    moveCursor(at->t);
  };
  switch (event->key()) {
    case Qt::Key_D: return setSpan(Span::Day);
    case Qt::Key_W: return setSpan(Span::Week);
    case Qt::Key_M: return setSpan(Span::Month);
    case Qt::Key_Y: return setSpan(Span::Year);
    case Qt::Key_Left: return step(-1);
    case Qt::Key_Right: return step(1);
    case Qt::Key_Plus: return setRange(to() - (to() - from()) / 1.5, to());
    case Qt::Key_Minus: return setRange(to() - (to() - from()) * 1.5, to());
    case Qt::Key_Return:
    case Qt::Key_Enter:
      if (m_cursor) chooseAt(*m_cursor, kDay);
      return;
    default: QWidget::keyPressEvent(event);
  }
}

void Strips::changeEvent(QEvent* event) {
  if (event->type() == QEvent::PaletteChange && !m_set.strips.empty()) {
    rebuild();
    rangeMoved();
  }
  QWidget::changeEvent(event);
}

void Strips::focusInEvent(QFocusEvent*) { update(); }
void Strips::focusOutEvent(QFocusEvent*) { update(); }

void Strips::paintEvent(QPaintEvent*) {
  if (!hasFocus()) return;
  QPainter painter(this);
  painter.setPen(QPen(m_look.theme().color(Role::Focus), 3.0));
  painter.drawRect(QRectF(rect()).adjusted(1.5, 1.5, -1.5, -1.5));
}

}  // namespace tw::ui
