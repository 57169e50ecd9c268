// SPDX-License-Identifier: GPL-3.0-or-later
#include "tests/ui/qt_environment.hpp"

#include <QApplication>
#include <QElapsedTimer>
#include <QLocale>

#include "ui/theme/style.hpp"

namespace tw::test {

void needQt() {
  static int argc = 1;
  static char name[] = "ui-test";
  static char* argv[] = {name, nullptr};
  static QApplication* application = [] {
    qputenv("QT_QPA_PLATFORM", "offscreen");
    qputenv("TZ", "Europe/Berlin");
    auto* made = new QApplication(argc, argv);  // lives until the process ends
    QLocale::setDefault(QLocale(QLocale::English, QLocale::UnitedKingdom));
    ui::applyTheme(*made, ui::Theme(ui::ThemeName::Light));
    return made;
  }();
  (void)application;
}

bool waitFor(const std::function<bool()>& done, int most_ms) {
  QElapsedTimer timer;
  timer.start();
  while (!done() && timer.elapsed() < most_ms) QCoreApplication::processEvents(QEventLoop::WaitForMoreEvents, 20);
  return done();
}

}  // namespace tw::test
