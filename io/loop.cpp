// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/loop.hpp"

#include <boost/asio/post.hpp>
#include <boost/asio/steady_timer.hpp>
#include <csignal>
#include <exception>

#include "io/loop_asio.hpp"

namespace tw::io {

namespace asio = boost::asio;
using boost::system::error_code;

Loop::Loop() : m_impl(std::make_unique<Impl>()) {}
Loop::~Loop() = default;

void Loop::post(std::function<void()> work) { asio::post(m_impl->context, std::move(work)); }

void Loop::after(std::chrono::milliseconds delay, std::function<void()> work) {
  auto timer = std::make_shared<asio::steady_timer>(m_impl->context, delay);
  timer->async_wait([timer, work = std::move(work)](const error_code& error) {
    if (!error) work();
  });
}

void Loop::onStopSignal(std::function<void()> onStop) {
  m_impl->signals.add(SIGTERM);
  m_impl->signals.add(SIGINT);
  m_impl->signals.async_wait(
      [this, onStop = std::move(onStop)](const error_code& error, int /*number*/) {
        if (error) return;
        // A second signal ends the program at once, should an orderly stop hang.
        error_code ignored;
        m_impl->signals.clear(ignored);
        onStop();
      });
}

void Loop::run(const std::function<void(const char* what)>& onError) {
  asio::io_context& context = m_impl->context;
  while (!context.stopped()) {
    try {
      context.run();
    } catch (const std::exception& error) {
      onError(error.what());
    } catch (...) {
      onError("an exception that is no std::exception");
    }
  }
  // So that run() may be called again after a stop().
  context.restart();
}

void Loop::stop() { m_impl->context.stop(); }

}  // namespace tw::io
