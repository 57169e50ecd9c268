// SPDX-License-Identifier: GPL-3.0-or-later
#include <gtest/gtest.h>

#include <QRegularExpression>
#include <QSet>

#include "tests/ui/translation_file.hpp"

namespace tw::test {
namespace {

const QString kGerman = QStringLiteral(TW_SOURCE_DIR "/ui/i18n/tankward_de.ts");

QSet<QString> places(const QString& text) {
  static const QRegularExpression pattern(QStringLiteral("%L?\\d"));
  QSet<QString> found;
  for (auto it = pattern.globalMatch(text); it.hasNext();) found.insert(it.next().captured());
  return found;
}

TEST(German, IsComplete) {
  const auto all = readTranslations(kGerman);
  ASSERT_GT(all.size(), 150);
  for (const Translation& row : all) {
    EXPECT_FALSE(row.unfinished || row.text.trimmed().isEmpty())
        << row.context.toStdString() << ": " << row.source.toStdString();
  }
}

TEST(German, KeepsEveryNumberedPlace) {
  for (const Translation& row : readTranslations(kGerman)) {
    EXPECT_EQ(places(row.source), places(row.text)) << row.source.toStdString() << " / " << row.text.toStdString();
  }
}

// At run time a QObject translates under its whole name; a file made without the include path of the tree
// holds the bare one, and the screen silently stays English.
TEST(German, NamesContextsAsTheProgramAsksForThem) {
  const QSet<QString> plain = {QStringLiteral("Cautions"), QStringLiteral("Entries"), QStringLiteral("Format"),
                               QStringLiteral("History"),  QStringLiteral("Reasons"), QStringLiteral("Words")};
  for (const Translation& row : readTranslations(kGerman)) {
    EXPECT_TRUE(plain.contains(row.context) || row.context.startsWith(QLatin1String("tw::ui::")))
        << row.context.toStdString();
  }
}

}  // namespace
}  // namespace tw::test
