// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/views/line/attention_strip.hpp"

#include <QHBoxLayout>
#include <QPainter>

namespace tw::ui {

AttentionStrip::AttentionStrip(const Look& look, const ShopData& shopData, const Format& format, QWidget* parent)
    : QFrame(parent), m_look(look), m_entries(shopData, format),
      m_needed(new StripColumn(look, tr("Needs somebody"), tr("No tank needs anybody."))),
      m_alarms(new StripColumn(look, tr("Alarms to acknowledge"), tr("No alarm waits for an answer."))),
      m_due(new StripColumn(look, tr("Due"), tr("Nothing is due."))) {
  auto* row = new QHBoxLayout(this);
  row->setContentsMargins(16, 8, 16, 6);
  row->setSpacing(24);
  row->addWidget(m_needed, 5);
  row->addWidget(m_alarms, 6);
  row->addWidget(m_due, 4);
  for (StripColumn* column : {m_needed, m_alarms, m_due}) {
    connect(column, &StripColumn::opened, this, &AttentionStrip::tankOpened);
  }
  connect(m_alarms, &StripColumn::acted, this,
          [this](const std::string& key) { Q_EMIT acknowledgeWanted(std::stoll(key)); });
}

void AttentionStrip::refresh() {
  m_needed->setEntries(m_entries.needSomebody());
  m_alarms->setEntries(m_entries.toAcknowledge());
  m_due->setEntries(m_entries.due());
}

void AttentionStrip::paintEvent(QPaintEvent*) {
  QPainter painter(this);
  painter.fillRect(rect(), m_look.theme().color(Role::Surface));
  painter.setPen(m_look.theme().color(Role::Hairline));
  painter.drawLine(0, height() - 1, width(), height() - 1);
}

}  // namespace tw::ui
