// SPDX-License-Identifier: GPL-3.0-or-later
// A .ts file as a map, read without Qt's tools.
#pragma once

#include <QFile>
#include <QHash>
#include <QString>
#include <QXmlStreamReader>

namespace tw::test {

struct Translation {
  QString context, source, text;
  bool unfinished = false;
};

inline QList<Translation> readTranslations(const QString& path) {
  QList<Translation> all;
  QFile file(path);
  if (!file.open(QIODevice::ReadOnly)) return all;
  QXmlStreamReader xml(&file);
  QString context;
  while (!xml.atEnd()) {
    if (xml.readNext() != QXmlStreamReader::StartElement) continue;
    if (xml.name() == QLatin1String("name")) context = xml.readElementText();
    if (xml.name() == QLatin1String("source")) all.append({context, xml.readElementText(), {}, false});
    if (xml.name() == QLatin1String("translation") && !all.isEmpty()) {
      all.last().unfinished = xml.attributes().value(QLatin1String("type")) == QLatin1String("unfinished");
      all.last().text = xml.readElementText();
    }
  }
  return all;
}

}  // namespace tw::test
