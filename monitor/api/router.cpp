// SPDX-License-Identifier: GPL-3.0-or-later
#include "monitor/api/router.hpp"

#include <exception>
#include <string_view>
#include <utility>

#include "io/log.hpp"

namespace tw::monitor {
namespace {

std::vector<std::string_view> segments(std::string_view path) {
  std::vector<std::string_view> parts;
  while (!path.empty()) {
    path.remove_prefix(1);
    const std::size_t end = path.find('/');
    parts.push_back(path.substr(0, end));
    path = end == std::string_view::npos ? std::string_view{} : path.substr(end);
  }
  return parts;
}

std::string_view withoutPort(std::string_view host) {
  if (host.starts_with('[')) return host.substr(0, host.find(']') + 1);
  return host.substr(0, host.find(':'));
}

bool loopbackName(std::string_view host) {
  const std::string_view name = withoutPort(host);
  const bool numeric = name.find_first_not_of("0123456789.") == std::string_view::npos;
  return name == "localhost" || name == "[::1]" || (numeric && name.starts_with("127."));
}

}  // namespace

bool matches(const std::string& pattern, const std::string& path, PathValues& values) {
  if (path.empty() || path.front() != '/') return false;
  const auto wanted = segments(pattern);
  const auto given = segments(path);
  if (wanted.size() != given.size()) return false;
  for (std::size_t i = 0; i < wanted.size(); ++i) {
    if (wanted[i].starts_with('{')) {
      if (given[i].empty()) return false;
      values[std::string(wanted[i].substr(1, wanted[i].size() - 2))] = percentDecoded(std::string(given[i]));
    } else if (wanted[i] != given[i]) {
      return false;
    }
  }
  return true;
}

void Router::add(std::string method, std::string pattern, Handler handler) {
  m_routes.push_back({std::move(method), std::move(pattern), std::move(handler)});
}

bool Router::allowed(const Request& request) {
  if (!request.host.empty() && !loopbackName(request.host)) return false;
  if (request.origin.empty()) return true;
  const std::string_view origin = request.origin;
  const std::size_t scheme = origin.find("://");
  return scheme != std::string_view::npos && origin.substr(scheme + 3) == request.host;
}

void Router::handle(const Request& request, Reply reply) const {
  if (!allowed(request)) {
    return reply(problem(403, "foreign_origin", "this service answers programs on this machine only"));
  }
  std::string allow;
  for (const Route& route : m_routes) {
    PathValues values;
    if (!matches(route.pattern, request.path, values)) continue;
    const bool head = request.method == "HEAD" && route.method == "GET";
    if (route.method != request.method && !head) {
      allow += (allow.empty() ? "" : ", ") + route.method;
      continue;
    }
    try {
      return route.handler(request, values, reply);
    } catch (const std::exception& e) {
      io::log(io::LogLevel::Error, "request_failed", {{"path", request.path}, {"what", e.what()}});
      return reply(problem(500, "internal_error", "the request could not be answered; see the log"));
    }
  }
  if (allow.empty()) return reply(problem(404, "not_found", "there is nothing at " + request.path));
  Response refused = problem(405, "method_not_allowed", "this path answers " + allow);
  refused.headers["Allow"] = allow;
  reply(std::move(refused));
}

}  // namespace tw::monitor
