// SPDX-License-Identifier: GPL-3.0-or-later
// Strips of curves over one shared time axis. Wheel zooms around the pointer, drag pans, d w m y choose a
// span, Left and Right move the crosshair from result to result, Enter opens the analysis under it. The
// plot library stays behind this header.
#pragma once

#include <QWidget>
#include <memory>
#include <set>

#include "ui/theme/look.hpp"
#include "ui/widgets/strip_set.hpp"
#include "ui/words/format.hpp"

namespace tw::ui {

class Strips : public QWidget {
  Q_OBJECT

 public:
  enum class Span { Day, Week, Month, Year };

  Strips(const Look& look, const Format& format, QWidget* parent = nullptr);
  ~Strips() override;

  /// Draws another set without the strips whose ids are folded away; the visible range stays unless
  /// `keepRange` is false.
  void setStrips(const StripSet& set, const std::set<std::string>& folded, bool keepRange);
  void setSpan(Span span);
  [[nodiscard]] double from() const;
  [[nodiscard]] double to() const;
  /// Strips on screen, in order; for tests and for the accessible text.
  [[nodiscard]] std::vector<std::string> shown() const;
  [[nodiscard]] QSize minimumSizeHint() const override;

 Q_SIGNALS:
  void resultChosen(qint64 id, const std::string& sampledAt);
  /// The visible range moved or grew; seconds since 1970.
  void rangeShown(double from, double to);
  void spanChosen(tw::ui::Strips::Span span);

 protected:
  void keyPressEvent(QKeyEvent* event) override;
  void changeEvent(QEvent* event) override;
  bool eventFilter(QObject* watched, QEvent* event) override;
  void focusInEvent(QFocusEvent* event) override;
  void focusOutEvent(QFocusEvent* event) override;
  void paintEvent(QPaintEvent* event) override;

 private:
  struct Parts;

  void rebuild();
  void addLane(const Strip& strip, bool first, bool last);
  void setRange(double from, double to);
  void rangeMoved();
  void fitHeights();
  void moveCursor(std::optional<double> t);
  void chooseAt(double t, double reach_s);
  void paintAxes();

  const Look& m_look;
  const Format& m_format;
  StripSet m_set;
  std::set<std::string> m_folded;
  std::optional<double> m_cursor;
  std::unique_ptr<Parts> m_parts;
};

}  // namespace tw::ui
