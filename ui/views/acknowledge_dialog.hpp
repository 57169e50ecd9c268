// SPDX-License-Identifier: GPL-3.0-or-later
// Answers one alarm with a name. Stays open, with what was typed, until the service has taken it.
#pragma once

#include <QDialog>
#include <QLabel>
#include <QLineEdit>
#include <QPushButton>

#include "io/wire/api.hpp"
#include "ui/words/reasons.hpp"

namespace tw::ui {

class AcknowledgeDialog : public QDialog {
  Q_OBJECT

 public:
  /// `tank` may be null (a link alarm belongs to none).
  AcknowledgeDialog(const io::wire::AlarmView& alarm, const io::wire::TankView* tank, const Format& format,
                    const QDateTime& now, const QString& operatorName, QWidget* parent = nullptr);
  [[nodiscard]] qint64 alarm() const { return m_alarm; }
  [[nodiscard]] QLineEdit* operatorField() const { return m_operator; }
  [[nodiscard]] QPushButton* confirmButton() const { return m_confirm; }

 public Q_SLOTS:
  /// The service refused or was not there: say why and let the person try again.
  void showFailure(const QString& why);

 Q_SIGNALS:
  void confirmed(qint64 alarm, const QString& op, const QString& comment);

 private:
  void submit();
  void checkOperator();

  qint64 m_alarm;
  QLineEdit* m_operator;
  QLineEdit* m_comment;
  QLabel* m_failure;
  QPushButton* m_confirm;
};

}  // namespace tw::ui
