// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/views/line/line_view.hpp"

#include <QHBoxLayout>
#include <QPainter>
#include <algorithm>

#include "ui/theme/style.hpp"
#include "ui/views/line/legend.hpp"

namespace tw::ui {
namespace {

constexpr int kRowHeight = 260;  // the least at which a tank is still read from two metres

/// Line and tank ids in order: when they are the same, the rows stay.
std::vector<std::string> layoutKey(const std::vector<io::wire::TankView>& tanks) {
  std::vector<std::string> key;
  for (const io::wire::TankView& tank : tanks) key.push_back(tank.lineId + '/' + tank.id);
  return key;
}

/// A row that scrolls sideways; the focused card is brought into view.
class RowScroll : public QScrollArea {
 public:
  explicit RowScroll(QWidget* inside) {
    setWidget(inside);
    setWidgetResizable(true);
    setFrameShape(QFrame::NoFrame);
    setFocusPolicy(Qt::NoFocus);
    setVerticalScrollBarPolicy(Qt::ScrollBarAlwaysOff);
    setMinimumHeight(kRowHeight);
    setSizePolicy(QSizePolicy::Expanding, QSizePolicy::Expanding);
  }
};

/// The line's name, read from the floor to the crane: it takes no height from the tanks.
class LineSign : public QWidget {
 public:
  LineSign(const Look& look, const QString& title) : m_look(look), m_title(title) {
    setFixedWidth(30);
    setAccessibleName(title);
    setToolTip(title);
  }

 protected:
  void paintEvent(QPaintEvent*) override {
    QPainter painter(this);
    painter.fillRect(rect().adjusted(0, 0, -2, 0), m_look.theme().color(Role::Raised));
    painter.setFont(textFont(14, true));
    painter.setPen(m_look.theme().color(Role::InkSoft));
    painter.translate(0, height());
    painter.rotate(-90);
    painter.drawText(QRect(0, 0, height(), width() - 2), Qt::AlignCenter, m_title);
  }

 private:
  const Look& m_look;
  QString m_title;
};

}  // namespace

LineView::LineView(const Look& look, const ShopData& shopData, const Format& format, QWidget* parent)
    : QWidget(parent), m_look(look), m_data(shopData), m_format(format),
      m_strip(new AttentionStrip(look, shopData, format)), m_lines(new QVBoxLayout) {
  m_strip->setFixedHeight(132);
  m_lines->setContentsMargins(0, 6, 0, 2);
  m_lines->setSpacing(8);
  auto* inside = new QWidget;
  inside->setLayout(m_lines);
  auto* scroll = new QScrollArea;
  scroll->setWidget(inside);
  scroll->setWidgetResizable(true);
  scroll->setFrameShape(QFrame::NoFrame);
  scroll->setFocusPolicy(Qt::NoFocus);
  scroll->setHorizontalScrollBarPolicy(Qt::ScrollBarAlwaysOff);
  auto* all = new QVBoxLayout(this);
  all->setContentsMargins(0, 0, 0, 0);
  all->setSpacing(0);
  all->addWidget(m_strip);
  all->addWidget(scroll, 1);
  all->addWidget(new Legend(look));

  connect(m_strip, &AttentionStrip::tankOpened, this, &LineView::tankOpened);
  connect(m_strip, &AttentionStrip::acknowledgeWanted, this, &LineView::acknowledgeWanted);
  connect(&shopData, &ShopData::tanksChanged, this, &LineView::rebuildIfChanged);
  connect(&shopData, &ShopData::shopChanged, this, &LineView::rebuildIfChanged);
  connect(&shopData, &ShopData::tankChanged, this, &LineView::refreshAges);
  connect(&shopData, &ShopData::alarmsChanged, this, &LineView::refreshAges);
  connect(&shopData, &ShopData::dueChanged, this, &LineView::refreshAges);
  rebuildIfChanged();
}

void LineView::refreshAges() {
  for (TankCard* card : m_cards) card->refresh();
  m_strip->refresh();
}

void LineView::rebuildIfChanged() {
  if (layoutKey(m_data.tanks()) != m_built) rebuild();
  refreshAges();
}

void LineView::rebuild() {
  m_built = layoutKey(m_data.tanks());
  m_cards.clear();
  while (QLayoutItem* item = m_lines->takeAt(0)) {
    delete item->widget();
    delete item;
  }
  std::vector<std::string> lines;
  for (const io::wire::TankView& tank : m_data.tanks()) {
    if (std::find(lines.begin(), lines.end(), tank.lineId) != lines.end()) continue;
    lines.push_back(tank.lineId);
    m_lines->addWidget(
        lineRow(tank.lineId, QString::fromStdString(tank.lineTitle.empty() ? tank.lineId : tank.lineTitle)), 1);
  }
}

QWidget* LineView::lineRow(const std::string& line, const QString& title) {
  auto* cards = new QWidget;
  auto* row = new QHBoxLayout(cards);
  row->setContentsMargins(4, 0, 4, 0);
  row->setSpacing(0);
  for (const io::wire::TankView& tank : m_data.tanks()) {
    if (tank.lineId != line) continue;
    auto* card = new TankCard(m_look, m_data, m_format, tank.id);
    connect(card, &TankCard::tankOpened, this, &LineView::tankOpened);
    connect(card, &TankCard::acknowledgeWanted, this, &LineView::acknowledgeWanted);
    m_cards.push_back(card);
    row->addWidget(card, 100);
  }
  row->addStretch(1);
  auto* whole = new QWidget;
  auto* beside = new QHBoxLayout(whole);
  beside->setContentsMargins(0, 0, 0, 0);
  beside->setSpacing(0);
  beside->addWidget(new LineSign(m_look, title));
  beside->addWidget(new RowScroll(cards), 1);
  return whole;
}

}  // namespace tw::ui
