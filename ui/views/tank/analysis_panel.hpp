// SPDX-License-Identifier: GPL-3.0-or-later
// The whole analysis behind one point of the strips.
#pragma once

#include <QFrame>
#include <QLabel>
#include <QPushButton>

#include "ui/client/desk_values.hpp"
#include "ui/theme/look.hpp"
#include "ui/widgets/condition_label.hpp"
#include "ui/widgets/share_bars.hpp"
#include "ui/words/format.hpp"

namespace tw::ui {

class AnalysisPanel : public QFrame {
  Q_OBJECT

 public:
  AnalysisPanel(const Look& look, const Format& format, QWidget* parent = nullptr);
  void showWaiting(const QString& when);
  void showFailure(const QString& why);
  void showAnalysis(const AnalysisView& analysis, const std::string& metal, const QDateTime& now);
  [[nodiscard]] const ShareBars* shares() const { return m_shares; }

 Q_SIGNALS:
  void closed();

 protected:
  void paintEvent(QPaintEvent* event) override;

 private:
  const Look& m_look;
  const Format& m_format;
  QLabel* m_when;
  ConditionLabel* m_condition;
  QLabel* m_numbers;
  QLabel* m_sharesTitle;
  ShareBars* m_shares;
  QLabel* m_solids;
};

}  // namespace tw::ui
