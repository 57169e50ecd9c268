// SPDX-License-Identifier: GPL-3.0-or-later
#include "tests/monitor/support/client.hpp"

#include <arpa/inet.h>
#include <netinet/in.h>
#include <sys/socket.h>
#include <sys/time.h>
#include <unistd.h>

#include <array>
#include <stdexcept>

#include <nlohmann/json.hpp>

namespace tw::test {
namespace {

Answer readAnswer(Connection& connection) {
  Answer answer;
  answer.headers = connection.readUntil("\r\n\r\n");
  answer.status = std::stoi(answer.headers.substr(9, 3));
  const std::string name = "Content-Length: ";
  const std::size_t length = answer.headers.find(name);
  if (length != std::string::npos) {
    answer.body = connection.readBytes(std::stoul(answer.headers.substr(length + name.size())));
  }
  return answer;
}

}  // namespace

nlohmann::json Answer::json() const { return nlohmann::json::parse(body); }

Connection::Connection(unsigned port) : m_fd(::socket(AF_INET, SOCK_STREAM, 0)) {
  const timeval deadline{60, 0};
  ::setsockopt(m_fd, SOL_SOCKET, SO_RCVTIMEO, &deadline, sizeof deadline);
  ::setsockopt(m_fd, SOL_SOCKET, SO_SNDTIMEO, &deadline, sizeof deadline);
  sockaddr_in address{};
  address.sin_family = AF_INET;
  address.sin_port = htons(static_cast<std::uint16_t>(port));
  address.sin_addr.s_addr = htonl(INADDR_LOOPBACK);
  if (::connect(m_fd, reinterpret_cast<const sockaddr*>(&address), sizeof address) != 0) {
    ::close(m_fd);
    throw std::runtime_error("cannot connect");
  }
}

Connection::~Connection() { ::close(m_fd); }

void Connection::send(const std::string& bytes) const {
  std::size_t done = 0;
  while (done < bytes.size()) {
    const ssize_t n = ::send(m_fd, bytes.data() + done, bytes.size() - done, MSG_NOSIGNAL);
    if (n <= 0) throw std::runtime_error("cannot send");
    done += static_cast<std::size_t>(n);
  }
}

bool Connection::fill() {
  std::array<char, 65536> chunk{};
  const ssize_t n = ::recv(m_fd, chunk.data(), chunk.size(), 0);
  if (n < 0) throw std::runtime_error("nothing came within the deadline");
  m_buffer.append(chunk.data(), static_cast<std::size_t>(n));
  return n > 0;
}

std::string Connection::readUntil(const std::string& end) {
  std::size_t found = m_buffer.find(end);
  while (found == std::string::npos) {
    if (!fill()) throw std::runtime_error("the connection was closed");
    found = m_buffer.find(end);
  }
  std::string text = m_buffer.substr(0, found + end.size());
  m_buffer.erase(0, found + end.size());
  return text;
}

std::string Connection::readBytes(std::size_t count) {
  while (m_buffer.size() < count) {
    if (!fill()) throw std::runtime_error("the connection was closed");
  }
  std::string text = m_buffer.substr(0, count);
  m_buffer.erase(0, count);
  return text;
}

bool Connection::closedByPeer() {
  try {
    while (fill()) m_buffer.clear();
    return true;
  } catch (const std::runtime_error&) {
    return errno != EAGAIN && errno != EWOULDBLOCK;
  }
}

Answer get(unsigned port, const std::string& target, const std::string& headers) {
  Connection connection(port);
  connection.send("GET " + target + " HTTP/1.1\r\nHost: 127.0.0.1\r\n" + headers + "\r\n");
  return readAnswer(connection);
}

Answer post(unsigned port, const std::string& target, const std::string& body, const std::string& headers) {
  Connection connection(port);
  connection.send("POST " + target + " HTTP/1.1\r\nHost: 127.0.0.1\r\nContent-Type: application/json\r\n" + headers +
                  "Content-Length: " + std::to_string(body.size()) + "\r\n\r\n" + body);
  return readAnswer(connection);
}

LiveClient::LiveClient(unsigned port, const std::string& headers) : m_connection(port) {
  m_connection.send("GET /api/v1/live HTTP/1.1\r\nHost: 127.0.0.1\r\nUpgrade: websocket\r\n"
                    "Connection: Upgrade\r\nSec-WebSocket-Version: 13\r\n"
                    "Sec-WebSocket-Key: dGhlIHNhbXBsZSBub25jZQ==\r\n" + headers + "\r\n");
  const std::string answer = m_connection.readUntil("\r\n\r\n");
  m_status = std::stoi(answer.substr(9, 3));
}

std::string LiveClient::next() {
  // RFC 6455 section 5.2: opcode, length in 7, 16 or 64 bits; a server does not mask.
  std::string message;
  for (;;) {
    const std::string head = m_connection.readBytes(2);
    const auto byte = [](char c) { return static_cast<std::size_t>(static_cast<unsigned char>(c)); };
    const std::size_t opcode = byte(head[0]) & 0x0fU;
    const bool last = (byte(head[0]) & 0x80U) != 0;
    std::size_t length = byte(head[1]) & 0x7fU;
    if (length >= 126) {
      const std::string more = m_connection.readBytes(length == 126 ? 2 : 8);
      length = 0;
      for (const char c : more) length = length << 8U | byte(c);
    }
    const std::string payload = m_connection.readBytes(length);
    if (opcode > 2) continue;  // control frames
    message += payload;
    if (last) return message;
  }
}

}  // namespace tw::test
