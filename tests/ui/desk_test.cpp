// SPDX-License-Identifier: GPL-3.0-or-later
// The program itself: exit statuses and pictures.
#include <gtest/gtest.h>

#include <QFile>
#include <QImage>
#include <QProcess>
#include <QTemporaryDir>

#include "tests/ui/qt_environment.hpp"
#include "tests/ui/service_double.hpp"

namespace tw::test {
namespace {

struct Ran {
  int status = -1;
  QString errors;
};

/// Runs the desk without a screen, serving the double meanwhile.
Ran run(const QStringList& arguments) {
  QProcess process;
  QProcessEnvironment environment = QProcessEnvironment::systemEnvironment();
  for (const char* name : {"DISPLAY", "WAYLAND_DISPLAY", "QT_QPA_PLATFORM", "QT_SCALE_FACTOR"}) {
    environment.remove(QString::fromLatin1(name));
  }
  process.setProcessEnvironment(environment);
  process.start(QStringLiteral(TW_DESK), arguments);
  EXPECT_TRUE(waitFor([&] { return process.state() == QProcess::NotRunning; }, 30'000));
  return {process.exitCode(), QString::fromLocal8Bit(process.readAllStandardError())};
}

TEST(Desk, GrabsBothViewsAtTheAskedSize) {
  needQt();
  ServiceDouble service;
  service.putShop();
  QTemporaryDir folder;
  const Ran ran = run({QStringLiteral("--url"), service.url().toString(), QStringLiteral("--snapshot"), folder.path(),
                       QStringLiteral("--size"), QStringLiteral("1366x768"), QStringLiteral("--theme"),
                       QStringLiteral("dark"), QStringLiteral("--lang"), QStringLiteral("de")});
  EXPECT_EQ(ran.status, 0) << ran.errors.toStdString();
  for (const char* name : {"line-dark-de.png", "tank-dark-de.png"}) {
    const QImage image(folder.filePath(QString::fromLatin1(name)));
    EXPECT_EQ(image.size(), QSize(1366, 768)) << name;
  }
}

TEST(Desk, SaysThatTheServiceIsNotThereAndExitsWithThree) {
  needQt();
  ServiceDouble service;
  service.goAway();
  QTemporaryDir folder;
  const Ran ran = run({QStringLiteral("--url"), service.url().toString(), QStringLiteral("--snapshot"), folder.path()});
  EXPECT_EQ(ran.status, 3);
  EXPECT_TRUE(ran.errors.contains(QStringLiteral("does not answer"))) << ran.errors.toStdString();
}

TEST(Desk, RefusesAViewThatItDoesNotHave) {
  needQt();
  const Ran ran = run({QStringLiteral("--snapshot"), QStringLiteral("out"), QStringLiteral("--view"), QStringLiteral("map")});
  EXPECT_EQ(ran.status, 2);
  EXPECT_TRUE(ran.errors.contains(QStringLiteral("--view"))) << ran.errors.toStdString();
}

TEST(Desk, SaysThatThereIsNoDisplay) {
  needQt();
  const Ran ran = run({});
  EXPECT_EQ(ran.status, 2);
  EXPECT_TRUE(ran.errors.contains(QStringLiteral("no display"))) << ran.errors.toStdString();
}

TEST(Desk, NamesATankThatTheShopDoesNotHave) {
  needQt();
  ServiceDouble service;
  service.putShop();
  QTemporaryDir folder;
  const Ran ran = run({QStringLiteral("--url"), service.url().toString(), QStringLiteral("--snapshot"), folder.path(),
                       QStringLiteral("--view"), QStringLiteral("tank"), QStringLiteral("--tank"), QStringLiteral("T99")});
  EXPECT_EQ(ran.status, 1);
  EXPECT_TRUE(ran.errors.contains(QStringLiteral("T99"))) << ran.errors.toStdString();
}

}  // namespace
}  // namespace tw::test
