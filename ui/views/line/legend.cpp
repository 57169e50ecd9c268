// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/views/line/legend.hpp"

#include <QPainter>
#include <functional>

#include "ui/theme/contrast.hpp"
#include "ui/theme/style.hpp"
#include "ui/widgets/condition_glyph.hpp"
#include "ui/words/words.hpp"

namespace tw::ui {
namespace {

constexpr double kMark = 22.0;
constexpr double kGap = 6.0;
constexpr double kBetween = 18.0;

}  // namespace

Legend::Legend(const Look& look, QWidget* parent) : QWidget(parent), m_look(look) {
  setSizePolicy(QSizePolicy::Expanding, QSizePolicy::Fixed);
  setAccessibleName(tr("Legend: the hatched bed is the used margin; the dashed mark is where it will stand "
                       "at the end of the horizon; the ticks are the caution and act limits; the notch is "
                       "the sludge line."));
  setToolTip(accessibleName());
}

void Legend::paintEvent(QPaintEvent*) {
  QPainter painter(this);
  painter.setRenderHint(QPainter::Antialiasing);
  const Theme& theme = m_look.theme();
  painter.setFont(textFont(kSmallPx));
  double x = 16.0;
  const double middle = height() / 2.0;
  const auto entry = [&](const QString& text, const std::function<void(const QRectF&)>& mark) {
    const double width = painter.fontMetrics().horizontalAdvance(text);
    if (x + kMark + kGap + width > this->width()) {  // what does not fit whole stands in the tooltip
      x = this->width();
      return;
    }
    mark(QRectF(x, middle - kMark / 2, kMark, kMark));
    x += kMark + kGap;
    painter.setPen(theme.color(Role::InkSoft));
    painter.drawText(QRectF(x, 0, width + 2, height()), Qt::AlignVCenter | Qt::AlignLeft, text);
    x += width + kBetween;
  };
  entry(tr("used margin"), [&](const QRectF& r) {
    const QRectF bed = r.adjusted(0, 5, 0, -3);
    paintHatch(painter, bed, theme.color(Role::Ink), 6.0, 1.6);
    painter.setPen(QPen(theme.color(Role::Ink), 2.0));
    painter.drawLine(bed.topLeft(), bed.topRight());
  });
  entry(tr("at the end of the horizon"), [&](const QRectF& r) {
    QPen pen(theme.color(Role::Ink), 1.6);
    pen.setDashPattern({4.0, 3.0});
    painter.setPen(pen);
    painter.drawLine(QPointF(r.left(), middle), QPointF(r.right(), middle));
  });
  entry(tr("caution, act"), [&](const QRectF& r) {
    painter.setPen(QPen(theme.color(Role::Act), 2.2));
    painter.drawLine(QPointF(r.left() + 4, middle - 5), QPointF(r.left() + 18, middle - 5));
    painter.setPen(QPen(theme.color(Role::Caution), 2.2));
    painter.drawLine(QPointF(r.left() + 4, middle + 5), QPointF(r.left() + 14, middle + 5));
  });
  using enum model::Condition;
  for (const model::Condition condition : {Fine, Drifting, Tight, Brink, Sludging, Stale}) {
    entry(Words::condition(condition), [&](const QRectF& r) {
      paintGlyph(painter, r, condition, theme.condition(condition), theme.color(Role::Window));
    });
  }
}

}  // namespace tw::ui
