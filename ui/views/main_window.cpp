// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/views/main_window.hpp"

#include <QShortcut>
#include <QVBoxLayout>
#include <algorithm>

#include "ui/theme/style.hpp"

namespace tw::ui {
namespace {

constexpr int kAgesEvery_ms = 20'000;

}  // namespace

MainWindow::MainWindow(Look& look, ShopData& shopData, ApiClient& client, const Format& format, QWidget* parent)
    : QWidget(parent), m_look(look), m_data(shopData), m_client(client), m_format(format),
      m_top(new TopBar(look, shopData, format)), m_banner(new QLabel), m_views(new QStackedWidget),
      m_line(new LineView(look, shopData, format)), m_tank(new TankView(look, shopData, client, format)) {
  setWindowTitle(tr("Tankward"));
  setMinimumSize(600, 360);
  m_banner->setFont(textFont(kTextPx, true));
  m_banner->setContentsMargins(16, 10, 16, 10);
  m_banner->setWordWrap(true);
  m_banner->setAutoFillBackground(true);
  m_banner->hide();
  m_views->addWidget(m_line);
  m_views->addWidget(m_tank);
  auto* all = new QVBoxLayout(this);
  all->setContentsMargins(0, 0, 0, 0);
  all->setSpacing(0);
  all->addWidget(m_top);
  all->addWidget(m_banner);
  all->addWidget(m_views, 1);

  connect(m_top, &TopBar::viewWanted, this, &MainWindow::showView);
  connect(m_top, &TopBar::themeSwitched, this, &MainWindow::switchTheme);
  connect(m_line, &LineView::tankOpened, this, &MainWindow::openTank);
  connect(m_line, &LineView::acknowledgeWanted, this, &MainWindow::acknowledge);
  connect(m_tank, &TankView::acknowledgeWanted, this, &MainWindow::acknowledge);
  connect(m_tank, &TankView::stepWanted, this, &MainWindow::stepTank);
  connect(&shopData, &ShopData::linkChanged, this, &MainWindow::refreshLink);
  connect(&client, &ApiClient::acknowledged, this, [this](const io::wire::AlarmView& alarm) {
    if (m_dialog && m_dialog->alarm() == alarm.id) m_dialog->accept();
  });
  connect(&client, &ApiClient::acknowledgeFailed, this, [this](qint64 alarm, const QString& why) {
    if (m_dialog && m_dialog->alarm() == alarm) m_dialog->showFailure(why);
  });
  connect(&m_ages, &QTimer::timeout, m_line, &LineView::refreshAges);
  connect(&m_ages, &QTimer::timeout, m_tank, &TankView::refreshAges);
  connect(&m_ages, &QTimer::timeout, this, &MainWindow::refreshLink);
  m_ages.start(kAgesEvery_ms);
  addShortcuts();
  showView(QStringLiteral("line"));
  refreshLink();
}

void MainWindow::addShortcuts() {
  const auto on = [this](const QKeySequence& keys, auto&& act) {
    connect(new QShortcut(keys, this), &QShortcut::activated, this, act);
  };
  on(Qt::ALT | Qt::Key_1, [this] { showView(QStringLiteral("line")); });
  on(Qt::ALT | Qt::Key_2, [this] { showView(QStringLiteral("tank")); });
  on(Qt::Key_Escape, [this] { showView(QStringLiteral("line")); });
  on(Qt::CTRL | Qt::Key_PageDown, [this] { stepTank(1); });
  on(Qt::CTRL | Qt::Key_PageUp, [this] { stepTank(-1); });
  on(Qt::CTRL | Qt::Key_T, [this] { switchTheme(); });
}

QString MainWindow::currentView() const {
  return m_views->currentWidget() == m_tank ? QStringLiteral("tank") : QStringLiteral("line");
}

std::string MainWindow::firstTank() const {
  const auto needed = Entries(m_data, m_format).needSomebody();
  if (!needed.empty()) return needed.front().tank;
  return m_data.tanks().empty() ? std::string{} : m_data.tanks().front().id;
}

void MainWindow::showView(const QString& view) {
  if (view == QLatin1String("tank")) {
    if (m_tank->tank().empty() && !m_data.tanks().empty()) m_tank->setTank(firstTank());
    m_views->setCurrentWidget(m_tank);
  } else {
    m_views->setCurrentWidget(m_line);
  }
  m_top->setCurrentView(currentView());
}

void MainWindow::openTank(const std::string& tank) {
  if (m_data.tank(tank) == nullptr) return;
  m_tank->setTank(tank);
  showView(QStringLiteral("tank"));
}

void MainWindow::stepTank(int by) {
  const auto& tanks = m_data.tanks();
  if (tanks.empty() || currentView() != QLatin1String("tank")) return;
  const auto here = std::find_if(tanks.begin(), tanks.end(), [&](const auto& t) { return t.id == m_tank->tank(); });
  const auto count = static_cast<std::ptrdiff_t>(tanks.size());
  const std::ptrdiff_t at = here == tanks.end() ? 0 : std::distance(tanks.begin(), here);
  openTank(tanks[static_cast<std::size_t>((at + by + count) % count)].id);
}

bool MainWindow::ready() const {
  return currentView() == QLatin1String("tank") ? m_tank->ready() : m_data.complete();
}

void MainWindow::acknowledge(qint64 alarm) {
  const auto& alarms = m_data.alarms();
  const auto found = std::find_if(alarms.begin(), alarms.end(), [&](const auto& a) { return a.id == alarm; });
  if (found == alarms.end() || m_dialog) return;
  m_dialog = new AcknowledgeDialog(*found, m_data.tank(found->tank), m_format, m_data.now(),
                                   m_top->operatorName(), this);
  m_dialog->setAttribute(Qt::WA_DeleteOnClose);
  connect(m_dialog, &AcknowledgeDialog::confirmed, this,
          [this](qint64 id, const QString& op, const QString& comment) {
            m_top->setOperatorName(op);
            m_client.acknowledge(id, op.toStdString(), comment.toStdString());
          });
  m_dialog->open();
}

void MainWindow::switchTheme() {
  m_look.setTheme(m_look.theme().name() == ThemeName::Light ? ThemeName::Dark : ThemeName::Light);
  Q_EMIT themeChanged();
  m_top->refresh();
  refreshLink();
}

void MainWindow::refreshLink() {
  QPalette palette = m_banner->palette();
  palette.setColor(QPalette::Window, m_look.theme().color(Role::LostFill));
  palette.setColor(QPalette::WindowText, m_look.theme().color(Role::LostInk));
  m_banner->setPalette(palette);
  const bool away = m_data.link() == Link::Lost;
  if (away) {
    m_banner->setText(m_data.lastHeard().isValid()
                          ? tr("The service does not answer. You see what was known at %1. Trying again\u2026")
                                .arg(m_format.clock(m_data.lastHeard(), m_data.now()))
                          : tr("The service does not answer. Trying again\u2026"));
  }
  m_banner->setVisible(away);
}

}  // namespace tw::ui
