// SPDX-License-Identifier: GPL-3.0-or-later
// A small HTTP and WebSocket client over plain sockets: the tests speak to the service as a stranger does,
// with none of its own code.
#pragma once

#include <optional>
#include <string>

#include <nlohmann/json_fwd.hpp>

namespace tw::test {

struct Answer {
  int status = 0;
  std::string headers, body;
  [[nodiscard]] nlohmann::json json() const;
};

/// A blocking connection with a deadline of a minute on every step.
class Connection {
 public:
  explicit Connection(unsigned port);
  ~Connection();
  Connection(const Connection&) = delete;
  Connection& operator=(const Connection&) = delete;
  void send(const std::string& bytes) const;
  /// Up to and with `end`; what was read is kept. Throws at the end of the stream or the deadline.
  std::string readUntil(const std::string& end);
  std::string readBytes(std::size_t count);
  /// True when the other side has closed (waits for it).
  bool closedByPeer();

 private:
  bool fill();
  int m_fd = -1;
  std::string m_buffer;
};

Answer get(unsigned port, const std::string& target, const std::string& headers = "");
Answer post(unsigned port, const std::string& target, const std::string& body, const std::string& headers = "");

/// A WebSocket on /api/v1/live.
class LiveClient {
 public:
  explicit LiveClient(unsigned port, const std::string& headers = "");
  [[nodiscard]] int status() const { return m_status; }  ///< 101 = open
  /// The next text message (pings are skipped).
  std::string next();

 private:
  Connection m_connection;
  int m_status = 0;
};

}  // namespace tw::test
