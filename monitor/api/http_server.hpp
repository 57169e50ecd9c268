// SPDX-License-Identifier: GPL-3.0-or-later
// HTTP and WebSocket on a loopback address. Everything here runs on the loop's thread.
//
// Bounds: size of headers and bodies, number of connections (more are closed at once), time for a request
// to come and an answer to go. A WebSocket client may lag behind; one that is more than `queue` messages
// behind and makes no progress for `stall` is dropped, and so is one that falls off the end of `backlog`.
#pragma once

#include <chrono>
#include <cstddef>
#include <functional>
#include <memory>
#include <string>

#include "io/loop.hpp"
#include "monitor/api/message.hpp"

namespace tw::monitor {

struct ServerLimits {
  std::size_t headerBytes = 8 * 1024;
  std::size_t bodyBytes = 1024 * 1024;
  std::size_t connections = 256;           ///< HTTP and WebSocket together
  std::chrono::seconds requestTime{30};    ///< to send a request, and to take an answer
  std::size_t queue = 256;                 ///< messages a WebSocket client may lag without progress
  std::chrono::milliseconds stall{5000};
  std::size_t backlog = 16384;             ///< messages kept for the slowest client
};

class HttpServer {
 public:
  struct Hooks {
    std::function<void(const Request&, Reply)> answer;
    /// Whether a WebSocket may be opened: an answer refuses it.
    std::function<std::unique_ptr<Response>(const Request&)> refuseLive;
    std::function<std::string()> hello;  ///< first message of every WebSocket
  };
  HttpServer(io::Loop& loop, Hooks hooks, ServerLimits limits = {});
  ~HttpServer();

  /// "127.0.0.1:8484", "[::1]:8484", "localhost:8484"; port 0 picks a free one. Faults
  /// `listen_unreadable`, `listen_not_loopback` (Input), `listen_failed` (Machine).
  model::Result<model::Done> listen(const std::string& address);
  [[nodiscard]] unsigned port() const;
  /// Sends a text to every WebSocket client.
  void push(std::string text);
  [[nodiscard]] std::size_t liveClients() const;
  [[nodiscard]] std::size_t connections() const;
  /// Takes no more connections; those that are open end, requests at hand after their answer.
  void stop();

  struct Impl;

 private:
  std::shared_ptr<Impl> m_impl;
};

}  // namespace tw::monitor
