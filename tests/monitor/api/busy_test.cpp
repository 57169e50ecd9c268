// SPDX-License-Identifier: GPL-3.0-or-later
// What a sender hears while the store is behind; the routes are called without a socket.
#include <gtest/gtest.h>

#include <future>

#include "monitor/api/api.hpp"
#include "tests/monitor/support/temp_shop.hpp"

namespace tw::monitor {
namespace {

TEST(Busy, AnswersWith503WhileTheQueueIsFullAndLosesNothingItTook) {
  test::TempShop shop;
  test::FakeClock clock("2026-03-02T07:00:00Z");
  io::Loop loop;
  const Plant plant = shop.plant();
  const auto zone = *io::TimeZone::named("UTC");
  auto writable = shop.store();
  auto opened = io::openStore(shop.shop().dataDir, io::StoreMode::ReadOnly);
  const auto view = std::move(*opened);
  Board board(plant, clock, *view, {});
  PipelineListener deaf{[](const auto&) {}, [](const auto&) {}, [](const auto&) {}, [](const auto&) {},
                        [](const auto&, const auto&) {}};
  Pipeline pipeline(loop, clock, plant, std::move(writable), deaf);
  const ApiContext context{plant, clock, zone, *view, board, pipeline, loop, {}, {}};
  const Router router = makeRouter(context);

  std::promise<void> release;
  auto released = release.get_future().share();
  ASSERT_TRUE(pipeline.write(
      [released](io::Store&) -> model::Result<model::Done> {
        released.wait();
        return model::Done{};
      },
      [](const auto&) {}));
  int created = 0, answered = 0;
  Response refused;
  int sent = 0;
  while (refused.status != 503 && sent < 5000) {
    Request request;
    request.method = "POST";
    request.path = "/api/v1/tanks/T1/readings";
    request.body = R"({"time":"2026-03-02T06:00:00Z","operator":"mk","values":{"copper":)" +
                   std::to_string(20.0 + 0.001 * sent) + "}}";
    ++sent;
    router.handle(request, [&](const Response& response) {
      if (response.status == 503) {
        refused = response;
      } else {
        ++answered;
        created += response.status == 201 ? 1 : 0;
      }
    });
  }
  EXPECT_EQ(refused.status, 503);
  EXPECT_EQ(refused.headers.at("Retry-After"), "1");
  EXPECT_EQ(answered, 0) << "answered before it was durable";
  release.set_value();
  ASSERT_TRUE(test::waitUntil([&] { return pipeline.writerBacklog() == 0; }));
  loop.post([&] { loop.stop(); });
  loop.run([](const char*) {});
  EXPECT_EQ(created, sent - 1);
  EXPECT_EQ(view->readings("T1", io::Instant{})->size(), static_cast<std::size_t>(sent - 1));
}

}  // namespace
}  // namespace tw::monitor
