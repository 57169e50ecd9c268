// SPDX-License-Identifier: GPL-3.0-or-later
// What frames the curve of one strip: its window, limits, marks of additions and dumps, alarm spans, the
// present, its name; and, on the overlay, the crosshair. Private to the strips: it knows the plot library.
#pragma once

#include <qcustomplot.h>

#include <optional>

#include "ui/theme/look.hpp"
#include "ui/widgets/strip_set.hpp"
#include "ui/words/format.hpp"

namespace tw::ui {

/// Words drawn by the decor, translated by the strips.
struct DecorWords {
  QString now, caution, act, projection;
};

/// Behind and around the curve.
class StripDecor : public QCPAbstractItem {
 public:
  StripDecor(QCustomPlot* plot, QCPAxisRect* rect, const Look& look, const Strip& strip, const StripSet& set,
             const DecorWords& words, const Format& format, bool first);
  double selectTest(const QPointF&, bool, QVariant*) const override { return -1.0; }

 protected:
  void draw(QCPPainter* painter) override;

 private:
  [[nodiscard]] double x(double t) const { return m_rect->axis(QCPAxis::atBottom)->coordToPixel(t); }
  [[nodiscard]] double y(double value) const { return m_rect->axis(QCPAxis::atLeft)->coordToPixel(value); }
  void drawWindow(QCPPainter* painter, const QRectF& box) const;
  void drawLimits(QCPPainter* painter, const QRectF& box) const;
  void drawMarks(QCPPainter* painter, const QRectF& box) const;
  void drawFuture(QCPPainter* painter, const QRectF& box) const;
  void drawNames(QCPPainter* painter, const QRectF& box) const;

  QCPAxisRect* m_rect;
  const Look& m_look;
  const Strip& m_strip;
  const StripSet& m_set;
  DecorWords m_words;
  const Format& m_format;
  bool m_first;
};

/// The crosshair in one strip: a line, the nearest point ringed, its value at the right edge.
class StripCursor : public QCPAbstractItem {
 public:
  StripCursor(QCustomPlot* plot, QCPAxisRect* rect, const Look& look);
  /// nullopt hides it.
  void place(std::optional<double> t, std::optional<StripPoint> nearest, const QString& text);
  double selectTest(const QPointF&, bool, QVariant*) const override { return -1.0; }

 protected:
  void draw(QCPPainter* painter) override;

 private:
  QCPAxisRect* m_rect;
  const Look& m_look;
  std::optional<double> m_t;
  std::optional<StripPoint> m_nearest;
  QString m_text;
};

}  // namespace tw::ui
