// SPDX-License-Identifier: GPL-3.0-or-later
// The left of the tank view: the tank itself, its condition and why, the bench numbers, the margins.
#pragma once

#include <QGridLayout>
#include <QLabel>
#include <QPushButton>
#include <QWidget>
#include <vector>

#include "ui/client/shop_data.hpp"
#include "ui/views/line/entries.hpp"
#include "ui/widgets/bench_row.hpp"
#include "ui/widgets/condition_label.hpp"
#include "ui/widgets/tank_picture.hpp"

namespace tw::ui {

/// The large picture: names beside its marks, no button.
class LargeTank : public QWidget {
  Q_OBJECT

 public:
  explicit LargeTank(const Look& look, QWidget* parent = nullptr);
  void setTank(const TankLook& look);
  [[nodiscard]] QSize sizeHint() const override { return {420, 200}; }
  [[nodiscard]] QSize minimumSizeHint() const override { return {300, 140}; }

 protected:
  void paintEvent(QPaintEvent* event) override;

 private:
  const Look& m_look;
  TankLook m_tank;
};

class BenchPanel : public QWidget {
  Q_OBJECT

 public:
  BenchPanel(const Look& look, const ShopData& shopData, const Format& format, QWidget* parent = nullptr);
  void setTank(const std::string& tank);
  void refresh();
  /// Height at which nothing has to scroll.
  [[nodiscard]] int contentHeight() const;

 Q_SIGNALS:
  void acknowledgeWanted(qint64 alarm);
  void stepWanted(int by);

 private:
  [[nodiscard]] BenchNumber channelNumber(const io::wire::ChannelView& channel) const;
  [[nodiscard]] BenchNumber marginNumber(const io::wire::MarginView& margin, const io::wire::TankView& tank) const;
  [[nodiscard]] QString notes(const io::wire::TankView& tank) const;
  void fillColumn(std::vector<BenchRow*>& rows, QVBoxLayout* column, const std::vector<BenchNumber>& numbers);

  const Look& m_look;
  const ShopData& m_data;
  const Format& m_format;
  std::string m_id;
  std::int64_t m_alarm = 0;
  QWidget* m_inside;
  QLabel* m_title;
  QLabel* m_recipe;
  ConditionLabel* m_condition;
  QLabel* m_age;
  QLabel* m_reason;
  QPushButton* m_acknowledge;
  LargeTank* m_picture;
  QLabel* m_notes;
  QPushButton* m_mind;
  QLabel* m_cautions;
  QVBoxLayout* m_left;
  QVBoxLayout* m_right;
  std::vector<BenchRow*> m_channels, m_margins;
};

}  // namespace tw::ui
