// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/client/api_client.hpp"

#include <gtest/gtest.h>

#include <QElapsedTimer>

#include "tests/ui/qt_environment.hpp"
#include "tests/ui/samples.hpp"
#include "tests/ui/service_double.hpp"

namespace tw::ui {
namespace {

using test::waitFor;

struct Desk {
  explicit Desk(const QUrl& url, const QByteArray& token = {}) : data([] { return test::noon(); }), client(url, token) {
    ApiClient::feed(client, data);
  }
  ShopData data;
  ApiClient client;
};

TEST(ApiClient, FetchesTheShopAndSaysItIsConnected) {
  test::needQt();
  test::ServiceDouble service;
  service.putShop();
  Desk desk(service.url(), "secret");
  desk.client.start();
  ASSERT_TRUE(waitFor([&] { return desk.data.complete(); }));
  EXPECT_EQ(desk.data.shop().title, "Test hall");
  EXPECT_EQ(desk.data.tanks().size(), 2U);
  EXPECT_EQ(desk.data.due().size(), 1U);
  EXPECT_EQ(desk.data.link(), Link::Asking);  // the double has no push channel
  for (const QByteArray& head : service.heads) EXPECT_TRUE(head.contains("Authorization: Bearer secret")) << head.toStdString();
}

TEST(ApiClient, ShowsALostServiceWithinTwoSecondsKeepsTheDataAndComesBack) {
  test::needQt();
  test::ServiceDouble service;
  service.putShop();
  Desk desk(service.url());
  desk.client.start();
  ASSERT_TRUE(waitFor([&] { return desk.data.complete(); }));
  service.goAway();
  QElapsedTimer timer;
  timer.start();
  ASSERT_TRUE(waitFor([&] { return desk.data.link() == Link::Lost; }));
  EXPECT_LE(timer.elapsed(), 2000);
  EXPECT_EQ(desk.data.tanks().size(), 2U);
  service.comeBack();
  EXPECT_TRUE(waitFor([&] { return desk.data.link() == Link::Asking; }, 8000));
}

TEST(ApiClient, ShowsASilentServiceWithinTwoSeconds) {
  test::needQt();
  test::ServiceDouble service;
  service.putShop();
  Desk desk(service.url());
  desk.client.start();
  ASSERT_TRUE(waitFor([&] { return desk.data.complete(); }));
  service.fallSilent(true);
  QElapsedTimer timer;
  timer.start();
  ASSERT_TRUE(waitFor([&] { return desk.data.link() == Link::Lost; }));
  EXPECT_LE(timer.elapsed(), 2300);  // 2 s and one turn of a busy machine
}

TEST(ApiClient, SaysThatNobodyAnswersFromTheStart) {
  test::needQt();
  test::ServiceDouble service;
  service.goAway();
  Desk desk(service.url());
  desk.client.start();
  EXPECT_TRUE(waitFor([&] { return desk.data.link() == Link::Lost; }, 2300));
  EXPECT_FALSE(desk.data.lastHeard().isValid());
}

TEST(ApiClient, SendsAnAcknowledgementOnceWithTheName) {
  test::needQt();
  test::ServiceDouble service;
  service.putShop();
  Desk desk(service.url());
  desk.client.start();
  ASSERT_TRUE(waitFor([&] { return desk.data.complete(); }));
  service.put("/api/v1/alarms/5/acknowledge",
              R"({"id":5,"tank":"T2","kind":"margin","subject":"ligand_loss","word":"brink","priority":"high",)"
              R"("state":"acknowledged","raised_at":"2026-03-02T09:00:00Z","cleared_at":"","acknowledged_at":)"
              R"("2026-03-02T12:00:00Z","acknowledged_by":"MK","comment":"","value":null,"limit":null,"unit":"",)"
              R"("to_do":""})");
  desk.client.acknowledge(5, "MK", "");
  ASSERT_TRUE(waitFor([&] { return !desk.data.alarms().empty() && desk.data.alarms()[0].state == "acknowledged"; }));
  ASSERT_EQ(service.bodies.size(), 1);
  EXPECT_TRUE(service.bodies[0].contains(R"("operator":"MK")")) << service.bodies[0].toStdString();
}

TEST(ApiClient, PassesOnWhyAnAcknowledgementWasRefused) {
  test::needQt();
  test::ServiceDouble service;
  service.putShop();
  service.put("/api/v1/alarms/5/acknowledge", R"({"title":"Refused","detail":"the name is missing","status":422})", 422);
  Desk desk(service.url());
  QString why;
  QObject::connect(&desk.client, &ApiClient::acknowledgeFailed, &desk.client,
                   [&why](qint64, const QString& said) { why = said; });
  desk.client.acknowledge(5, "", "");
  ASSERT_TRUE(waitFor([&] { return !why.isEmpty(); }));
  EXPECT_EQ(why, QStringLiteral("the name is missing"));
}

TEST(ApiClient, AnUnreadableAnswerIsNamedAndChangesNothing) {
  test::needQt();
  test::ServiceDouble service;
  service.putShop();
  service.put("/api/v1/tanks", "[{\"id\": 3");
  Desk desk(service.url());
  QString what;
  QObject::connect(&desk.client, &ApiClient::badAnswer, &desk.client, [&what](const QString& said) { what = said; });
  desk.client.start();
  EXPECT_TRUE(waitFor([&] { return !what.isEmpty(); }));
  EXPECT_TRUE(desk.data.tanks().empty());
}

}  // namespace
}  // namespace tw::ui
