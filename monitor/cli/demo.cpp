// SPDX-License-Identifier: GPL-3.0-or-later
// `tankward demo`: writes the invented shop, its history and its store.
#include <algorithm>
#include <chrono>
#include <fstream>
#include <ostream>
#include <system_error>

#include "io/recipe/recipe.hpp"
#include "io/recipe/shipped.hpp"
#include "monitor/cli/commands.hpp"
#include "monitor/cli/demo_history.hpp"
#include "monitor/cli/demo_shop.hpp"
#include "monitor/cli/open_shop.hpp"
#include "monitor/pipeline/load.hpp"
#include "monitor/pipeline/recipes_in_force.hpp"

namespace tw::monitor::cli {
namespace {

namespace fs = std::filesystem;

/// The demo's history is received at its end: nothing in it depends on when it was made.
class StandingClock : public io::Clock {
 public:
  explicit StandingClock(io::Instant at) : m_at(at) {}
  [[nodiscard]] io::Instant now() const override { return m_at; }

 private:
  io::Instant m_at;
};

model::Fault machineFault(const char* code, const fs::path& path, const std::string& why) {
  return {code, path.string(), why, "", model::FaultKind::Machine};
}

model::Result<model::Done> writeFile(const fs::path& path, const std::string& text) {
  std::ofstream file(path, std::ios::binary | std::ios::trunc);
  file.write(text.data(), static_cast<std::streamsize>(text.size()));
  file.close();
  if (!file) return model::fail(machineFault("file_unwritable", path, "the file could not be written"));
  return model::Done{};
}

model::Result<model::Done> makeFolders(const fs::path& dir, const fs::path& baths) {
  std::error_code error;
  for (const char* part : {"history", "drop"}) {
    fs::create_directories(dir / part, error);
    if (error) return model::fail(machineFault("folder_unwritable", dir / part, error.message()));
  }
  fs::copy(baths, dir / "baths", fs::copy_options::recursive | fs::copy_options::overwrite_existing, error);
  if (error) return model::fail(machineFault("file_unwritable", dir / "baths", error.message()));
  return model::Done{};
}

model::Result<std::vector<fs::path>, model::Faults> writeHistory(const fs::path& dir, const OpenedShop& opened,
                                                                 io::Instant end, const DemoOptions& options) {
  std::vector<fs::path> files;
  for (const TankStory& story : demoTanks()) {
    const HistoryFiles history =
        demoHistory(story, opened.recipes.at(story.recipeId), end, options.days, options.seed);
    const auto keep = [&](const std::string& suffix, const std::string& text) {
      files.push_back(dir / "history" / (story.id + suffix));
      return writeFile(files.back(), text);
    };
    if (auto written = keep("-readings.csv", history.readings); !written) {
      return model::fail(model::Faults{written.error()});
    }
    if (history.events.empty()) continue;
    if (auto written = keep("-events.csv", history.events); !written) {
      return model::fail(model::Faults{written.error()});
    }
  }
  return files;
}

model::Result<io::Instant> endOf(const DemoOptions& options, const io::Clock& clock) {
  if (options.end.empty()) return io::Instant(std::chrono::floor<std::chrono::hours>(clock.now()));
  const auto parsed = io::parseRfc3339(options.end);
  if (!parsed) {
    return model::fail(model::Fault{"time_unreadable", options.end,
                                    "--end wants RFC 3339, e.g. 2026-03-02T06:00:00Z", "",
                                    model::FaultKind::Input});
  }
  return parsed->at;
}

/// Fills the store from the history files; one thread, so that the rows come in the same order each time.
model::Result<LoadReport> fillStore(const OpenedShop& opened, const std::vector<fs::path>& files,
                                    io::Instant end) {
  auto held = holdStore(opened.shop);
  if (!held) return model::fail(held.error());
  const StandingClock clock(end);
  const Plant plant(opened.shop, opened.recipes);
  if (auto registered = registerRecipes(plant, *held->store, end); !registered) {
    return model::fail(registered.error());
  }
  return loadFiles(opened.shop, opened.recipes, *held->store, files, clock, 1);
}

}  // namespace

int demo(const DemoOptions& options, const io::Clock& clock, Streams& streams) {
  const auto end = endOf(options, clock);
  if (!end) return report(streams, end.error());
  const fs::path config = options.dir / "tankward.toml";
  if (fs::exists(config)) {
    return report(streams, model::Fault{"demo_exists", config.string(),
                                        "there is a shop already; name an empty folder", "",
                                        model::FaultKind::Input});
  }
  if (auto made = makeFolders(options.dir, io::shippedBaths()); !made) return report(streams, made.error());
  if (auto written = writeFile(config, demoShopFile(demoTanks())); !written) {
    return report(streams, written.error());
  }
  auto opened = openShop(config);
  if (!opened) return report(streams, opened.error());
  auto files = writeHistory(options.dir, *opened, *end, options);
  if (!files) return report(streams, files.error());
  auto loaded = fillStore(*opened, *files, *end);
  if (!loaded) return report(streams, loaded.error());
  for (const LoadedFile& file : loaded->files) {
    for (const io::Refusal& refusal : file.refused) {
      streams.err << "tankward: " << file.file.string() << ":" << refusal.line << ": " << refusal.reason << "\n";
    }
  }
  streams.out << "Made an invented shop with " << options.days << " days of history in " << options.dir.string()
              << "\nServe it:      tankward serve --config " << config.string()
              << "\nLook at it:    tankward-desk"
              << "\nHand readings: files into " << (options.dir / "drop").string() << "\n";
  return 0;
}

}  // namespace tw::monitor::cli
