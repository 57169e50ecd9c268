// SPDX-License-Identifier: GPL-3.0-or-later
// `tankward load`: past readings and events, in bulk.
#include "monitor/pipeline/load.hpp"

#include <algorithm>
#include <ostream>
#include <thread>

#include "monitor/cli/commands.hpp"
#include "monitor/cli/open_shop.hpp"
#include "monitor/pipeline/recipes_in_force.hpp"

namespace tw::monitor::cli {
namespace {

void tellProgress(std::ostream& err, const LoadProgress& progress) {
  if (progress.stage == LoadProgress::Stage::File) {
    err << "stored " << progress.file << " (" << progress.done << " of " << progress.total << ")\n";
  } else {
    err << "solved " << progress.done << " liquors\n";
  }
}

/// One line a refused cell: `FILE:LINE: column 'value': reason`, as every error of the program.
void tellRefusals(std::ostream& err, const LoadedFile& file) {
  if (!file.headerReadable) err << "tankward: " << file.file.string() << ": no readable header; nothing was taken\n";
  for (const io::Refusal& refusal : file.refused) {
    err << "tankward: " << file.file.string() << ":" << refusal.line << ": " << refusal.code << " in '"
        << refusal.column << "': '" << refusal.value << "' " << refusal.reason << "\n";
  }
}

}  // namespace

int load(const LoadOptions& options, const io::Clock& clock, Streams& streams) {
  auto opened = openShop(options.config);
  if (!opened) return report(streams, opened.error());
  auto held = holdStore(opened->shop);
  if (!held) return report(streams, held.error());
  const Plant plant(opened->shop, opened->recipes);
  if (auto registered = registerRecipes(plant, *held->store, clock.now()); !registered) {
    return report(streams, registered.error());
  }
  const unsigned threads = std::max(1U, std::thread::hardware_concurrency());
  auto loaded = loadFiles(opened->shop, opened->recipes, *held->store, options.files, clock, threads,
                          [&](const LoadProgress& progress) { tellProgress(streams.err, progress); });
  if (!loaded) return report(streams, loaded.error());
  bool anyRefused = false;
  std::size_t accepted = 0;
  std::size_t duplicates = 0;
  std::size_t events = 0;
  for (const LoadedFile& file : loaded->files) {
    tellRefusals(streams.err, file);
    anyRefused = anyRefused || !file.headerReadable || !file.refused.empty();
    accepted += file.accepted;
    duplicates += file.duplicates;
    events += file.events;
  }
  streams.out << accepted << " readings and " << events << " events taken, " << duplicates << " already there; "
              << loaded->solved << " liquors solved, " << loaded->incomplete << " incomplete, "
              << loaded->unsolvable << " contradictory\n";
  return anyRefused ? 1 : 0;
}

int adopt(const AdoptOptions& options, const io::Clock& clock, Streams& streams) {
  auto opened = openShop(options.config);
  if (!opened) return report(streams, opened.error());
  auto held = holdStore(opened->shop);
  if (!held) return report(streams, held.error());
  const Plant plant(opened->shop, opened->recipes);
  auto adopted = adoptRecipe(plant, *held->store, options.tank, options.person, options.reason, clock.now());
  if (!adopted) return report(streams, adopted.error());
  streams.out << options.tank << (*adopted ? ": the recipe file is in force from now on\n"
                                           : ": the recipe file was in force already\n");
  return 0;
}

}  // namespace tw::monitor::cli
