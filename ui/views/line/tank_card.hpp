// SPDX-License-Identifier: GPL-3.0-or-later
// One tank of the line: name and age above, the picture on the shop floor, below it condition, the one
// reason and the one button.
#pragma once

#include <QLabel>
#include <QPushButton>
#include <QWidget>

#include "ui/views/line/entries.hpp"
#include "ui/widgets/condition_label.hpp"
#include "ui/widgets/tank_button.hpp"
#include "ui/widgets/wrap_text.hpp"

namespace tw::ui {

/// The picture of a tank as the service describes it.
[[nodiscard]] TankLook lookOf(const io::wire::TankView& tank);

class TankCard : public QWidget {
  Q_OBJECT

 public:
  TankCard(const Look& look, const ShopData& shopData, const Format& format, std::string tank,
           QWidget* parent = nullptr);
  [[nodiscard]] const std::string& tank() const { return m_id; }
  /// Reads the tank anew from the data; also when only the clock moved on.
  void refresh();
  [[nodiscard]] TankButton* picture() const { return m_picture; }
  [[nodiscard]] QPushButton* help() const { return m_help; }

 Q_SIGNALS:
  void tankOpened(const std::string& tank);
  void acknowledgeWanted(qint64 alarm);

 protected:
  void resizeEvent(QResizeEvent* event) override;

 private:
  void press();
  void placeHelpText();

  const ShopData& m_data;
  const Format& m_format;
  std::string m_id;
  TankHelp m_now;
  QLabel* m_title;
  QLabel* m_age;
  TankButton* m_picture;
  ConditionLabel* m_condition;
  WrapText* m_reason;
  QPushButton* m_help;
};

}  // namespace tw::ui
