// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/views/tank/tank_view.hpp"

#include <QHBoxLayout>
#include <QScrollArea>
#include <QVBoxLayout>
#include <algorithm>

#include "ui/theme/style.hpp"
#include "ui/views/tank/history.hpp"
#include "ui/words/words.hpp"

namespace tw::ui {
namespace {

constexpr int kBenchWidth = 452;
constexpr int kBenchLeast = 440;
constexpr int kNarrow = 940;
constexpr int kSideHeight = 640;
constexpr qint64 kFirstDays = 35;
constexpr int kRedrawSoon_ms = 150;
constexpr qint64 kSecondsPerDay = 86400;

/// Keeps rows by time with one per id; a row that comes twice is the newer one.
template <class Row>
void upsert(std::vector<Row>& rows, const Row& row) {
  std::erase_if(rows, [&](const Row& known) { return known.id == row.id; });
  const auto place = std::upper_bound(rows.begin(), rows.end(), row,
                                      [](const Row& a, const Row& b) { return axisTime(a.sampledAt) < axisTime(b.sampledAt); });
  rows.insert(place, row);
}

}  // namespace

TankView::TankView(const Look& look, const ShopData& shopData, ApiClient& client, const Format& format, QWidget* parent)
    : QWidget(parent), m_data(shopData), m_client(client), m_format(format),
      m_bench(new BenchPanel(look, shopData, format)), m_margins(new QComboBox), m_folds(new QWidget),
      m_strips(new Strips(look, format)), m_trouble(new QLabel), m_analysis(new AnalysisPanel(look, format)) {
  m_analysis->hide();
  m_soon.setSingleShot(true);
  m_soon.setInterval(kRedrawSoon_ms);
  auto* content = new QWidget;
  m_panes = new QBoxLayout(QBoxLayout::LeftToRight, content);
  m_panes->setContentsMargins(0, 0, 0, 0);
  m_panes->setSpacing(0);
  m_side = stripSide();
  m_panes->addWidget(m_bench, 4);
  m_panes->addWidget(m_side, 8);
  m_panes->addWidget(m_analysis);
  auto* scroll = new QScrollArea;
  scroll->setWidget(content);
  scroll->setWidgetResizable(true);
  scroll->setFrameShape(QFrame::NoFrame);
  scroll->setFocusPolicy(Qt::NoFocus);
  scroll->setHorizontalScrollBarPolicy(Qt::ScrollBarAlwaysOff);
  auto* all = new QVBoxLayout(this);
  all->setContentsMargins(0, 0, 0, 0);
  all->addWidget(scroll);

  connect(&m_soon, &QTimer::timeout, this, &TankView::redraw);
  connect(m_bench, &BenchPanel::acknowledgeWanted, this, &TankView::acknowledgeWanted);
  connect(m_bench, &BenchPanel::stepWanted, this, &TankView::stepWanted);
  connect(m_margins, &QComboBox::activated, this, [this](int index) {
    m_margin = m_margins->itemData(index).toString().toStdString();
    redraw();
  });
  connect(m_strips, &Strips::resultChosen, this, &TankView::chooseResult);
  connect(m_strips, &Strips::rangeShown, this, &TankView::rangeShown);
  connect(m_strips, &Strips::spanChosen, this, [this](Strips::Span span) {
    for (const auto& [which, button] : m_spans) button->setChecked(which == span);
  });
  connect(m_analysis, &AnalysisPanel::closed, m_analysis, &QWidget::hide);
  connect(&shopData, &ShopData::tankChanged, this, [this](const std::string& id) {
    if (id == m_id) refreshAges();
  });
  connect(&shopData, &ShopData::tanksChanged, m_bench, &BenchPanel::refresh);
  connect(&shopData, &ShopData::alarmsChanged, this, &TankView::takeAlarms);
  connect(&shopData, &ShopData::resultArrived, this, &TankView::takeResult);
  connect(&shopData, &ShopData::readingArrived, this, &TankView::takeReading);
  listenToClient();
}

void TankView::resizeEvent(QResizeEvent*) { fitPanes(); }

void TankView::fitPanes() {
  // A small screen, or a large one at 200 %: the panes stand one above the other and scroll together.
  const bool narrow = width() < kNarrow;
  m_panes->setDirection(narrow ? QBoxLayout::TopToBottom : QBoxLayout::LeftToRight);
  m_bench->setMinimumWidth(narrow ? 0 : kBenchLeast);
  m_bench->setMaximumWidth(narrow ? QWIDGETSIZE_MAX : kBenchWidth);
  m_bench->setMinimumHeight(narrow ? m_bench->contentHeight() : 0);
  m_side->setMinimumHeight(narrow ? kSideHeight : 0);
}

QWidget* TankView::spanRow() {
  auto* row = new QWidget;
  auto* layout = new QHBoxLayout(row);
  layout->setContentsMargins(0, 0, 0, 0);
  layout->setSpacing(8);
  const auto add = [&](Strips::Span span, const QString& text, const QString& key) {
    auto* button = new QPushButton(text);
    button->setCheckable(true);
    button->setToolTip(tr("key %1").arg(key));
    button->setAccessibleName(tr("Show a %1 (key %2)").arg(text, key));
    connect(button, &QPushButton::clicked, this, [this, span] { m_strips->setSpan(span); });
    layout->addWidget(button);
    m_spans[span] = button;
  };
  add(Strips::Span::Day, tr("day"), QStringLiteral("d"));
  add(Strips::Span::Week, tr("week"), QStringLiteral("w"));
  add(Strips::Span::Month, tr("month"), QStringLiteral("m"));
  add(Strips::Span::Year, tr("year"), QStringLiteral("y"));
  auto* key = new QLabel(tr("tick at the foot: addition \u00B7 dash-dot line: dump \u00B7 bar at the top: alarm "
                            "\u00B7 hollow: corrected"));
  key->setFont(textFont(kSmallPx));
  key->setForegroundRole(QPalette::PlaceholderText);
  key->setSizePolicy(QSizePolicy::Ignored, QSizePolicy::Preferred);
  key->setToolTip(key->text());
  layout->addWidget(key, 1);
  return row;
}

QWidget* TankView::stripSide() {
  auto* side = new QWidget;
  auto* column = new QVBoxLayout(side);
  column->setContentsMargins(8, 10, 16, 10);
  column->setSpacing(8);
  auto* flow = new FlowLayout(6);
  flow->setContentsMargins(0, 0, 0, 0);
  m_folds->setLayout(flow);
  m_margins->setAccessibleName(tr("Which margin the first strip shows"));
  m_margins->setToolTip(m_margins->accessibleName());
  flow->addWidget(m_margins);
  m_trouble->setWordWrap(true);
  m_trouble->hide();
  auto* scroll = new QScrollArea;
  scroll->setWidget(m_strips);
  scroll->setWidgetResizable(true);
  scroll->setFrameShape(QFrame::NoFrame);
  scroll->setFocusPolicy(Qt::NoFocus);
  scroll->setHorizontalScrollBarPolicy(Qt::ScrollBarAlwaysOff);
  column->addWidget(m_folds);
  column->addWidget(m_trouble);
  column->addWidget(scroll, 1);
  column->addWidget(spanRow());
  return side;
}

void TankView::listenToClient() {
  connect(&m_client, &ApiClient::resultsArrived, this, [this](const std::string& tank, const auto& rows) {
    if (tank != m_id) return;
    m_history.results = rows;
    arrived(kResults);
  });
  connect(&m_client, &ApiClient::readingsArrived, this, [this](const std::string& tank, const auto& rows) {
    if (tank != m_id) return;
    m_history.readings = rows;
    arrived(kReadings);
  });
  connect(&m_client, &ApiClient::eventsArrived, this, [this](const std::string& tank, const auto& rows) {
    if (tank != m_id) return;
    m_history.events = rows;
    arrived(kEvents);
  });
  connect(&m_client, &ApiClient::alarmHistoryArrived, this, [this](const auto& rows) {
    m_history.alarms = rows;
    arrived(kAlarms);
  });
  connect(&m_client, &ApiClient::historyFailed, this, [this](const std::string& tank, const QString& why) {
    if (tank != m_id) return;
    m_trouble->setText(tr("Part of the trend is missing: %1").arg(why));
    m_trouble->show();
    m_pending = 0;
    redraw();
  });
  connect(&m_client, &ApiClient::analysisArrived, this, [this](const AnalysisView& analysis) {
    const io::wire::TankView* tank = m_data.tank(m_id);
    if (analysis.id == m_chosen && tank != nullptr) m_analysis->showAnalysis(analysis, tank->metal, m_data.now());
  });
  connect(&m_client, &ApiClient::analysisFailed, this, [this](qint64 id, const QString& why) {
    if (id == m_chosen) m_analysis->showFailure(why);
  });
  connect(&m_data, &ShopData::linkChanged, this, [this] {
    const bool back = m_data.link() == Link::Live || m_data.link() == Link::Asking;
    if (back && !m_id.empty() && m_since.isValid()) askSince(m_since);  // what was missed meanwhile
  });
}

void TankView::setTank(const std::string& tank) {
  if (tank == m_id) return;
  m_id = tank;
  m_history = {};
  m_fresh = true;
  m_drawn = false;
  m_chosen = 0;
  m_margin.clear();
  m_analysis->hide();
  m_bench->setTank(tank);
  fitPanes();
  if (const io::wire::TankView* view = m_data.tank(tank)) fillMargins(*view);
  askSince(m_data.now().addDays(-kFirstDays));
}

void TankView::askSince(const QDateTime& since) {
  m_since = since;
  m_pending = kAll;
  m_trouble->hide();
  m_client.askHistory(m_id, since);
}

void TankView::arrived(Part part) {
  m_pending &= ~static_cast<unsigned>(part);
  if (m_pending == 0) redraw();
}

void TankView::fillMargins(const io::wire::TankView& tank) {
  m_margins->clear();
  const io::wire::MarginView* nearest = nearestMargin(tank);
  for (const io::wire::MarginView& margin : tank.margins) {
    m_margins->addItem(Words::marginShort(margin.id, margin.ligand), QString::fromStdString(margin.id));
  }
  if (m_margin.empty() && nearest != nullptr) m_margin = nearest->id;
  if (m_margin.empty() && !tank.margins.empty()) m_margin = tank.margins.front().id;
  m_margins->setCurrentIndex(m_margins->findData(QString::fromStdString(m_margin)));
  m_margins->setVisible(m_margins->count() > 0);
}

std::set<std::string> TankView::fillFolds(const StripSet& set) {
  std::set<std::string> folded;
  for (auto& [id, button] : m_foldButtons) button->hide();
  for (const Strip& strip : set.strips) {
    const auto choice = m_foldChoice.find(strip.id);
    const bool away = choice == m_foldChoice.end() ? strip.folded : choice->second;
    if (away) folded.insert(strip.id);
    if (strip.id.starts_with("margin:")) continue;
    QPushButton*& button = m_foldButtons[strip.id];
    if (button == nullptr) {
      button = new QPushButton;
      button->setCheckable(true);
      m_folds->layout()->addWidget(button);
      connect(button, &QPushButton::clicked, this, [this, id = strip.id](bool on) {
        m_foldChoice[id] = !on;
        redraw();
      });
    }
    button->setText(strip.shortTitle);
    button->setAccessibleName(tr("Strip %1").arg(strip.title));
    button->setChecked(!away);
    button->show();
  }
  return folded;
}

void TankView::redraw() {
  const io::wire::TankView* tank = m_data.tank(m_id);
  if (tank == nullptr) return;
  if (m_margins->count() != static_cast<int>(tank->margins.size())) fillMargins(*tank);
  const StripSet set = History(m_format).strips(*tank, m_history, m_margin, m_data.now());
  m_strips->setStrips(set, fillFolds(set), !m_fresh);
  m_fresh = false;
  m_drawn = true;
}

void TankView::refreshAges() {
  m_bench->refresh();
  fitPanes();
  if (m_drawn) m_soon.start();
}

void TankView::rangeShown(double from) {
  if (m_pending != 0 || !m_since.isValid() || from >= axisTime(m_since)) return;
  const auto seconds = static_cast<qint64>(from);
  askSince(QDateTime::fromSecsSinceEpoch(seconds, Qt::UTC).addSecs(-kFirstDays * kSecondsPerDay));
}

void TankView::chooseResult(qint64 id, const std::string& sampledAt) {
  m_chosen = id;
  m_analysis->showWaiting(m_format.clock(instant(sampledAt), m_data.now()));
  m_analysis->show();
  m_client.askAnalysis(m_id, id, sampledAt);
}

void TankView::takeResult(const io::wire::ResultView& result) {
  if (result.tank != m_id) return;
  upsert(m_history.results, result);
  m_soon.start();
}

void TankView::takeReading(const io::wire::ReadingView& reading) {
  if (reading.tank != m_id) return;
  if (reading.supersedes) {
    for (io::wire::ReadingView& known : m_history.readings) {
      if (known.id == *reading.supersedes) known.state = "superseded";
    }
  }
  upsert(m_history.readings, reading);
  m_soon.start();
}

void TankView::takeAlarms() {
  for (const io::wire::AlarmView& alarm : m_data.alarms()) {
    std::erase_if(m_history.alarms, [&](const auto& known) { return known.id == alarm.id; });
    m_history.alarms.push_back(alarm);
  }
  refreshAges();
}

}  // namespace tw::ui
