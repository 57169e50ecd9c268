// SPDX-License-Identifier: GPL-3.0-or-later
// One of the three lists above the line: a heading with its count, rows of 44 px that can be pressed,
// scrolling when there are more than fit.
#pragma once

#include <QAbstractButton>
#include <QLabel>
#include <QPushButton>
#include <QVBoxLayout>
#include <QWidget>
#include <vector>

#include "ui/theme/look.hpp"
#include "ui/views/line/entries.hpp"

namespace tw::ui {

/// One row; pressing it opens what it speaks of.
class StripRow : public QAbstractButton {
  Q_OBJECT

 public:
  explicit StripRow(const Look& look, QWidget* parent = nullptr);
  void setEntry(const StripEntry& entry);
  [[nodiscard]] const StripEntry& entry() const { return m_entry; }
  [[nodiscard]] QSize sizeHint() const override { return {200, 46}; }

 Q_SIGNALS:
  void opened(const std::string& tank);
  void acted(const std::string& key);

 protected:
  void paintEvent(QPaintEvent* event) override;
  void keyPressEvent(QKeyEvent* event) override;
  void resizeEvent(QResizeEvent* event) override;

 private:
  void placeAction();

  const Look& m_look;
  StripEntry m_entry;
  QPushButton* m_action;
};

class StripColumn : public QWidget {
  Q_OBJECT

 public:
  StripColumn(const Look& look, const QString& heading, const QString& nothing, QWidget* parent = nullptr);
  void setEntries(const std::vector<StripEntry>& entries);
  [[nodiscard]] const std::vector<StripRow*>& rows() const { return m_rows; }

 Q_SIGNALS:
  void opened(const std::string& tank);
  void acted(const std::string& key);

 private:
  const Look& m_look;
  QString m_heading, m_nothing;
  QLabel* m_title;
  QLabel* m_empty;
  QVBoxLayout* m_list;
  std::vector<StripRow*> m_rows;
};

}  // namespace tw::ui
