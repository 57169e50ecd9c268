// SPDX-License-Identifier: GPL-3.0-or-later
// Shares of a whole as labelled horizontal bars, largest first.
#pragma once

#include <QString>
#include <QWidget>
#include <vector>

#include "ui/theme/look.hpp"

namespace tw::ui {

struct Share {
  QString label, text;
  double fraction = 0.0;  ///< 0..1
};

class ShareBars : public QWidget {
  Q_OBJECT

 public:
  explicit ShareBars(const Look& look, QWidget* parent = nullptr);
  void setShares(const std::vector<Share>& shares);
  [[nodiscard]] const std::vector<Share>& shares() const { return m_shares; }
  [[nodiscard]] QSize sizeHint() const override;
  [[nodiscard]] QSize minimumSizeHint() const override { return sizeHint(); }

 protected:
  void paintEvent(QPaintEvent* event) override;

 private:
  const Look& m_look;
  std::vector<Share> m_shares;
};

}  // namespace tw::ui
