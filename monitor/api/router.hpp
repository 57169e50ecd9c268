// SPDX-License-Identifier: GPL-3.0-or-later
// Which handler answers which path. Knows no socket and no handler's business.
//
// It also keeps browsers' pages of other origins away: a request must be addressed to this machine by a
// loopback name (a foreign host name means that a name was re-bound to us), and one that carries an
// Origin must come from the same place.
#pragma once

#include <functional>
#include <map>
#include <string>
#include <vector>

#include "monitor/api/message.hpp"

namespace tw::monitor {

/// Values of the braces of a pattern, decoded.
using PathValues = std::map<std::string, std::string>;
using Handler = std::function<void(const Request&, const PathValues&, Reply)>;

struct Route {
  std::string method;   ///< "GET" | "POST"
  std::string pattern;  ///< "/api/v1/tanks/{id}"
  Handler handler;
};

class Router {
 public:
  void add(std::string method, std::string pattern, Handler handler);
  [[nodiscard]] const std::vector<Route>& routes() const { return m_routes; }

  /// Answers 404 (no such path), 405 (with Allow), 403 (foreign host or origin); an exception of a handler
  /// is logged and answered with 500.
  void handle(const Request& request, Reply reply) const;
  /// The check of host and origin alone (for the WebSocket).
  [[nodiscard]] static bool allowed(const Request& request);

 private:
  std::vector<Route> m_routes;
};

/// True when `path` has the shape of `pattern`; fills `values`.
[[nodiscard]] bool matches(const std::string& pattern, const std::string& path, PathValues& values);

}  // namespace tw::monitor
