// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/app/snapshot.hpp"

#include <QDir>
#include <QPixmap>

#include "ui/views/main_window.hpp"

namespace tw::ui {
namespace {

constexpr int kTick_ms = 50;
constexpr int kMost_ms = 15'000;
constexpr int kSettleTicks = 6;
/// A service that never answered is given up after this.
constexpr int kUnreachable_ms = 4'000;
constexpr int kInputIsWrong = 1;
constexpr int kMachineFailed = 3;

}  // namespace

Snapshot::Snapshot(const DeskOptions& options, MainWindow& window, const ShopData& data, QObject* parent)
    : QObject(parent), m_options(options), m_window(window), m_data(data), m_left(options.views) {
  m_ticks.setInterval(kTick_ms);
  connect(&m_ticks, &QTimer::timeout, this, &Snapshot::step);
}

void Snapshot::start() { m_ticks.start(); }

void Snapshot::step() {
  m_waited_ms += kTick_ms;
  if (!m_data.complete()) {
    const bool never = !m_data.lastHeard().isValid();
    if (m_waited_ms > (never ? kUnreachable_ms : kMost_ms)) {
      end(kMachineFailed, QStringLiteral("%1: the service does not answer").arg(m_options.url.toString()));
    }
    return;
  }
  if (!m_shown) {
    showNext();
    return;
  }
  if (m_window.ready()) {
    if (++m_settled >= kSettleTicks) grab();  // queued layouts and plots are drawn meanwhile
    return;
  }
  if (m_waited_ms > kMost_ms) {
    end(kMachineFailed, QStringLiteral("%1: view %2 was not ready within 15 s")
                            .arg(m_options.url.toString(), m_left.front()));
  }
}

void Snapshot::showNext() {
  const QString view = m_left.front();
  if (!m_options.tank.isEmpty() && m_data.tank(m_options.tank.toStdString()) == nullptr) {
    end(kInputIsWrong, QStringLiteral("--tank: '%1' is no tank of this shop").arg(m_options.tank));
    return;
  }
  if (view == QLatin1String("tank") && m_data.tanks().empty()) {
    end(kInputIsWrong, QStringLiteral("--view tank: this shop has no tank"));
    return;
  }
  if (view == QLatin1String("tank") && !m_options.tank.isEmpty()) {
    m_window.openTank(m_options.tank.toStdString());
  } else {
    m_window.showView(view);
  }
  m_window.setFocus();  // no control is drawn as focused
  m_shown = true;
  m_settled = 0;
  m_waited_ms = 0;
}

void Snapshot::grab() {
  const ThemeName theme = m_options.theme.value_or(ThemeName::Light);
  const QString language = m_options.language.isEmpty() ? QStringLiteral("en") : m_options.language;
  const QDir folder(m_options.snapshotDir);
  const QString path = folder.filePath(
      QStringLiteral("%1-%2-%3.png").arg(m_left.front(), themeId(theme), language));
  if (!QDir().mkpath(m_options.snapshotDir) || !m_window.grab().save(path, "PNG")) {
    end(kMachineFailed, QStringLiteral("%1: cannot be written").arg(path));
    return;
  }
  m_left.removeFirst();
  m_shown = false;
  m_waited_ms = 0;
  if (m_left.isEmpty()) end(0, {});
}

void Snapshot::end(int status, const QString& message) {
  m_ticks.stop();
  Q_EMIT finished(status, message);
}

}  // namespace tw::ui
