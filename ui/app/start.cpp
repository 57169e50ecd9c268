// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/app/start.hpp"

#include <QApplication>
#include <QLibraryInfo>
#include <QTranslator>
#include <cstdio>

#include "ui/app/snapshot.hpp"
#include "ui/client/api_client.hpp"
#include "ui/theme/style.hpp"
#include "ui/views/main_window.hpp"

namespace tw::ui {
namespace {

constexpr int kUsage = 2;

void complain(const std::string& message) { std::fprintf(stderr, "tankward: %s\n", message.c_str()); }

std::string textOf(const model::Fault& fault) {
  std::string text;
  for (const std::string& part : {fault.where, fault.subject}) {
    if (!part.empty()) text += part + ": ";
  }
  return text + fault.detail;
}

QLocale localeOf(const DeskOptions& options) {
  if (options.language == QLatin1String("de")) return QLocale(QLocale::German, QLocale::Germany);
  if (options.language == QLatin1String("en") || !options.snapshotDir.isEmpty()) {
    return QLocale(QLocale::English, QLocale::UnitedKingdom);
  }
  return QLocale::system();
}

void prepareEnvironment(const DeskOptions& options, const Display& display) {
  if (display.offscreen) qputenv("QT_QPA_PLATFORM", "offscreen");
  if (options.scale != 1.0) qputenv("QT_SCALE_FACTOR", QByteArray::number(options.scale));
}

void installTranslation(QApplication& application, QTranslator& own, QTranslator& qt, const QLocale& locale) {
  if (own.load(locale, QStringLiteral("tankward"), QStringLiteral("_"), QStringLiteral(":/i18n"))) {
    QCoreApplication::installTranslator(&own);
  }
  if (qt.load(locale, QStringLiteral("qtbase"), QStringLiteral("_"),
              QLibraryInfo::path(QLibraryInfo::TranslationsPath))) {
    application.installTranslator(&qt);
  }
}

int runSnapshot(QApplication& application, const DeskOptions& options, MainWindow& window, const ShopData& data) {
  window.setAttribute(Qt::WA_DontShowOnScreen);
  window.resize(options.size);
  window.show();
  Snapshot snapshot(options, window, data);
  QObject::connect(&snapshot, &Snapshot::finished, &application, [](int status, const QString& message) {
    if (!message.isEmpty()) complain(message.toStdString());
    QCoreApplication::exit(status);
  });
  snapshot.start();
  return QApplication::exec();
}

}  // namespace

Display chooseDisplay(bool snapshot, bool hasScreen, bool platformChosen) {
  if (platformChosen) return {};
  if (snapshot) return {true, {}};  // nothing flashes up on a screen that is in use
  if (hasScreen) return {};
  return {false, "no display: DISPLAY and WAYLAND_DISPLAY are not set; use --snapshot DIR without a screen"};
}

int runDesk(int argc, char** argv, const ShopData::Clock& clock) {
  QStringList arguments;
  for (int i = 1; i < argc; ++i) arguments << QString::fromLocal8Bit(argv[i]);
  auto options = parseOptions(arguments);
  if (!options) {
    complain(textOf(options.error()));
    return static_cast<int>(options.error().kind);
  }
  if (!options->help.isEmpty()) {
    std::fputs(options->help.toLocal8Bit().constData(), stdout);
    return 0;
  }
  const bool hasScreen = qEnvironmentVariableIsSet("DISPLAY") || qEnvironmentVariableIsSet("WAYLAND_DISPLAY");
  const Display display = chooseDisplay(!options->snapshotDir.isEmpty(), hasScreen,
                                        qEnvironmentVariableIsSet("QT_QPA_PLATFORM"));
  if (!display.refusal.empty()) {
    complain(display.refusal);
    return kUsage;
  }
  prepareEnvironment(*options, display);

  QApplication application(argc, argv);
  QApplication::setApplicationName(QStringLiteral("tankward-desk"));
  const QLocale locale = localeOf(*options);
  QLocale::setDefault(locale);
  QTranslator own, qt;
  installTranslation(application, own, qt, locale);

  Look look(options->theme.value_or(ThemeName::Light));
  applyTheme(application, look.theme());
  const Format format(locale);
  ShopData data(clock);
  ApiClient client(options->url, options->token);
  ApiClient::feed(client, data);
  MainWindow window(look, data, client, format);
  QObject::connect(&window, &MainWindow::themeChanged, &application,
                   [&application, &look] { applyTheme(application, look.theme()); });
  client.start();
  if (!options->snapshotDir.isEmpty()) return runSnapshot(application, *options, window, data);
  if (!options->tank.isEmpty()) {
    const std::string wanted = options->tank.toStdString();
    QObject::connect(&data, &ShopData::tanksChanged, &window, [&window, wanted] { window.openTank(wanted); },
                     Qt::SingleShotConnection);
  }
  window.resize(options->size);
  window.showMaximized();
  return QApplication::exec();
}

}  // namespace tw::ui
