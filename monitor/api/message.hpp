// SPDX-License-Identifier: GPL-3.0-or-later
// A request and its answer as plain values: what the router sees, with no socket behind it.
#pragma once

#include <functional>
#include <map>
#include <string>

#include "model/result.hpp"

namespace tw::monitor {

struct Request {
  std::string method;                        ///< "GET", "POST" ...
  std::string path;                          ///< without query, percent signs as sent
  std::map<std::string, std::string> query;  ///< decoded; a plus sign stays one (times carry it)
  std::string host, origin;                  ///< headers; origin empty = none
  std::string body;
};

struct Response {
  int status = 200;
  std::string body;
  std::string contentType = "application/json";
  std::map<std::string, std::string> headers;
};

/// Called exactly once, on the loop's thread.
using Reply = std::function<void(Response)>;

/// RFC 9457 problem document with our `code`.
[[nodiscard]] Response problem(int status, const std::string& code, const std::string& detail);
/// Status from the fault: unknown things 404, conflicts of state 409, the machine 500, else 422.
[[nodiscard]] Response problem(const model::Fault& fault);

/// %41 -> A; an incomplete escape stays as it is.
[[nodiscard]] std::string percentDecoded(const std::string& text);
/// Splits "path?query" into a request's path and query.
void setTarget(Request& request, const std::string& target);

}  // namespace tw::monitor
