// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/views/top_bar.hpp"

#include <QHBoxLayout>
#include <QPainter>
#include <algorithm>

#include "ui/theme/style.hpp"

namespace tw::ui {
namespace {

/// Below this width (a small screen at 200 %) titles give way to controls.
constexpr int kNarrow = 900;
constexpr int kLongestName = 40;

}  // namespace

TopBar::TopBar(const Look& look, const ShopData& shopData, const Format& format, QWidget* parent)
    : QFrame(parent), m_look(look), m_data(shopData), m_format(format), m_title(new QLabel),
      m_line(new QPushButton(tr("Line"))), m_tank(new QPushButton(tr("Tank"))), m_link(new QLabel),
      m_who(new QLabel(tr("Who acts"))), m_operator(new QLineEdit), m_theme(new QPushButton) {
  m_title->setFont(textFont(kTitlePx, true));
  m_title->setSizePolicy(QSizePolicy::Ignored, QSizePolicy::Preferred);
  m_line->setCheckable(true);
  m_tank->setCheckable(true);
  m_line->setAccessibleName(tr("Show the line (Alt+1)"));
  m_tank->setAccessibleName(tr("Show the tank (Alt+2)"));
  m_line->setToolTip(tr("Alt+1"));
  m_tank->setToolTip(tr("Alt+2, next and previous tank: Ctrl+Page Down, Ctrl+Page Up"));
  m_link->setFont(textFont(14));
  m_who->setForegroundRole(QPalette::PlaceholderText);
  m_who->setFont(textFont(kSmallPx));
  m_operator->setFont(textFont(19, true));
  m_operator->setFixedWidth(120);
  m_operator->setMaxLength(kLongestName);
  m_operator->setPlaceholderText(tr("initials"));
  m_operator->setAccessibleName(tr("Who acts: initials"));
  m_who->setBuddy(m_operator);
  auto* row = new QHBoxLayout(this);
  row->setContentsMargins(16, 8, 16, 9);
  row->setSpacing(10);
  row->addWidget(m_title, 1);
  row->addWidget(m_line);
  row->addWidget(m_tank);
  row->addSpacing(8);
  row->addWidget(m_link);
  row->addSpacing(8);
  row->addWidget(m_who);
  row->addWidget(m_operator);
  row->addWidget(m_theme);

  // The check mark follows the view, not the press.
  connect(m_line, &QPushButton::clicked, this, [this] { Q_EMIT viewWanted(QStringLiteral("line")); });
  connect(m_tank, &QPushButton::clicked, this, [this] { Q_EMIT viewWanted(QStringLiteral("tank")); });
  connect(m_theme, &QPushButton::clicked, this, &TopBar::themeSwitched);
  connect(&shopData, &ShopData::shopChanged, this, &TopBar::refresh);
  connect(&shopData, &ShopData::linkChanged, this, &TopBar::refresh);
  refresh();
}

void TopBar::setCurrentView(const QString& view) {
  m_line->setChecked(view == QLatin1String("line"));
  m_tank->setChecked(view == QLatin1String("tank"));
}

void TopBar::refresh() {
  switch (m_data.link()) {
    case Link::Connecting: m_link->setText(tr("connecting\u2026")); break;
    case Link::Live: m_link->setText(tr("connected, live")); break;
    case Link::Asking: m_link->setText(tr("connected")); break;
    case Link::Lost: m_link->setText(tr("service lost")); break;
  }
  m_link->setAccessibleName(tr("Service: %1").arg(m_link->text()));
  m_link->setToolTip(tr("last heard %1").arg(m_format.clockWithOffset(m_data.lastHeard())));
  const bool light = m_look.theme().name() == ThemeName::Light;
  m_theme->setText(light ? tr("Dark") : tr("Light"));
  m_theme->setAccessibleName(light ? tr("Switch to the dark theme") : tr("Switch to the light theme"));
  layout()->activate();  // the title takes the room that the texts above leave
  const QString title = QString::fromStdString(m_data.shop().title);
  const QString shown = title.isEmpty() ? tr("Tankward") : title;
  m_title->setText(QFontMetrics(m_title->font()).elidedText(shown, Qt::ElideRight, std::max(m_title->width(), 40)));
  m_title->setToolTip(title);
}

void TopBar::resizeEvent(QResizeEvent*) {
  const bool narrow = width() < kNarrow;
  m_who->setVisible(!narrow);
  m_link->setVisible(!narrow || m_data.link() != Link::Live);
  refresh();
}

void TopBar::paintEvent(QPaintEvent*) {
  QPainter painter(this);
  painter.fillRect(rect(), m_look.theme().color(Role::Surface));
  painter.setPen(m_look.theme().color(Role::Hairline));
  painter.drawLine(0, height() - 1, width(), height() - 1);
}

}  // namespace tw::ui
