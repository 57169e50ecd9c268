// SPDX-License-Identifier: GPL-3.0-or-later
#include "monitor/api/http_server.hpp"

#include <boost/asio/dispatch.hpp>
#include <boost/asio/ip/tcp.hpp>
#include <boost/asio/steady_timer.hpp>
#include <boost/beast/core.hpp>
#include <boost/beast/http.hpp>
#include <boost/beast/websocket.hpp>
#include <charconv>
#include <deque>
#include <optional>
#include <set>
#include <utility>

#include "io/log.hpp"
#include "io/loop_asio.hpp"

namespace tw::monitor {
namespace {

namespace asio = boost::asio;
namespace beast = boost::beast;
namespace http = beast::http;
namespace websocket = beast::websocket;
using asio::ip::tcp;
using boost::system::error_code;
using HttpRequest = http::request<http::string_body>;
using HttpResponse = http::response<http::string_body>;

constexpr std::chrono::milliseconds kAcceptPause{100};  // after a failed accept (out of descriptors)
constexpr std::size_t kLargestClientMessage = 4096;     // clients have nothing to say here
constexpr const char* kLivePath = "/api/v1/live";

class HttpSession;
class LiveSession;

}  // namespace

struct HttpServer::Impl : std::enable_shared_from_this<HttpServer::Impl> {
  Impl(io::Loop& loop, Hooks h, ServerLimits l)
      : context(loop.impl().context), hooks(std::move(h)), limits(l), acceptor(context), pause(context) {}

  void accept();
  void push(std::string text);

  asio::io_context& context;
  Hooks hooks;
  ServerLimits limits;
  tcp::acceptor acceptor;
  asio::steady_timer pause;
  bool stopping = false;
  std::set<HttpSession*> sessions;
  std::set<LiveSession*> live;
  /// Messages for WebSocket clients; the first one has number `firstNumber`.
  std::deque<std::shared_ptr<const std::string>> messages;
  std::uint64_t firstNumber = 0;
  [[nodiscard]] std::uint64_t endNumber() const { return firstNumber + messages.size(); }
  [[nodiscard]] std::size_t connections() const { return sessions.size() + live.size(); }
};

namespace {

Request plainRequest(const HttpRequest& from) {
  Request request;
  request.method = std::string(from.method_string());
  setTarget(request, std::string(from.target()));
  request.host = std::string(from[http::field::host]);
  request.origin = std::string(from[http::field::origin]);
  request.body = from.body();
  return request;
}

HttpResponse httpResponse(const Response& from, unsigned version, bool keepAlive, bool head) {
  HttpResponse response(static_cast<http::status>(from.status), version);
  response.set(http::field::content_type, from.contentType);
  response.set(http::field::cache_control, "no-store");
  response.set("X-Content-Type-Options", "nosniff");
  for (const auto& [name, value] : from.headers) response.set(name, value);
  response.keep_alive(keepAlive);
  response.content_length(from.body.size());
  if (!head) response.body() = from.body;
  return response;
}

/// One WebSocket client: a cursor into the server's messages.
class LiveSession : public std::enable_shared_from_this<LiveSession> {
 public:
  LiveSession(std::shared_ptr<HttpServer::Impl> server, beast::tcp_stream stream)
      : m_server(std::move(server)), m_socket(std::move(stream)), m_stall(m_server->context) {
    m_server->live.insert(this);
  }
  ~LiveSession() { m_server->live.erase(this); }

  void start(const HttpRequest& request) {
    beast::get_lowest_layer(m_socket).expires_never();
    m_socket.set_option(websocket::stream_base::timeout::suggested(beast::role_type::server));
    m_socket.read_message_max(kLargestClientMessage);
    m_socket.text(true);
    m_socket.async_accept(request, [self = shared_from_this()](const error_code& error) {
      if (error) return;
      self->m_open = true;
      self->m_next = self->m_server->endNumber();
      self->m_hello = std::make_shared<const std::string>(self->m_server->hooks.hello());
      self->send();
      self->read();
    });
  }

  /// Sends the next message unless one is on its way.
  void send() {
    if (!m_open || m_current) return;
    if (m_hello) {
      m_current = std::move(m_hello);
      m_hello.reset();
    } else if (m_next < m_server->firstNumber) {
      return drop("fell behind the backlog");
    } else if (m_next < m_server->endNumber()) {
      m_current = m_server->messages[static_cast<std::size_t>(m_next - m_server->firstNumber)];
      ++m_next;
    } else {
      return;
    }
    watch();
    m_socket.async_write(asio::buffer(*m_current),
                         [self = shared_from_this()](const error_code& error, std::size_t) {
                           self->m_stall.cancel();
                           self->m_current.reset();
                           if (error) return self->close();
                           self->send();
                         });
  }

  void close() {
    m_open = false;
    m_stall.cancel();
    beast::get_lowest_layer(m_socket).close();
  }

 private:
  void read() {
    m_socket.async_read(m_incoming, [self = shared_from_this()](const error_code& error, std::size_t) {
      if (error) return self->close();
      self->m_incoming.clear();
      self->read();
    });
  }

  /// A write that does not end while the client lags too far: it is not listening.
  void watch() {
    m_stall.expires_after(m_server->limits.stall);
    m_stall.async_wait([self = shared_from_this()](const error_code& error) {
      if (error || !self->m_open) return;
      if (self->m_server->endNumber() - self->m_next > self->m_server->limits.queue) {
        return self->drop("too slow");
      }
      self->watch();
    });
  }

  void drop(const char* why) {
    io::log(io::LogLevel::Warning, "live_client_dropped", {{"reason", why}});
    close();
  }

  std::shared_ptr<HttpServer::Impl> m_server;
  websocket::stream<beast::tcp_stream> m_socket;
  asio::steady_timer m_stall;
  beast::flat_buffer m_incoming;
  std::shared_ptr<const std::string> m_hello, m_current;
  std::uint64_t m_next = 0;
  bool m_open = false;
};

/// One HTTP connection: a request at a time.
class HttpSession : public std::enable_shared_from_this<HttpSession> {
 public:
  HttpSession(std::shared_ptr<HttpServer::Impl> server, tcp::socket socket)
      : m_server(std::move(server)), m_stream(std::move(socket)), m_buffer(m_server->limits.headerBytes * 8) {
    m_server->sessions.insert(this);
  }
  ~HttpSession() { m_server->sessions.erase(this); }

  void read() {
    m_parser.emplace();
    m_parser->header_limit(static_cast<std::uint32_t>(m_server->limits.headerBytes));
    m_parser->body_limit(m_server->limits.bodyBytes);
    m_stream.expires_after(m_server->limits.requestTime);
    http::async_read(m_stream, m_buffer, *m_parser,
                     [self = shared_from_this()](const error_code& error, std::size_t) { self->onRead(error); });
  }

  void close() { m_stream.close(); }
  /// A request that is being answered gets its answer; the connection ends with it.
  void closeUnlessAnswering() {
    if (!m_answering) close();
  }

 private:
  void onRead(const error_code& error) {
    if (error == http::error::body_limit) {
      return refuse(problem(413, "body_too_large", "the body is larger than the service takes"));
    }
    if (error == http::error::header_limit) {
      return refuse(problem(431, "header_too_large", "the headers are larger than the service takes"));
    }
    if (error == beast::error::timeout || error == http::error::end_of_stream) return close();
    if (error) {
      const bool ofHttp = error.category() == http::make_error_code(http::error::bad_method).category();
      return ofHttp ? refuse(problem(400, "bad_request", "this is not HTTP as the service reads it")) : close();
    }
    // What answers may take as long as its commit does.
    m_stream.expires_never();
    const HttpRequest request = m_parser->release();
    m_version = request.version();
    m_keepAlive = request.keep_alive();
    m_head = request.method() == http::verb::head;
    const Request plain = plainRequest(request);
    if (plain.path == kLivePath && websocket::is_upgrade(request)) return upgrade(request, plain);
    m_answering = true;
    auto self = shared_from_this();
    auto answered = std::make_shared<bool>(false);
    m_server->hooks.answer(plain, [self, answered](const Response& response) {
      if (std::exchange(*answered, true)) return;
      self->write(response);
    });
  }

  void upgrade(const HttpRequest& request, const Request& plain) {
    if (const auto refused = m_server->hooks.refuseLive(plain)) return write(*refused);
    std::make_shared<LiveSession>(m_server, std::move(m_stream))->start(request);
  }

  void refuse(const Response& response) {
    m_keepAlive = false;
    write(response);
  }

  void write(const Response& response) {
    m_keepAlive = m_keepAlive && !m_server->stopping;
    m_response = httpResponse(response, m_version, m_keepAlive, m_head);
    m_stream.expires_after(m_server->limits.requestTime);
    http::async_write(m_stream, *m_response,
                      [self = shared_from_this()](const error_code& error, std::size_t) {
                        self->m_answering = false;
                        if (error) return self->close();
                        if (self->m_keepAlive && !self->m_server->stopping) return self->read();
                        error_code ignored;
                        self->m_stream.socket().shutdown(tcp::socket::shutdown_send, ignored);
                      });
  }

  std::shared_ptr<HttpServer::Impl> m_server;
  beast::tcp_stream m_stream;
  beast::flat_buffer m_buffer;
  std::optional<http::request_parser<http::string_body>> m_parser;
  std::optional<HttpResponse> m_response;
  unsigned m_version = 11;
  bool m_keepAlive = true, m_head = false, m_answering = false;
};

struct HostPort {
  std::string host;
  unsigned short port = 0;
};

std::optional<HostPort> splitAddress(const std::string& address) {
  const std::size_t colon = address.rfind(':');
  if (colon == std::string::npos) return std::nullopt;
  HostPort out;
  out.host = address.substr(0, colon);
  if (out.host.starts_with('[') && out.host.ends_with(']')) out.host = out.host.substr(1, out.host.size() - 2);
  if (out.host == "localhost") out.host = "127.0.0.1";
  const char* end = address.data() + address.size();
  const auto [read, error] = std::from_chars(address.data() + colon + 1, end, out.port);
  if (error != std::errc{} || read != end) return std::nullopt;
  return out;
}

model::Fault listenFault(const char* code, const std::string& address, const std::string& detail,
                         model::FaultKind kind) {
  return {code, address, "listen = \"" + address + "\": " + detail, "", kind};
}

}  // namespace

void HttpServer::Impl::accept() {
  acceptor.async_accept([self = shared_from_this()](const error_code& error, tcp::socket socket) {
    if (self->stopping) return;
    if (error) {
      io::log(io::LogLevel::Error, "accept_failed", {{"what", error.message()}});
      self->pause.expires_after(kAcceptPause);
      self->pause.async_wait([self](const error_code& cancelled) {
        if (!cancelled && !self->stopping) self->accept();
      });
      return;
    }
    if (self->connections() < self->limits.connections) {
      error_code ignored;
      socket.set_option(tcp::no_delay(true), ignored);
      std::make_shared<HttpSession>(self, std::move(socket))->read();
    }
    self->accept();
  });
}

void HttpServer::Impl::push(std::string text) {
  if (live.empty()) return;
  messages.push_back(std::make_shared<const std::string>(std::move(text)));
  while (messages.size() > limits.backlog) {
    messages.pop_front();
    ++firstNumber;
  }
  // A client that is dropped leaves the set: go through a copy.
  const std::set<LiveSession*> clients = live;
  for (LiveSession* client : clients) {
    if (live.contains(client)) client->send();
  }
}

HttpServer::HttpServer(io::Loop& loop, Hooks hooks, ServerLimits limits)
    : m_impl(std::make_shared<Impl>(loop, std::move(hooks), limits)) {}

HttpServer::~HttpServer() { stop(); }

model::Result<model::Done> HttpServer::listen(const std::string& address) {
  const auto parts = splitAddress(address);
  error_code error;
  const auto ip = parts ? asio::ip::make_address(parts->host, error) : asio::ip::address{};
  if (!parts || error) {
    return model::fail(listenFault("listen_unreadable", address, "an address and a port were expected, e.g. 127.0.0.1:8484",
                                   model::FaultKind::Input));
  }
  if (!ip.is_loopback()) {
    return model::fail(listenFault("listen_not_loopback", address,
                                   "this version serves its own machine only (no TLS yet)",
                                   model::FaultKind::Input));
  }
  const tcp::endpoint endpoint(ip, parts->port);
  m_impl->acceptor.open(endpoint.protocol(), error);
  if (!error) m_impl->acceptor.set_option(asio::socket_base::reuse_address(true), error);
  if (!error) m_impl->acceptor.bind(endpoint, error);
  if (!error) m_impl->acceptor.listen(asio::socket_base::max_listen_connections, error);
  if (error) {
    return model::fail(listenFault("listen_failed", address, error.message(), model::FaultKind::Machine));
  }
  m_impl->accept();
  return model::Done{};
}

unsigned HttpServer::port() const {
  error_code ignored;
  return m_impl->acceptor.local_endpoint(ignored).port();
}

void HttpServer::push(std::string text) { m_impl->push(std::move(text)); }
std::size_t HttpServer::liveClients() const { return m_impl->live.size(); }
std::size_t HttpServer::connections() const { return m_impl->connections(); }

void HttpServer::stop() {
  if (std::exchange(m_impl->stopping, true)) return;
  error_code ignored;
  m_impl->acceptor.close(ignored);
  m_impl->pause.cancel();
  const std::set<LiveSession*> clients = m_impl->live;
  for (LiveSession* client : clients) client->close();
  const std::set<HttpSession*> sessions = m_impl->sessions;
  for (HttpSession* session : sessions) session->closeUnlessAnswering();
}

}  // namespace tw::monitor
