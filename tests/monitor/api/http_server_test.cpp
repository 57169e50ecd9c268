// SPDX-License-Identifier: GPL-3.0-or-later
// The bounds of the server, with limits small enough to reach.
#include "monitor/api/http_server.hpp"

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <atomic>
#include <future>
#include <thread>

#include "tests/monitor/support/client.hpp"
#include "tests/monitor/support/temp_shop.hpp"

namespace tw::monitor {
namespace {

using test::waitUntil;

class Server : public testing::Test {
 protected:
  void start(const ServerLimits& limits) {
    HttpServer::Hooks hooks;
    hooks.answer = [](const Request& request, const Reply& reply) {
      reply({200, request.body + "!", "text/plain", {}});
    };
    hooks.refuseLive = [](const Request&) { return nullptr; };
    hooks.hello = [] { return std::string("hello"); };
    m_server = std::make_unique<HttpServer>(m_loop, std::move(hooks), limits);
    const auto listening = m_server->listen("127.0.0.1:0");
    ASSERT_TRUE(listening) << listening.error().detail;
    m_port = m_server->port();
    m_thread = std::thread([this] { m_loop.run([](const char*) {}); });
  }
  ~Server() override {
    if (!m_thread.joinable()) return;
    onLoop([this] { m_server->stop(); });
    m_loop.stop();
    m_thread.join();
  }
  void onLoop(const std::function<void()>& work) {
    std::promise<void> done;
    m_loop.post([&] {
      work();
      done.set_value();
    });
    done.get_future().wait();
  }
  std::size_t clients() {
    std::size_t count = 0;
    onLoop([&] { count = m_server->liveClients(); });
    return count;
  }

  io::Loop m_loop;
  std::unique_ptr<HttpServer> m_server;
  unsigned m_port = 0;
  std::thread m_thread;
};

TEST_F(Server, DropsAClientThatDoesNotListenAndKeepsTheOneThatDoes) {
  ServerLimits limits;
  limits.queue = 4;
  limits.stall = std::chrono::milliseconds(50);
  start(limits);
  test::LiveClient deaf(m_port), listening(m_port);
  EXPECT_EQ(listening.next(), "hello");
  ASSERT_TRUE(waitUntil([&] { return clients() == 2; }));
  // More than any socket buffer holds.
  const std::string large(4 * 1024 * 1024, 'x');
  constexpr int kMessages = 12;
  for (int i = 0; i < kMessages; ++i) {
    onLoop([&] { m_server->push(large); });
    EXPECT_EQ(listening.next().size(), large.size());
  }
  EXPECT_TRUE(waitUntil([&] { return clients() == 1; }));
}

TEST_F(Server, DropsAClientThatFallsOffTheBacklog) {
  ServerLimits limits;
  limits.backlog = 3;
  start(limits);
  test::LiveClient live(m_port);
  EXPECT_EQ(live.next(), "hello");
  ASSERT_TRUE(waitUntil([&] { return clients() == 1; }));
  const std::string large(8 * 1024 * 1024, 'x');
  onLoop([&] {
    for (int i = 0; i < 10; ++i) m_server->push(large);
  });
  // Reading what is on its way brings it to a message that is no longer there.
  EXPECT_THROW(for (;;) live.next(), std::runtime_error);
}

TEST_F(Server, ClosesConnectionsBeyondItsNumberAndTakesOthersLater) {
  ServerLimits limits;
  limits.connections = 2;
  start(limits);
  auto first = std::make_unique<test::Connection>(m_port);
  test::Connection second(m_port);
  ASSERT_TRUE(waitUntil([&] {
    std::size_t count = 0;
    onLoop([&] { count = m_server->connections(); });
    return count == 2;
  }));
  test::Connection third(m_port);
  EXPECT_TRUE(third.closedByPeer());
  first.reset();
  ASSERT_TRUE(waitUntil([&] {
    try {
      return test::get(m_port, "/").status == 200;
    } catch (const std::runtime_error&) {
      return false;
    }
  }));
}

TEST_F(Server, EndsAConnectionThatSendsNothing) {
  ServerLimits limits;
  limits.requestTime = std::chrono::seconds(1);
  start(limits);
  test::Connection silent(m_port);
  EXPECT_TRUE(silent.closedByPeer());
}

TEST_F(Server, RefusesLargeBodiesAndHeaders) {
  ServerLimits limits;
  limits.bodyBytes = 10;
  limits.headerBytes = 512;
  start(limits);
  EXPECT_EQ(test::post(m_port, "/", "0123456789").body, "0123456789!");
  EXPECT_EQ(test::post(m_port, "/", "0123456789a").status, 413);
  EXPECT_EQ(test::get(m_port, "/", "X-Long: " + std::string(1000, 'a') + "\r\n").status, 431);
}

struct Address {
  const char* listen;
  const char* code;  ///< "" = listens
};
class Addresses : public testing::TestWithParam<Address> {};
TEST_P(Addresses, AreLoopbackOrRefused) {
  io::Loop loop;
  HttpServer server(loop, {});
  const auto listening = server.listen(GetParam().listen);
  EXPECT_EQ(listening ? "" : listening.error().code, GetParam().code);
}
INSTANTIATE_TEST_SUITE_P(Table, Addresses,
                         testing::Values(Address{"127.0.0.1:0", ""}, Address{"localhost:0", ""},
                                         Address{"0.0.0.0:0", "listen_not_loopback"},
                                         Address{"192.0.2.1:80", "listen_not_loopback"},
                                         Address{"nowhere", "listen_unreadable"},
                                         Address{"127.0.0.1:", "listen_unreadable"},
                                         Address{"127.0.0.1:99999", "listen_unreadable"},
                                         Address{"shop.example:80", "listen_unreadable"}));

TEST(Listening, SaysThatAPortIsTaken) {
  io::Loop loop;
  HttpServer first(loop, {}), second(loop, {});
  ASSERT_TRUE(first.listen("127.0.0.1:0"));
  const auto listening = second.listen("127.0.0.1:" + std::to_string(first.port()));
  ASSERT_FALSE(listening);
  EXPECT_EQ(listening.error().code, "listen_failed");
  EXPECT_EQ(listening.error().kind, model::FaultKind::Machine);
}

}  // namespace
}  // namespace tw::monitor
