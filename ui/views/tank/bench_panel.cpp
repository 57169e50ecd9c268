// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/views/tank/bench_panel.hpp"

#include <QHBoxLayout>
#include <QPainter>
#include <QScrollArea>
#include <QVBoxLayout>
#include <algorithm>

#include "ui/theme/style.hpp"
#include "ui/views/line/tank_card.hpp"
#include "ui/words/cautions.hpp"
#include "ui/words/words.hpp"

namespace tw::ui {
namespace {

/// A bar reaches this far beyond its window on each side, so that a value outside is seen to be outside.
constexpr double kBeyond = 0.35;
/// A margin's bar ends at this many times its caution limit; more room than that reads as full.
constexpr double kFullMargin = 3.0;

QPushButton* stepButton(const QString& sign, const QString& name) {
  auto* button = new QPushButton(sign);
  button->setFixedWidth(kTarget);
  button->setAccessibleName(name);
  button->setToolTip(name);
  button->setStyleSheet(QStringLiteral("padding: 0; font-size: 20px;"));
  return button;
}

}  // namespace

LargeTank::LargeTank(const Look& look, QWidget* parent) : QWidget(parent), m_look(look) {
  setSizePolicy(QSizePolicy::Expanding, QSizePolicy::Expanding);
}

void LargeTank::setTank(const TankLook& look) {
  m_tank = look;
  m_tank.scaleWords = true;
  m_tank.cautionWord = tr("caution");
  m_tank.actWord = tr("act");
  m_tank.lineWord = tr("sludge line");
  m_tank.emptyWord = tr("out of service");
  update();
}

void LargeTank::paintEvent(QPaintEvent*) {
  QPainter painter(this);
  painter.setPen(QPen(m_look.theme().color(Role::Edge), 2.0));
  painter.drawLine(QPointF(0, height() - 3.0), QPointF(width(), height() - 3.0));
  paintTank(painter, QRectF(rect()), m_tank, m_look.theme());
}

BenchPanel::BenchPanel(const Look& look, const ShopData& shopData, const Format& format, QWidget* parent)
    : QWidget(parent), m_look(look), m_data(shopData), m_format(format), m_inside(new QWidget), m_title(new QLabel), m_recipe(new QLabel),
      m_condition(new ConditionLabel(look)), m_age(new QLabel), m_reason(new QLabel),
      m_acknowledge(new QPushButton(tr("acknowledge alarm\u2026"))), m_picture(new LargeTank(look)),
      m_notes(new QLabel), m_mind(new QPushButton), m_cautions(new QLabel), m_left(new QVBoxLayout), m_right(new QVBoxLayout) {
  m_title->setFont(textFont(kTitlePx, true));
  m_recipe->setFont(textFont(kSmallPx));
  m_recipe->setForegroundRole(QPalette::PlaceholderText);
  m_age->setFont(textFont(kSmallPx));
  m_age->setForegroundRole(QPalette::PlaceholderText);
  m_age->setAlignment(Qt::AlignRight | Qt::AlignVCenter);
  m_age->setWordWrap(true);
  m_reason->setWordWrap(true);
  for (QLabel* label : {m_title, m_recipe, m_age}) label->setSizePolicy(QSizePolicy::Ignored, QSizePolicy::Preferred);
  m_notes->setFont(textFont(kSmallPx));
  m_notes->setWordWrap(true);
  m_cautions->setFont(textFont(kSmallPx));
  m_cautions->setWordWrap(true);
  m_cautions->hide();
  m_mind->setCheckable(true);
  m_mind->setSizePolicy(QSizePolicy::Ignored, QSizePolicy::Fixed);
  m_condition->setGlyphSize(36);
  m_acknowledge->setProperty("primary", true);

  auto* previous = stepButton(QStringLiteral("\u2039"), tr("Previous tank"));
  auto* next = stepButton(QStringLiteral("\u203A"), tr("Next tank"));
  auto* names = new QVBoxLayout;
  names->setSpacing(0);
  names->addWidget(m_title);
  names->addWidget(m_recipe);
  auto* head = new QHBoxLayout;
  head->setSpacing(8);
  head->addLayout(names, 1);
  head->addWidget(previous);
  head->addWidget(next);
  auto* state = new QHBoxLayout;
  state->addWidget(m_condition);
  state->addWidget(m_age, 1);

  auto* columns = new QHBoxLayout;
  columns->setSpacing(14);
  for (QVBoxLayout* column : {m_left, m_right}) {
    column->setSpacing(6);
    column->setContentsMargins(0, 0, 0, 0);
    column->addStretch(1);
    columns->addLayout(column, 1);
  }
  auto* whole = new QVBoxLayout(m_inside);
  whole->setContentsMargins(16, 10, 12, 10);
  whole->setSpacing(6);
  whole->addLayout(head);
  whole->addLayout(state);
  whole->addWidget(m_reason);
  whole->addWidget(m_acknowledge);
  whole->addWidget(m_picture, 1);
  whole->addLayout(columns);
  whole->addWidget(m_notes);
  whole->addWidget(m_mind);
  whole->addWidget(m_cautions);
  auto* scroll = new QScrollArea;
  scroll->setWidget(m_inside);
  scroll->setWidgetResizable(true);
  scroll->setFrameShape(QFrame::NoFrame);
  scroll->setFocusPolicy(Qt::NoFocus);
  scroll->setHorizontalScrollBarPolicy(Qt::ScrollBarAlwaysOff);
  auto* all = new QVBoxLayout(this);
  all->setContentsMargins(0, 0, 0, 0);
  all->addWidget(scroll);

  connect(previous, &QPushButton::clicked, this, [this] { Q_EMIT stepWanted(-1); });
  connect(next, &QPushButton::clicked, this, [this] { Q_EMIT stepWanted(1); });
  connect(m_mind, &QPushButton::toggled, m_cautions, &QLabel::setVisible);
  connect(m_acknowledge, &QPushButton::clicked, this, [this] { Q_EMIT acknowledgeWanted(m_alarm); });
}

int BenchPanel::contentHeight() const {
  m_inside->layout()->activate();
  const int byWidth = m_inside->layout()->totalHeightForWidth(width());
  return std::max(m_inside->sizeHint().height(), byWidth) + 2;
}

void BenchPanel::setTank(const std::string& tank) {
  m_id = tank;
  refresh();
}

BenchNumber BenchPanel::channelNumber(const io::wire::ChannelView& channel) const {
  BenchNumber number;
  number.title = Words::channelShort(channel.id, channel.title);
  number.value = m_format.quantity(channel.value, channel.unit);
  const QDateTime at = instant(channel.sampledAt);
  number.age = channel.ratio && !at.isValid() ? QString() : m_format.age(at, m_data.now());
  number.at = channel.value;
  number.pale = channel.tooOld;
  if (channel.high > channel.low) {
    const double beyond = (channel.high - channel.low) * kBeyond;
    number.from = channel.low - beyond;
    number.to = channel.high + beyond;
    number.bandLow = channel.low;
    number.bandHigh = channel.high;
    number.lowText = m_format.number(channel.low);
    number.highText = m_format.number(channel.high);
    number.marks.push_back({channel.target, Role::Edge});
    number.pressing = channel.value && (*channel.value < channel.low || *channel.value > channel.high);
  } else {
    number.from = number.to = 0.0;
  }
  const auto mark = [&](const std::optional<double>& at_, Role role) {
    if (at_) number.marks.push_back({*at_, role});
  };
  mark(channel.guardCautionLow, Role::Caution);
  mark(channel.guardCautionHigh, Role::Caution);
  mark(channel.guardActLow, Role::Act);
  mark(channel.guardActHigh, Role::Act);
  const QDateTime due = channel.dueAt ? instant(*channel.dueAt) : QDateTime();
  if (due.isValid() && due < m_data.now()) {
    number.age = tr("overdue, %1").arg(number.age);
    number.pressing = true;
  }
  number.tip = tr("%1: sampled %2; window %3 to %4, target %5")
                   .arg(QString::fromStdString(channel.title), m_format.clockWithOffset(at), m_format.quantity(channel.low, channel.unit),
                        m_format.quantity(channel.high, channel.unit), m_format.quantity(channel.target, channel.unit));
  if (due.isValid()) number.tip += QLatin1Char('\n') + tr("due %1").arg(m_format.clockWithOffset(due));
  return number;
}

BenchNumber BenchPanel::marginNumber(const io::wire::MarginView& margin, const io::wire::TankView& tank) const {
  const Reasons reasons(m_format);
  BenchNumber number;
  number.title = Words::marginShort(margin.id, margin.ligand);
  number.value = reasons.marginNumber(margin.id, margin.judged);
  number.at = margin.judged;
  number.fills = true;
  number.hatched = !tank.reliable;
  number.pale = tank.condition == "stale";
  if (margin.limit) {
    number.from = 0.0;
    number.to = margin.limit->caution * kFullMargin;
    number.marks = {{margin.limit->act, Role::Act}, {margin.limit->caution, Role::Caution}};
    // The unit stands with the value and the caution limit; a third time there is no room for it.
    const QString act = reasons.marginNumber(margin.id, margin.limit->act).section(QChar(0x00A0), 0, 0);
    number.lowText = tr("act %1").arg(act);
    number.highText = tr("caution %1").arg(reasons.marginNumber(margin.id, margin.limit->caution));
    number.pressing = margin.judged < margin.limit->caution;
  } else {
    number.from = number.to = 0.0;
    number.age = tr("no limit set");
  }
  number.tip = tr("%1: %2 until %3 reaches its sludge line")
                   .arg(Words::marginTitle(margin.id, margin.ligand), number.value, formulaText(margin.solid));
  if (margin.mol_L) number.tip += tr(" (%1)").arg(m_format.quantity(margin.mol_L, "mol/L"));
  return number;
}

QString BenchPanel::notes(const io::wire::TankView& tank) const {
  QStringList lines;
  if (!tank.reliable) {
    const auto found = std::find_if(tank.reasons.begin(), tank.reasons.end(),
                                    [](const auto& reason) { return reason.code == "unreliable"; });
    lines << (found != tank.reasons.end()
                  ? tr("Doubtful: %1.").arg(Reasons(m_format).warning(found->subject))
                  : tr("Doubtful: the numbers are given, but not reliable."));
  }
  if (!tank.unreliableBecause.empty()) {
    lines << tr("Not reliable over the whole window: %1").arg(QString::fromStdString(tank.unreliableBecause));
  }
  if (tank.confidence == "calibrate") {
    lines << tr("The deciding constant is uncertain: calibrate with a jar test.");
  }
  return lines.join(QLatin1Char('\n'));
}

void BenchPanel::fillColumn(std::vector<BenchRow*>& rows, QVBoxLayout* column,
                            const std::vector<BenchNumber>& numbers) {
  while (rows.size() < numbers.size()) {
    auto* row = new BenchRow(m_look);
    column->insertWidget(static_cast<int>(rows.size()), row);
    rows.push_back(row);
  }
  for (std::size_t i = 0; i < rows.size(); ++i) {
    if (i < numbers.size()) rows[i]->setNumber(numbers[i]);
    rows[i]->setVisible(i < numbers.size());
  }
}

void BenchPanel::refresh() {
  const io::wire::TankView* tank = m_data.tank(m_id);
  if (tank == nullptr) return;
  const QDateTime sampled = instant(tank->sampledAt);
  m_title->setText(QString::fromStdString(tank->title));
  m_recipe->setText(tr("%1, %2").arg(QString::fromStdString(tank->recipeTitle),
                                     m_format.quantity(tank->volume_L, "L")));
  TankLook look = lookOf(*tank);
  m_picture->setTank(look);
  const QString used = tank->bed ? tr("used margin %1").arg(m_format.percent(*tank->bed)) : tr("used margin unknown");
  m_picture->setToolTip(used);
  m_picture->setAccessibleName(used);
  m_condition->setCondition(tank->inService ? look.condition : std::nullopt, Words::conditionText(*tank),
                            tank->inService && tank->stale);
  m_age->setText(sampled.isValid() ? tr("%1; read %2").arg(used, m_format.age(sampled, m_data.now())) : used);
  m_age->setToolTip(m_format.clockWithOffset(sampled));
  m_reason->setText(Reasons(m_format).headline(*tank, m_data.now()));
  const TankHelp help = Entries(m_data, m_format).helpFor(*tank);
  m_alarm = help.alarm;
  m_acknowledge->setVisible(help.kind == TankHelp::Kind::Acknowledge);
  m_acknowledge->setAccessibleName(tr("%1: %2").arg(m_title->text(), m_acknowledge->text()));

  std::vector<BenchNumber> channels, margins;
  for (const io::wire::ChannelView& channel : tank->channels) channels.push_back(channelNumber(channel));
  BenchNumber activity;
  activity.title = tr("pM of %1").arg(formulaText(tank->metal));
  activity.value = m_format.quantity(tank->pM, "");
  if (tank->pM) activity.value = m_format.fixed(*tank->pM, 2);
  activity.from = activity.to = 0.0;
  activity.age = m_format.age(sampled, m_data.now());
  activity.pale = look.stale;
  activity.tip = tr("minus the decimal logarithm of the activity of the free metal ion");
  margins.push_back(activity);
  for (const bool limited : {true, false}) {
    for (const io::wire::MarginView& margin : tank->margins) {
      if (margin.limit.has_value() == limited) margins.push_back(marginNumber(margin, *tank));
    }
  }
  fillColumn(m_channels, m_left, channels);
  fillColumn(m_margins, m_right, margins);
  m_notes->setText(notes(*tank));
  const QString hazards = cautionTitles(tank->hazards);
  m_mind->setVisible(!hazards.isEmpty());
  m_mind->setText(tr("Mind: %1").arg(hazards));
  m_mind->setAccessibleName(tr("Show or hide the cautions: %1").arg(hazards));
  m_cautions->setText(cautionText(tank->hazards));
  m_notes->setVisible(!m_notes->text().isEmpty());
}

}  // namespace tw::ui
