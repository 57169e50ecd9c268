// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/recipe/shop.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <set>

#include "io/recipe/recipe_draft.hpp"
#include "io/recipe/recipe_load.hpp"
#include "io/recipe/shop_parts.hpp"
#include "io/recipe/suggestion.hpp"

namespace tw::io {
namespace {

namespace fs = std::filesystem;
using model::Faults;

const Choices<std::string> kSignIn = {{"required", "required"}, {"none", "none"}};

fs::path fromFile(const Shop& shop, const std::string& path) {
  return fs::absolute(shop.file).parent_path() / path;
}

/// "host:port"; an IPv6 host stands in brackets. nullopt when it is neither.
std::optional<std::pair<std::string, int>> hostAndPort(const std::string& listen) {
  const auto colon = listen.rfind(':');
  if (colon == std::string::npos || colon == 0 || colon + 1 == listen.size() || listen.size() - colon > 6) {
    return std::nullopt;
  }
  std::string host = listen.substr(0, colon);
  if (host.front() == '[' && host.back() == ']') host = host.substr(1, host.size() - 2);
  int port = 0;
  for (const char c : listen.substr(colon + 1)) {
    if (c < '0' || c > '9') return std::nullopt;
    port = 10 * port + (c - '0');
  }
  if (port > 65535 || host.empty()) return std::nullopt;
  return std::pair{host, port};
}

/// 127.0.0.0/8 (RFC 1122), ::1 (RFC 4291), or the name localhost.
bool isLoopback(const std::string& host) {
  if (host == "localhost" || host == "::1") return true;
  int parts = 1, digits = 0;
  for (const char c : host) {
    if (c == '.') {
      if (digits == 0) return false;
      ++parts;
      digits = 0;
    } else if (c >= '0' && c <= '9' && digits < 3) {
      ++digits;
    } else {
      return false;
    }
  }
  return host.starts_with("127.") && parts == 4 && digits > 0;
}

void readListen(TableReader& document, Shop& shop) {
  shop.listen = document.requiredText("listen");
  shop.signIn = document.choice("sign_in", kSignIn).value_or("required");
  if (auto tls = document.table("tls")) {
    shop.tlsCert = fromFile(shop, tls->requiredText("cert"));
    shop.tlsKey = fromFile(shop, tls->requiredText("key"));
    tls->finish();
  }
  if (shop.listen.empty()) return;
  const auto address = hostAndPort(shop.listen);
  if (!address) {
    document.fault(
        "listen", "bad_address",
        fmt::format("listen is \"{}\"; expected address:port, such as 127.0.0.1:8484", shop.listen));
    return;
  }
  if (isLoopback(address->first)) return;
  if (shop.tlsCert.empty() || shop.signIn != "required") {
    document.fault(
        "listen", "unsafe_listen",
        fmt::format("listen is \"{}\", which other machines reach; expected a loopback address, or [tls] "
                    "with cert and key and sign_in = \"required\"",
                    shop.listen));
  }
}

/// Only the shape: whether the zone exists, the service asks its zone database.
void readTimeZone(TableReader& document, Shop& shop) {
  shop.timeZone = document.text("time_zone", shop.timeZone);
  const auto fits = [](char c) {
    return (c >= 'a' && c <= 'z') || (c >= 'A' && c <= 'Z') || (c >= '0' && c <= '9') ||
           std::string("_+-/").find(c) != std::string::npos;
  };
  if (shop.timeZone.empty() || !std::all_of(shop.timeZone.begin(), shop.timeZone.end(), fits)) {
    document.fault(
        "time_zone", "bad_time_zone",
        fmt::format("time_zone is \"{}\"; expected an IANA name, such as Europe/Paris", shop.timeZone));
  }
}

void readPlaces(TableReader& document, Shop& shop) {
  const std::string dataDir = document.requiredText("data_dir");
  if (!dataDir.empty()) shop.dataDir = fromFile(shop, dataDir);
  document.require("recipes");
  for (const std::string& folder : document.texts("recipes")) {
    shop.recipeDirs.push_back(fromFile(shop, folder));
    std::error_code code;
    if (!fs::is_directory(shop.recipeDirs.back(), code)) {
      document.fault("recipes", "cannot_read",
                     fmt::format("recipes names \"{}\", which is no folder", folder));
    }
  }
  if (const auto constants = document.text("constants")) shop.constants = fromFile(shop, *constants);
}

void readLines(TableReader& document, Shop& shop) {
  document.require("line");
  std::set<std::string> lineIds, tankIds;
  for (TableReader& reader : document.tables("line")) {
    Line line = readLine(reader);
    if (!lineIds.insert(line.id).second) {
      reader.fault("id", "duplicate", fmt::format("line {} stands twice", line.id));
    }
    for (const Tank& tank : line.tanks) {
      if (tankIds.insert(tank.id).second) continue;
      document.report({.code = "duplicate",
                       .subject = "tank " + tank.id,
                       .detail = fmt::format("tank {} stands twice", tank.id),
                       .where = tank.where});
    }
    shop.lines.push_back(std::move(line));
  }
}

void readInlets(TableReader& document, Shop& shop) {
  std::vector<std::string> tanks;
  for (const Line& line : shop.lines) {
    for (const Tank& tank : line.tanks) tanks.push_back(tank.id);
  }
  for (TableReader& reader : document.tables("drop")) {
    shop.drops.push_back(readDrop(reader));
    shop.drops.back().path = fromFile(shop, shop.drops.back().path.string());
  }
  for (TableReader& reader : document.tables("serial")) shop.serials.push_back(readSerial(reader, tanks));
  std::vector<TableReader> readers = document.tables("route");
  std::vector<std::string> ids;
  for (TableReader& reader : readers) {
    shop.routes.push_back(readRoute(reader));
    if (std::find(ids.begin(), ids.end(), shop.routes.back().id) != ids.end()) {
      reader.fault("id", "duplicate", fmt::format("route {} stands twice", shop.routes.back().id));
    }
    ids.push_back(shop.routes.back().id);
  }
  for (std::size_t i = 0; i < readers.size(); ++i) {
    const std::string& after = shop.routes[i].after;
    if (after.empty() || (after != ids[i] && std::find(ids.begin(), ids.end(), after) != ids.end())) continue;
    readers[i].fault("after", "unknown_route",
                     fmt::format("after is \"{}\"; expected another route: {}{}", after, listed(ids),
                                 didYouMean(after, ids)));
  }
}

}  // namespace

const Tank* Shop::tank(const std::string& id) const {
  for (const Line& line : lines) {
    for (const Tank& candidate : line.tanks) {
      if (candidate.id == id) return &candidate;
    }
  }
  return nullptr;
}

model::Result<Shop, Faults> loadShop(const fs::path& file) {
  const auto parsed = readToml(file);
  if (!parsed) return model::fail(parsed.error());
  Faults faults;
  TableReader document(parsed->root, file.string(), "", faults);
  if (document.requiredText("format") != kShopFormat) {
    document.fault("format", "unknown_format", fmt::format("expected format = \"{}\"", kShopFormat));
    return model::fail(sortedFaults(std::move(faults)));
  }
  Shop shop;
  shop.file = file;
  shop.title = document.text("title", "");
  readPlaces(document, shop);
  readTimeZone(document, shop);
  readListen(document, shop);
  readLines(document, shop);
  readInlets(document, shop);
  document.allowRemarks();
  document.finish();
  if (!faults.empty()) return model::fail(sortedFaults(std::move(faults)));
  return shop;
}

}  // namespace tw::io
