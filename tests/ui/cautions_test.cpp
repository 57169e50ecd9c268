// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/words/cautions.hpp"

#include <gtest/gtest.h>

#include "io/recipe/cautions.hpp"
#include <QSet>

#include "tests/ui/qt_environment.hpp"
#include "tests/ui/translation_file.hpp"

namespace tw::ui {
namespace {

TEST(Cautions, EndWithWhoDecides) {
  test::needQt();
  const QString text = cautionText({"ammonia", "hot"});
  EXPECT_TRUE(text.startsWith(QStringLiteral("Ammonia: ")));
  EXPECT_TRUE(text.endsWith(QString::fromStdString(io::cautionFooter())));
  EXPECT_EQ(cautionTitles({"ammonia", "hot"}), QStringLiteral("Ammonia, Hot liquor"));
}

TEST(Cautions, AreEmptyWithoutHazards) {
  EXPECT_TRUE(cautionText({}).isEmpty());
  EXPECT_TRUE(cautionText({"no-such-key"}).isEmpty());
}

// The texts of the shared table reach translators through a copy in ui/words/cautions.cpp.
TEST(Cautions, EveryTextOfTheSharedTableIsTranslated) {
  QSet<QString> known;
  for (const auto& row : test::readTranslations(QStringLiteral(TW_SOURCE_DIR "/ui/i18n/tankward_de.ts"))) {
    if (row.context == QLatin1String("Cautions")) known.insert(row.source);
  }
  for (const io::Caution& caution : io::cautions()) {
    EXPECT_TRUE(known.contains(QString::fromStdString(caution.title))) << caution.title;
    EXPECT_TRUE(known.contains(QString::fromStdString(caution.text))) << caution.text;
  }
  EXPECT_TRUE(known.contains(QString::fromStdString(io::cautionFooter())));
}

}  // namespace
}  // namespace tw::ui
