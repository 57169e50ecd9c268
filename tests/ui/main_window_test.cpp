// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/views/main_window.hpp"

#include <gtest/gtest.h>

#include <QAbstractButton>
#include <QApplication>
#include <QComboBox>
#include <QTest>

#include "tests/ui/qt_environment.hpp"
#include "tests/ui/samples.hpp"
#include "ui/theme/style.hpp"

namespace tw::ui {
namespace {

/// The application has to be there before the first member that uses the network.
ThemeName appFirst(ThemeName name) {
  test::needQt();
  return name;
}

/// A window over data that are set by hand; nothing listens at its address.
struct Desk {
  Desk()
      : look(appFirst(ThemeName::Light)), format(QLocale(QLocale::English, QLocale::UnitedKingdom)),
        data([] { return test::noon(); }), client(QUrl(QStringLiteral("http://127.0.0.1:9")), QByteArray()) {
    auto away = test::copperTank("T3", "");
    away.inService = false;
    data.setTanks({test::copperTank("T1", "fine"), test::copperTank("T2", "brink"), away});
    data.setAlarms({test::alarm(5, "T2", "margin", "ligand_loss", "brink")});
    data.setDue({{"T1", "Copper T1", "copper", "Copper metal", "2026-03-02T05:00:00Z", "", true}});
    window = std::make_unique<MainWindow>(look, data, client, format);
    window->resize(1366, 768);
    window->show();
    QApplication::processEvents();
  }
  Look look;
  Format format;
  ShopData data;
  ApiClient client;
  std::unique_ptr<MainWindow> window;
};

template <class Visit>
void eachControl(QWidget* root, Visit visit) {
  const QList<QWidget*> all = root->findChildren<QWidget*>();
  for (QWidget* widget : all) {
    const bool control = qobject_cast<QAbstractButton*>(widget) != nullptr ||
                         qobject_cast<QLineEdit*>(widget) != nullptr || qobject_cast<QComboBox*>(widget) != nullptr ||
                         qobject_cast<Strips*>(widget) != nullptr;
    if (control && widget->isVisible()) visit(widget);
  }
}

class EachView : public ::testing::TestWithParam<const char*> {};

TEST_P(EachView, GivesEveryControlAnAccessibleNameAndRoomForAGlove) {
  Desk desk;
  desk.window->showView(QString::fromLatin1(GetParam()));
  QApplication::processEvents();
  int seen = 0;
  eachControl(desk.window.get(), [&](QWidget* widget) {
    ++seen;
    const std::string what = widget->metaObject()->className() + std::string(" ") + widget->accessibleName().toStdString();
    EXPECT_FALSE(widget->accessibleName().isEmpty()) << what;
    EXPECT_GE(widget->height(), kTarget) << what;
    EXPECT_GE(widget->width(), kTarget) << what;
  });
  EXPECT_GE(seen, 10);
}

TEST_P(EachView, LetsTabReachEveryControl) {
  Desk desk;
  desk.window->showView(QString::fromLatin1(GetParam()));
  QApplication::processEvents();
  QSet<QWidget*> reached;
  for (QWidget* at = desk.window->nextInFocusChain(); at != desk.window.get(); at = at->nextInFocusChain()) {
    if (at->focusPolicy() & Qt::TabFocus) reached.insert(at);
  }
  eachControl(desk.window.get(), [&](QWidget* widget) {
    EXPECT_TRUE(reached.contains(widget)) << widget->accessibleName().toStdString();
  });
}

INSTANTIATE_TEST_SUITE_P(Views, EachView, ::testing::Values("line", "tank"));

TEST(LineView, KeepsTheShopsOrderWhenConditionsChange) {
  Desk desk;
  const auto order = [&] {
    std::vector<std::string> ids;
    for (const TankCard* card : desk.window->lineView()->cards()) ids.push_back(card->tank());
    return ids;
  };
  const auto before = order();
  io::wire::LiveMessage message;
  message.type = "condition";
  message.condition = test::copperTank("T1", "sludging");
  desk.data.applyLive(message);
  EXPECT_EQ(order(), before);
  EXPECT_EQ(before, (std::vector<std::string>{"T1", "T2", "T3"}));
}

TEST(LineView, TabGoesFromLeftToRightAlongTheLine) {
  Desk desk;
  int last = -1;
  for (const TankCard* card : desk.window->lineView()->cards()) {
    const int x = card->picture()->mapTo(desk.window.get(), QPoint(0, 0)).x();
    EXPECT_GT(x, last);
    last = x;
  }
}

TEST(LineView, OpensATankByEnter) {
  Desk desk;
  TankCard* card = desk.window->lineView()->cards()[1];
  card->picture()->setFocus();
  QTest::keyClick(card->picture(), Qt::Key_Return);
  EXPECT_EQ(desk.window->currentView(), QStringLiteral("tank"));
  EXPECT_EQ(desk.window->tankView()->tank(), "T2");
}

TEST(Acknowledging, NeedsANameAndKeepsItWhenTheServiceRefuses) {
  Desk desk;
  desk.window->acknowledge(5);
  AcknowledgeDialog* dialog = desk.window->dialog();
  ASSERT_NE(dialog, nullptr);
  EXPECT_FALSE(dialog->confirmButton()->isEnabled());
  QTest::keyClicks(dialog->operatorField(), QStringLiteral("MK"));
  EXPECT_TRUE(dialog->confirmButton()->isEnabled());
  QTest::mouseClick(dialog->confirmButton(), Qt::LeftButton);
  ASSERT_TRUE(test::waitFor([&] { return dialog->confirmButton()->isEnabled(); }));  // nobody listens there
  EXPECT_EQ(dialog->operatorField()->text(), QStringLiteral("MK"));
  eachControl(dialog, [](QWidget* widget) {
    EXPECT_FALSE(widget->accessibleName().isEmpty());
    EXPECT_GE(widget->height(), kTarget);
  });
}

TEST(LostService, IsSaidInABannerWhileTheTanksStay) {
  Desk desk;
  desk.data.setLink(Link::Lost);
  QApplication::processEvents();
  bool said = false;
  for (const QLabel* label : desk.window->findChildren<QLabel*>()) {
    said = said || (label->isVisible() && label->text().startsWith(QStringLiteral("The service does not answer")));
  }
  EXPECT_TRUE(said);
  EXPECT_EQ(desk.window->lineView()->cards().size(), 3U);
}

TEST(Strips, KeysChooseTheSpan) {
  Desk desk;
  Strips strips(desk.look, desk.format);
  StripSet set;
  set.now = 1.772e9;
  set.horizon_s = 48.0 * 3600.0;
  Strip strip;
  strip.id = "copper";
  strip.points = {{set.now - 7200.0, 22.0}, {set.now - 3600.0, 22.5}};
  set.strips = {strip};
  set.results = {{set.now - 3600.0, 42, "2026-02-25T00:00:00Z"}};
  strips.setStrips(set, {}, false);
  strips.resize(600, 300);
  const double day = 86400.0;
  QTest::keyClick(&strips, Qt::Key_D);
  EXPECT_NEAR(strips.to() - strips.from(), day, 1.0);
  QTest::keyClick(&strips, Qt::Key_M);
  EXPECT_NEAR(strips.to() - strips.from(), 31.0 * day, 1.0);
  EXPECT_GE(strips.to(), set.now);
  qint64 chosen = 0;
  QObject::connect(&strips, &Strips::resultChosen, &strips, [&](qint64 id, const std::string&) { chosen = id; });
  QTest::keyClick(&strips, Qt::Key_Left);
  QTest::keyClick(&strips, Qt::Key_Return);
  EXPECT_EQ(chosen, 42);
}

TEST(Strips, ShowOnlyWhatIsNotFolded) {
  Desk desk;
  Strips strips(desk.look, desk.format);
  StripSet set;
  set.now = 1.772e9;
  Strip one, two;
  one.id = "copper";
  two.id = "ph";
  set.strips = {one, two};
  strips.setStrips(set, {}, false);
  EXPECT_EQ(strips.shown(), (std::vector<std::string>{"copper", "ph"}));
  strips.setStrips(set, {"copper"}, true);
  EXPECT_EQ(strips.shown(), (std::vector<std::string>{"ph"}));
}

}  // namespace
}  // namespace tw::ui
