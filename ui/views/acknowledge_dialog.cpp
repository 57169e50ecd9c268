// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/views/acknowledge_dialog.hpp"

#include <QFormLayout>
#include <QHBoxLayout>
#include <QVBoxLayout>

#include "ui/theme/style.hpp"
#include "ui/words/cautions.hpp"
#include "ui/words/words.hpp"

namespace tw::ui {
namespace {

constexpr int kLongestName = 40;

QLabel* paragraph(const QString& text, int size, bool bold) {
  auto* label = new QLabel(text);
  label->setWordWrap(true);
  label->setFont(textFont(size, bold));
  return label;
}

}  // namespace

AcknowledgeDialog::AcknowledgeDialog(const io::wire::AlarmView& alarm, const io::wire::TankView* tank,
                                     const Format& format, const QDateTime& now, const QString& operatorName,
                                     QWidget* parent)
    : QDialog(parent), m_alarm(alarm.id), m_operator(new QLineEdit(operatorName)), m_comment(new QLineEdit),
      m_failure(paragraph({}, kTextPx, true)), m_confirm(new QPushButton(tr("Acknowledge"))) {
  setWindowTitle(tr("Acknowledge an alarm"));
  setMinimumWidth(520);
  const Reasons reasons(format);
  const QString title = tank != nullptr ? QString::fromStdString(tank->title) : QString::fromStdString(alarm.subject);
  const QDateTime raised = instant(alarm.raisedAt);
  auto* all = new QVBoxLayout(this);
  all->setContentsMargins(22, 20, 22, 20);
  all->setSpacing(10);
  all->addWidget(paragraph(title, kTitlePx, true));
  all->addWidget(paragraph(reasons.alarm(alarm, tank), 17, false));
  all->addWidget(paragraph(tr("Raised %1 (%2), priority %3")
                               .arg(format.clock(raised, now), format.age(raised, now), Words::priority(alarm.priority)),
                           14, false));
  all->addWidget(paragraph(tr("What to do: %1").arg(reasons.toDo(alarm, tank)), kTextPx, true));
  if (tank != nullptr && !tank->hazards.empty()) {
    all->addWidget(paragraph(cautionText(tank->hazards), kSmallPx, false));
  }

  m_operator->setFont(textFont(19, true));
  m_operator->setMaxLength(kLongestName);
  m_operator->setAccessibleName(tr("Your initials"));
  m_comment->setAccessibleName(tr("Comment, may stay empty"));
  auto* form = new QFormLayout;
  form->setFieldGrowthPolicy(QFormLayout::ExpandingFieldsGrow);
  form->addRow(tr("Your initials"), m_operator);
  form->addRow(tr("Comment"), m_comment);
  all->addLayout(form);
  m_failure->hide();
  all->addWidget(m_failure);

  auto* cancel = new QPushButton(tr("Not now"));
  cancel->setAccessibleName(tr("Close without acknowledging"));
  cancel->setAutoDefault(false);
  m_confirm->setProperty("primary", true);
  m_confirm->setDefault(true);
  m_confirm->setAccessibleName(tr("Acknowledge the alarm under your initials"));
  auto* buttons = new QHBoxLayout;
  buttons->addStretch(1);
  buttons->addWidget(cancel);
  buttons->addWidget(m_confirm);
  all->addLayout(buttons);

  connect(m_operator, &QLineEdit::textChanged, this, &AcknowledgeDialog::checkOperator);
  connect(cancel, &QPushButton::clicked, this, &QDialog::reject);
  connect(m_confirm, &QPushButton::clicked, this, &AcknowledgeDialog::submit);
  checkOperator();
  (operatorName.trimmed().isEmpty() ? static_cast<QWidget*>(m_operator) : m_confirm)->setFocus();
}

void AcknowledgeDialog::checkOperator() { m_confirm->setEnabled(!m_operator->text().trimmed().isEmpty()); }

void AcknowledgeDialog::submit() {
  m_confirm->setEnabled(false);
  m_failure->hide();
  Q_EMIT confirmed(m_alarm, m_operator->text().trimmed(), m_comment->text().trimmed());
}

void AcknowledgeDialog::showFailure(const QString& why) {
  m_failure->setText(tr("Not taken: %1").arg(why));
  m_failure->show();
  checkOperator();
}

}  // namespace tw::ui
