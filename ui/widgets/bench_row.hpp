// SPDX-License-Identifier: GPL-3.0-or-later
// One bench number with everything it must not stand without: unit, age, limits and a bar that shows
// where in its window the value lies.
#pragma once

#include <QString>
#include <QWidget>
#include <optional>
#include <vector>

#include "ui/theme/look.hpp"

namespace tw::ui {

struct BenchNumber {
  /// A line across the bar.
  struct Mark {
    double at = 0.0;
    Role role = Role::Ink;
  };

  QString title, value, age;
  QString lowText, highText;      ///< under the ends of the bar
  std::optional<double> at;       ///< the value on the bar's scale
  double from = 0.0, to = 1.0;    ///< ends of the bar's scale; equal = no bar
  std::optional<double> bandLow, bandHigh;  ///< the window, as an area
  std::vector<Mark> marks;        ///< target, caution, act
  bool fills = false;             ///< a margin: filled from zero to the value
  bool pale = false;              ///< too old
  bool hatched = false;           ///< not reliable
  bool pressing = false;          ///< overdue or past a limit: strong text
  QString tip;
};

class BenchRow : public QWidget {
  Q_OBJECT

 public:
  explicit BenchRow(const Look& look, QWidget* parent = nullptr);
  void setNumber(const BenchNumber& number);
  [[nodiscard]] const BenchNumber& number() const { return m_number; }
  [[nodiscard]] QSize sizeHint() const override { return {210, hasBar() ? 60 : 40}; }
  [[nodiscard]] QSize minimumSizeHint() const override { return {170, sizeHint().height()}; }

 protected:
  void paintEvent(QPaintEvent* event) override;

 private:
  [[nodiscard]] bool hasBar() const { return m_number.to > m_number.from; }
  void paintBar(QPainter& painter, const QRectF& bar) const;

  const Look& m_look;
  BenchNumber m_number;
};

}  // namespace tw::ui
