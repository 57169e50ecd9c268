// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/app/options.hpp"

#include <QCommandLineParser>
#include <QFile>
#include <QRegularExpression>

namespace tw::ui {
namespace {

constexpr int kLeastSide = 320;
constexpr int kMostSide = 8192;

model::Unexpected<model::Fault> usage(const QString& subject, const QString& detail) {
  return model::fail({"usage", subject.toStdString(), detail.toStdString(), "", model::FaultKind::Usage});
}

const QStringList& viewsOfThisVersion() {
  static const QStringList views = {QStringLiteral("line"), QStringLiteral("tank")};
  return views;
}

void declare(QCommandLineParser& parser) {
  using Option = QCommandLineOption;
  const auto text = [](const char* literal) { return QString::fromLatin1(literal); };
  parser.setApplicationDescription(text("Dashboard of Tankward. Data come from a running `tankward serve`."));
  parser.addOptions({
      Option(text("url"), text("Address of the service."), text("URL"), text("http://127.0.0.1:8484")),
      Option(text("token-file"), text("File with the token sent with each request."), text("FILE")),
      Option(text("snapshot"), text("Grab views as PNG files into DIR and exit."), text("DIR")),
      Option(text("size"), text("Size of a snapshot."), text("WxH"), text("1400x900")),
      Option(text("view"), text("View to grab: line or tank; both when absent."), text("NAME")),
      Option(text("tank"), text("Tank to show, by id."), text("ID")),
      Option(text("theme"), text("light or dark."), text("THEME")),
      Option(text("lang"), text("en or de."), text("LANG")),
      Option(text("scale"), text("Scale of everything drawn, 0.5 to 4."), text("N"), text("1")),
      Option({text("h"), text("help")}, text("Show this text.")),
      Option(text("version"), text("Show the version.")),
  });
}

model::Result<QSize> parseSize(const QString& text) {
  static const QRegularExpression pattern(QStringLiteral("^(\\d{1,5})x(\\d{1,5})$"));
  const QRegularExpressionMatch match = pattern.match(text);
  const QSize size(match.captured(1).toInt(), match.captured(2).toInt());
  const bool fits = match.hasMatch() && size.width() >= kLeastSide && size.height() >= kLeastSide &&
                    size.width() <= kMostSide && size.height() <= kMostSide;
  if (!fits) {
    return usage(QStringLiteral("--size"),
                 QStringLiteral("'%1' is no size; expected WIDTHxHEIGHT, each %2 to %3").arg(text).arg(kLeastSide).arg(kMostSide));
  }
  return size;
}

model::Result<QByteArray> readToken(const QString& path) {
  QFile file(path);
  if (!file.open(QIODevice::ReadOnly)) {
    return model::fail({"unreadable", "--token-file", file.errorString().toStdString(), path.toStdString(),
                        model::FaultKind::Input});
  }
  return file.readAll().trimmed();
}

}  // namespace

model::Result<DeskOptions> parseOptions(const QStringList& arguments) {
  QCommandLineParser parser;
  declare(parser);
  if (!parser.parse(QStringList(QStringLiteral("tankward-desk")) + arguments)) {
    return usage({}, parser.errorText());
  }
  DeskOptions options;
  if (parser.isSet(QStringLiteral("help"))) {
    options.help = parser.helpText();
    return options;
  }
  if (parser.isSet(QStringLiteral("version"))) {
    options.help = QStringLiteral("tankward-desk " TW_VERSION "\n");
    return options;
  }
  if (!parser.positionalArguments().isEmpty()) {
    return usage(parser.positionalArguments().front(), QStringLiteral("no such argument"));
  }
  options.url = QUrl(parser.value(QStringLiteral("url")), QUrl::StrictMode);
  if (!options.url.isValid() || options.url.host().isEmpty() ||
      (options.url.scheme() != QLatin1String("http") && options.url.scheme() != QLatin1String("https"))) {
    return usage(QStringLiteral("--url"), QStringLiteral("'%1' is no http or https address")
                                              .arg(parser.value(QStringLiteral("url"))));
  }
  if (options.url.path() == QLatin1String("/")) options.url.setPath({});
  if (parser.isSet(QStringLiteral("token-file"))) {
    auto token = readToken(parser.value(QStringLiteral("token-file")));
    if (!token) return model::fail(std::move(token.error()));
    options.token = *token;
  }
  auto size = parseSize(parser.value(QStringLiteral("size")));
  if (!size) return model::fail(std::move(size.error()));
  options.size = *size;
  options.snapshotDir = parser.value(QStringLiteral("snapshot"));
  if (parser.isSet(QStringLiteral("snapshot")) && options.snapshotDir.isEmpty()) {
    return usage(QStringLiteral("--snapshot"), QStringLiteral("names no folder"));
  }
  options.views = viewsOfThisVersion();
  if (parser.isSet(QStringLiteral("view"))) {
    const QString view = parser.value(QStringLiteral("view"));
    if (!viewsOfThisVersion().contains(view)) {
      return usage(QStringLiteral("--view"), QStringLiteral("'%1' is not a view of this version; expected %2")
                                                 .arg(view, viewsOfThisVersion().join(QStringLiteral(" or "))));
    }
    options.views = QStringList(view);
  }
  options.tank = parser.value(QStringLiteral("tank"));
  if (parser.isSet(QStringLiteral("theme"))) {
    options.theme = themeFromId(parser.value(QStringLiteral("theme")));
    if (!options.theme) {
      return usage(QStringLiteral("--theme"), QStringLiteral("'%1' is no theme; expected light or dark")
                                                  .arg(parser.value(QStringLiteral("theme"))));
    }
  }
  options.language = parser.value(QStringLiteral("lang"));
  if (parser.isSet(QStringLiteral("lang")) && options.language != QLatin1String("en") &&
      options.language != QLatin1String("de")) {
    return usage(QStringLiteral("--lang"), QStringLiteral("'%1' is not shipped; expected en or de").arg(options.language));
  }
  bool isNumber = false;
  options.scale = parser.value(QStringLiteral("scale")).toDouble(&isNumber);
  if (!isNumber || options.scale < 0.5 || options.scale > 4.0) {
    return usage(QStringLiteral("--scale"), QStringLiteral("'%1' is no scale; expected a number from 0.5 to 4")
                                                .arg(parser.value(QStringLiteral("scale"))));
  }
  return options;
}

}  // namespace tw::ui
