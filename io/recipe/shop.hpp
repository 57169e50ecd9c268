// SPDX-License-Identifier: GPL-3.0-or-later
// The shop file `tankward.toml` that `serve` reads (FORMATS section 4).
#pragma once

#include <filesystem>
#include <map>
#include <optional>
#include <string>
#include <vector>

#include "io/recipe/recipe.hpp"
#include "model/result.hpp"

namespace tw::io {

/// What a tank may change of its recipe, by id.
struct ChannelOverride {
  std::optional<double> low, target, high, every_h;
};

struct Tank {
  std::string id, title, lineId, recipeId;
  std::string liquorColor = "#5a7d9a";  ///< #rrggbb
  bool inService = true;
  std::optional<double> volume_L;
  std::map<std::string, ChannelOverride> channels;
  std::map<model::MarginKind, model::MarginLimit> limits;
  struct WatchOverride {
    std::optional<double> threshold, thresholdSigma;
    std::string thresholdFrom;
  };
  std::map<std::string, WatchOverride> watch;  ///< by solid id
  /// drag_out_L_h, evaporation_L_h; per channel "copper.electrons", "copper.efficiency", "copper.anode_g_h".
  std::map<std::string, double> balance;
  std::string where;                           ///< FILE:LINE, for faults found later
};

struct Line {
  std::string id, title;
  std::vector<Tank> tanks;  ///< hoist order, the shop's own
};

struct DropFolder {
  std::filesystem::path path;
  int settle_ms = 500;
  std::string source, decimal, separator, encoding, dateOrder;  ///< empty = the file says it itself
};

enum class FrameKind { Named, Columns, Pattern };
struct SerialPort {
  std::string port, tank;
  int baud = 9600, dataBits = 8, stopBits = 1;
  std::string parity = "none", flow = "none";
  FrameKind frame = FrameKind::Named;
  std::vector<std::string> columns;
  std::string separator = ";", pattern, checksum = "none";
  double every_s = 60.0;  ///< 0 = every line
};

/// Kept as read for now; kinds are checked, secrets only as *_file. A list (argv, to) is joined by line
/// breaks.
struct Route {
  std::string id, kind, minPriority = "medium", after;
  std::map<std::string, std::string> settings;
};

struct Shop {
  std::filesystem::path file;
  std::string title, timeZone = "UTC", listen = "127.0.0.1:8484", signIn = "required";
  std::filesystem::path dataDir, constants;     ///< absolute
  std::filesystem::path tlsCert, tlsKey;        ///< absolute; empty = plain HTTP on loopback
  std::vector<std::filesystem::path> recipeDirs;
  std::vector<Line> lines;
  std::vector<DropFolder> drops;
  std::vector<SerialPort> serials;
  std::vector<Route> routes;

  [[nodiscard]] const Tank* tank(const std::string& id) const;
};

/// Reads and checks a shop file; relative paths are relative to the file. Every fault with FILE:LINE.
model::Result<Shop, model::Faults> loadShop(const std::filesystem::path& file);

/// Loads each recipe the shop's tanks use, by recipe id. A tank whose recipe is in no folder is a fault.
model::Result<std::map<std::string, Recipe>, model::Faults> loadShopRecipes(const Shop& shop);

/// The recipe as this tank has it: volume, limits, thresholds and windows overridden.
[[nodiscard]] Recipe recipeForTank(const Recipe& recipe, const Tank& tank);

}  // namespace tw::io
