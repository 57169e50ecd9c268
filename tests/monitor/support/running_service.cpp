// SPDX-License-Identifier: GPL-3.0-or-later
#include "tests/monitor/support/running_service.hpp"

#include <cstdio>
#include <future>
#include <stdexcept>

namespace tw::test {

RunningService::RunningService(const TempShop& shop, FakeClock& clock)
    : m_service(std::make_unique<monitor::Service>(m_loop, clock, shop.shop(), shop.recipes())) {
  const auto started = m_service->start();
  if (!started) throw std::runtime_error(started.error().code + ": " + started.error().detail);
  m_port = m_service->port();
  m_thread = std::thread([this] {
    m_loop.run([](const char* what) { std::fprintf(stderr, "handler failed: %s\n", what); });
  });
}

RunningService::~RunningService() { stop(); }

void RunningService::stop() {
  if (!m_thread.joinable()) return;
  m_loop.post([this] { m_service->stop(); });
  m_thread.join();
  m_service.reset();
}

void RunningService::onLoop(const std::function<void(monitor::Service&)>& work) {
  std::promise<void> done;
  m_loop.post([&] {
    work(*m_service);
    done.set_value();
  });
  done.get_future().wait();
}

void RunningService::tick() {
  onLoop([](monitor::Service& service) { service.tick(); });
}

bool RunningService::settle() {
  return waitUntil([this] {
    bool idle = false;
    onLoop([&](monitor::Service& service) { idle = service.idle(); });
    return idle;
  });
}

}  // namespace tw::test
