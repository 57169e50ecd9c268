// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/views/line/strip_column.hpp"

#include <QKeyEvent>
#include <QPainter>
#include <QScrollArea>

#include "ui/theme/style.hpp"
#include "ui/widgets/condition_glyph.hpp"

namespace tw::ui {
namespace {

constexpr int kGlyph = 28;
constexpr int kPad = 8;

}  // namespace

StripRow::StripRow(const Look& look, QWidget* parent)
    : QAbstractButton(parent), m_look(look), m_action(new QPushButton(this)) {
  setFocusPolicy(Qt::StrongFocus);
  setAttribute(Qt::WA_Hover);
  setCursor(Qt::PointingHandCursor);
  setSizePolicy(QSizePolicy::Expanding, QSizePolicy::Fixed);
  m_action->hide();
  connect(this, &QAbstractButton::clicked, this, [this] { Q_EMIT opened(m_entry.tank); });
  connect(m_action, &QAbstractButton::clicked, this, [this] { Q_EMIT acted(m_entry.key); });
}

void StripRow::setEntry(const StripEntry& entry) {
  m_entry = entry;
  setAccessibleName(tr("%1: %2").arg(entry.title, entry.detail));
  setToolTip(entry.tip.isEmpty() ? entry.detail : entry.detail + QLatin1Char('\n') + entry.tip);
  m_action->setText(entry.action);
  m_action->setAccessibleName(tr("%1: %2").arg(entry.action, entry.title));
  m_action->setVisible(!entry.action.isEmpty());
  placeAction();
  update();
}

void StripRow::placeAction() {
  const int width = m_action->sizeHint().width();
  m_action->setGeometry(this->width() - width - 1, 1, width, kTarget);
}

void StripRow::resizeEvent(QResizeEvent*) { placeAction(); }

void StripRow::keyPressEvent(QKeyEvent* event) {
  if (event->key() == Qt::Key_Return || event->key() == Qt::Key_Enter) {
    click();
    return;
  }
  QAbstractButton::keyPressEvent(event);
}

void StripRow::paintEvent(QPaintEvent*) {
  QPainter painter(this);
  painter.setRenderHint(QPainter::Antialiasing);
  const Theme& theme = m_look.theme();
  if (underMouse()) painter.fillRect(rect(), theme.color(Role::Raised));
  painter.setPen(theme.color(Role::Hairline));
  painter.drawLine(QPointF(0, height() - 0.5), QPointF(width(), height() - 0.5));
  int x = kPad;
  if (m_entry.condition) {
    paintGlyph(painter, QRectF(x, (height() - kGlyph) / 2.0, kGlyph, kGlyph), *m_entry.condition, theme);
    x += kGlyph + kPad;
  } else if (m_entry.urgent) {  // overdue has no condition word: a bar, beside the word in the text
    painter.fillRect(QRectF(0, 4, 4, height() - 9), theme.color(Role::Ink));
  }
  const int right = m_action->isVisible() ? m_action->x() - kPad : width() - kPad;
  const int room = std::max(right - x, 10);
  const auto line = [&](const QString& text, int y, const QFont& font, Role role) {
    painter.setFont(font);
    painter.setPen(theme.color(role));
    painter.drawText(QRect(x, y, room, 20), Qt::AlignLeft | Qt::AlignVCenter,
                     QFontMetrics(font).elidedText(text, Qt::ElideRight, room));
  };
  line(m_entry.title, 4, textFont(14, true), Role::Ink);
  line(m_entry.detail, 23, textFont(kSmallPx), m_entry.urgent ? Role::Ink : Role::InkSoft);
  if (hasFocus()) {
    painter.setPen(QPen(theme.color(Role::Focus), 3.0));
    painter.setBrush(Qt::NoBrush);
    painter.drawRoundedRect(QRectF(rect()).adjusted(1.5, 1.5, -1.5, -1.5), 4, 4);
  }
}

StripColumn::StripColumn(const Look& look, const QString& heading, const QString& nothing, QWidget* parent)
    : QWidget(parent), m_look(look), m_heading(heading), m_nothing(nothing), m_title(new QLabel(heading)),
      m_empty(new QLabel(nothing)), m_list(new QVBoxLayout) {
  m_title->setFont(textFont(14, true));
  m_title->setForegroundRole(QPalette::PlaceholderText);
  m_empty->setForegroundRole(QPalette::PlaceholderText);
  m_empty->setWordWrap(true);
  m_empty->setMinimumHeight(kTarget);
  m_empty->setAlignment(Qt::AlignLeft | Qt::AlignTop);
  m_list->setContentsMargins(0, 0, 0, 0);
  m_list->setSpacing(0);
  m_list->addWidget(m_empty);
  m_list->addStretch(1);
  auto* inside = new QWidget;
  inside->setLayout(m_list);
  auto* area = new QScrollArea;
  area->setWidget(inside);
  area->setWidgetResizable(true);
  area->setHorizontalScrollBarPolicy(Qt::ScrollBarAlwaysOff);
  area->setFocusPolicy(Qt::NoFocus);
  area->setFrameShape(QFrame::NoFrame);
  auto* all = new QVBoxLayout(this);
  all->setContentsMargins(0, 0, 0, 0);
  all->setSpacing(2);
  all->addWidget(m_title);
  all->addWidget(area, 1);
  setEntries({});
}

void StripColumn::setEntries(const std::vector<StripEntry>& entries) {
  while (m_rows.size() < entries.size()) {
    auto* row = new StripRow(m_look);
    connect(row, &StripRow::opened, this, &StripColumn::opened);
    connect(row, &StripRow::acted, this, &StripColumn::acted);
    m_list->insertWidget(static_cast<int>(m_rows.size()), row);
    m_rows.push_back(row);
  }
  for (std::size_t i = 0; i < m_rows.size(); ++i) {
    const bool used = i < entries.size();
    if (used) m_rows[i]->setEntry(entries[i]);
    m_rows[i]->setVisible(used);
  }
  m_empty->setVisible(entries.empty());
  m_title->setText(entries.empty() ? m_heading : tr("%1 (%2)").arg(m_heading).arg(entries.size()));
}

}  // namespace tw::ui
