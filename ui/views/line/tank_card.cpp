// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/views/line/tank_card.hpp"

#include <QHBoxLayout>
#include <QStyle>
#include <QVBoxLayout>
#include <algorithm>

#include "ui/theme/style.hpp"
#include "ui/words/words.hpp"

namespace tw::ui {
namespace {

constexpr int kNarrowest = 216;
constexpr int kWidest = 310;
constexpr int kReasonLines = 2;

}  // namespace

TankLook lookOf(const io::wire::TankView& tank) {
  TankLook look;
  look.bed = tank.bed;
  look.liquor = QColor(QString::fromStdString(tank.liquorColor));
  look.condition = Words::conditionOf(tank);
  look.inService = tank.inService;
  look.stale = tank.inService && look.condition == model::Condition::Stale;
  look.doubtful = tank.doubtful || !tank.reliable;
  if (tank.projection) look.bedAtHorizon = tank.projection->bedAtHorizon;
  return look;
}

TankCard::TankCard(const Look& look, const ShopData& shopData, const Format& format, std::string tank,
                   QWidget* parent)
    : QWidget(parent), m_data(shopData), m_format(format), m_id(std::move(tank)), m_title(new QLabel),
      m_age(new QLabel), m_picture(new TankButton(look)), m_condition(new ConditionLabel(look)),
      m_reason(new WrapText(look, 14, kReasonLines)), m_help(new QPushButton) {
  setMinimumWidth(kNarrowest);
  setMaximumWidth(kWidest);
  m_title->setFont(textFont(17, true));
  m_age->setFont(textFont(kSmallPx));
  m_age->setForegroundRole(QPalette::PlaceholderText);
  auto* words = new QVBoxLayout;
  words->setContentsMargins(14, 0, 14, 0);
  words->setSpacing(4);
  words->addWidget(m_condition);
  words->addWidget(m_reason);
  words->addWidget(m_help);
  auto* top = new QVBoxLayout;
  top->setContentsMargins(14, 0, 14, 0);
  top->setSpacing(1);
  top->addWidget(m_title);
  top->addWidget(m_age);
  auto* all = new QVBoxLayout(this);
  all->setContentsMargins(0, 0, 0, 0);
  all->setSpacing(4);
  all->addLayout(top);
  all->addWidget(m_picture, 1);
  all->addLayout(words);

  connect(m_picture, &QAbstractButton::clicked, this, [this] { Q_EMIT tankOpened(m_id); });
  connect(m_help, &QAbstractButton::clicked, this, &TankCard::press);
  refresh();
}

void TankCard::press() {
  if (m_now.kind == TankHelp::Kind::Acknowledge) {
    Q_EMIT acknowledgeWanted(m_now.alarm);
  } else {
    Q_EMIT tankOpened(m_id);
  }
}

void TankCard::placeHelpText() {
  constexpr int kPadding = 34;
  QFont font = m_help->font();
  font.setBold(true);
  m_help->setText(QFontMetrics(font).elidedText(m_now.text, Qt::ElideRight, std::max(m_help->width() - kPadding, 60)));
  m_help->setToolTip(m_now.text);
}

void TankCard::resizeEvent(QResizeEvent* event) {
  QWidget::resizeEvent(event);
  layout()->activate();
  placeHelpText();
}

void TankCard::refresh() {
  const io::wire::TankView* tank = m_data.tank(m_id);
  if (tank == nullptr) return;
  const QDateTime sampled = instant(tank->sampledAt);
  const QString title = QString::fromStdString(tank->title);
  const QString age = sampled.isValid() ? tr("read %1").arg(m_format.age(sampled, m_data.now()))
                                        : tr("no reading yet");
  const QString word = Words::conditionText(*tank);
  const QString reason = Reasons(m_format).headline(*tank, m_data.now());
  m_title->setText(title);
  m_title->setToolTip(QString::fromStdString(tank->recipeTitle));
  m_age->setText(tank->inService ? age : tr("out of service"));
  m_age->setToolTip(m_format.clockWithOffset(sampled));

  TankLook look = lookOf(*tank);
  look.emptyWord = tr("out of service");
  m_picture->setTank(look);
  QString used = tank->bed ? tr("used margin %1").arg(m_format.percent(*tank->bed)) : tr("used margin unknown");
  if (look.bedAtHorizon) {
    used += tr(", in %1: %2").arg(m_format.span(tank->horizon_h), m_format.percent(*look.bedAtHorizon));
  }
  m_picture->setToolTip(used);
  m_picture->setAccessibleName(tr("Open %1: %2, %3, %4, %5").arg(title, word, used, reason, age));

  m_condition->setCondition(tank->inService ? look.condition : std::nullopt, word, tank->inService && tank->stale);
  m_reason->setText(reason);
  m_now = Entries(m_data, m_format).helpFor(*tank);
  placeHelpText();
  m_help->setAccessibleName(tr("%1: %2").arg(title, m_now.text));
  const bool primary = m_now.kind != TankHelp::Kind::OpenTank;
  if (m_help->property("primary").toBool() != primary) {
    m_help->setProperty("primary", primary);
    m_help->style()->unpolish(m_help);
    m_help->style()->polish(m_help);
  }
}

}  // namespace tw::ui
