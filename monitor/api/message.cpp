// SPDX-License-Identifier: GPL-3.0-or-later
#include "monitor/api/message.hpp"

#include <array>
#include <charconv>
#include <string_view>
#include <utility>

#include <nlohmann/json.hpp>

namespace tw::monitor {
namespace {

struct Title {
  int status;
  const char* text;
};
constexpr std::array<Title, 12> kTitles = {{{400, "Bad request"},
                                            {401, "Sign-in required"},
                                            {403, "Not allowed"},
                                            {404, "Not found"},
                                            {405, "Method not allowed"},
                                            {409, "Conflict"},
                                            {413, "Body too large"},
                                            {422, "Cannot be used"},
                                            {426, "Upgrade required"},
                                            {431, "Headers too large"},
                                            {500, "Internal error"},
                                            {503, "Busy"}}};

const char* title(int status) {
  for (const Title& each : kTitles) {
    if (each.status == status) return each.text;
  }
  return "Error";
}

int statusOf(const model::Fault& fault) {
  if (fault.kind == model::FaultKind::Machine) return 500;
  if (fault.code == "already_superseded" || fault.code == "not_suspicious") return 409;
  if (fault.code == "reading_unknown" || fault.code == "alarm_unknown" || fault.code == "unknown_tank") {
    return 404;
  }
  return 422;
}

}  // namespace

Response problem(int status, const std::string& code, const std::string& detail) {
  const nlohmann::json body = {{"type", "about:blank"},
                               {"title", title(status)},
                               {"status", status},
                               {"detail", detail},
                               {"code", code}};
  // Replaces what is no UTF-8: details quote what was sent.
  return {status, body.dump(-1, ' ', false, nlohmann::json::error_handler_t::replace),
          "application/problem+json", {}};
}

Response problem(const model::Fault& fault) { return problem(statusOf(fault), fault.code, fault.detail); }

std::string percentDecoded(const std::string& text) {
  std::string out;
  for (std::size_t i = 0; i < text.size(); ++i) {
    unsigned byte = 0;
    if (text[i] == '%' && i + 2 < text.size()) {
      const char* first = text.data() + i + 1;
      const auto [end, error] = std::from_chars(first, first + 2, byte, 16);
      if (error == std::errc{} && end == first + 2) {
        out += static_cast<char>(byte);
        i += 2;
        continue;
      }
    }
    out += text[i];
  }
  return out;
}

void setTarget(Request& request, const std::string& target) {
  const std::size_t mark = target.find('?');
  request.path = target.substr(0, mark);
  request.query.clear();
  if (mark == std::string::npos) return;
  std::string_view rest = std::string_view(target).substr(mark + 1);
  while (!rest.empty()) {
    const std::size_t end = rest.find('&');
    const std::string_view pair = rest.substr(0, end);
    const std::size_t equals = pair.find('=');
    const std::string name = percentDecoded(std::string(pair.substr(0, equals)));
    const std::string value =
        equals == std::string_view::npos ? "" : percentDecoded(std::string(pair.substr(equals + 1)));
    if (!name.empty()) request.query[name] = value;
    rest = end == std::string_view::npos ? std::string_view{} : rest.substr(end + 1);
  }
}

}  // namespace tw::monitor
