// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/views/tank/analysis_panel.hpp"

#include <QHBoxLayout>
#include <QPainter>
#include <QScrollArea>
#include <QVBoxLayout>

#include "ui/theme/style.hpp"
#include "ui/views/tank/shares.hpp"
#include "ui/words/reasons.hpp"
#include "ui/words/words.hpp"

namespace tw::ui {
namespace {

constexpr int kPanelWidth = 312;

}  // namespace

AnalysisPanel::AnalysisPanel(const Look& look, const Format& format, QWidget* parent)
    : QFrame(parent), m_look(look), m_format(format), m_when(new QLabel), m_condition(new ConditionLabel(look)),
      m_numbers(new QLabel), m_sharesTitle(new QLabel), m_shares(new ShareBars(look)), m_solids(new QLabel) {
  setMinimumWidth(kPanelWidth);
  setMaximumWidth(kPanelWidth);
  m_when->setFont(textFont(16, true));
  m_when->setWordWrap(true);
  m_sharesTitle->setFont(textFont(14, true));
  m_sharesTitle->setWordWrap(true);
  for (QLabel* label : {m_numbers, m_solids}) {
    label->setWordWrap(true);
    label->setFont(textFont(14));
    label->setTextInteractionFlags(Qt::TextSelectableByMouse);
  }
  auto* close = new QPushButton(tr("Close"));
  close->setAccessibleName(tr("Close the analysis"));
  auto* head = new QHBoxLayout;
  head->addWidget(m_when, 1);
  head->addWidget(close, 0, Qt::AlignTop);
  auto* inside = new QWidget;
  auto* body = new QVBoxLayout(inside);
  body->setContentsMargins(16, 12, 12, 12);
  body->setSpacing(10);
  body->addLayout(head);
  body->addWidget(m_condition);
  body->addWidget(m_numbers);
  body->addWidget(m_sharesTitle);
  body->addWidget(m_shares);
  body->addWidget(m_solids);
  body->addStretch(1);
  auto* scroll = new QScrollArea;
  scroll->setWidget(inside);
  scroll->setWidgetResizable(true);
  scroll->setFrameShape(QFrame::NoFrame);
  scroll->setFocusPolicy(Qt::NoFocus);
  scroll->setHorizontalScrollBarPolicy(Qt::ScrollBarAlwaysOff);
  auto* all = new QVBoxLayout(this);
  all->setContentsMargins(1, 0, 0, 0);
  all->addWidget(scroll);
  connect(close, &QPushButton::clicked, this, &AnalysisPanel::closed);
}

void AnalysisPanel::showWaiting(const QString& when) {
  m_when->setText(when);
  m_condition->hide();
  m_numbers->setText(tr("Fetching the analysis\u2026"));
  m_sharesTitle->hide();
  m_shares->hide();
  m_solids->hide();
}

void AnalysisPanel::showFailure(const QString& why) { m_numbers->setText(tr("Not available: %1").arg(why)); }

void AnalysisPanel::showAnalysis(const AnalysisView& analysis, const std::string& metal, const QDateTime& now) {
  const QDateTime at = instant(analysis.sampledAt);
  m_when->setText(m_format.clock(at, now));
  m_when->setToolTip(m_format.clockWithOffset(at));
  const auto condition = model::condition(analysis.condition);
  if (condition) {
    const QString word = Words::condition(*condition);
    m_condition->setCondition(condition, analysis.doubtful ? tr("%1 ?").arg(word) : word, false);
  }
  m_condition->setVisible(condition.has_value());

  QStringList lines;
  const auto line = [&](const QString& name, std::optional<double> value, int decimals, const QString& unit) {
    if (value) lines << tr("%1: %2 %3").arg(name, m_format.fixed(*value, decimals), unit).trimmed();
  };
  line(tr("pM of %1").arg(formulaText(metal)), analysis.pM, 2, {});
  line(tr("pH in the bath"), analysis.ph, 2, {});
  line(tr("Temperature"), analysis.temperature_C, 1, unitText("degC"));
  line(tr("Ionic strength"), analysis.ionicStrength_mol_L, 2, QStringLiteral("mol/L"));
  for (const SpeciesRow& ligand : analysis.freeLigands) {
    lines << tr("Free %1: %2").arg(Words::substance(ligand.formula), m_format.quantity(ligand.mol_L, "mol/L"));
  }
  m_numbers->setText(lines.join(QLatin1Char('\n')));
  m_sharesTitle->setText(tr("Where the %1 is").arg(Words::substance(metal)));
  m_shares->setShares(metalShares(analysis, metal, m_format, tr("all others")));
  QStringList solids(tr("Saturation (0 = sludge line):"));
  for (const SolidRow& solid : analysis.solids) {
    const QString value = solid.lgSaturation ? m_format.fixed(*solid.lgSaturation - solid.threshold, 2) : tr("absent");
    //: name of a solid, its logarithm of saturation
    solids << tr("%1: lg %2").arg(formulaText(solid.id), value);
  }
  for (const std::string& warning : analysis.warnings) solids << Reasons(m_format).warning(warning);
  m_solids->setText(solids.join(QLatin1Char('\n')));
  m_sharesTitle->show();
  m_shares->show();
  m_solids->show();
}

void AnalysisPanel::paintEvent(QPaintEvent*) {
  QPainter painter(this);
  painter.fillRect(rect(), m_look.theme().color(Role::Surface));
  painter.setPen(m_look.theme().color(Role::Edge));
  painter.drawLine(0, 0, 0, height());
}

}  // namespace tw::ui
