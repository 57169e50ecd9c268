// SPDX-License-Identifier: GPL-3.0-or-later
// Bulk import of past readings and events (`tankward load`): judged like everything else, never notifies,
// safe to repeat. Runs on the caller's thread with helpers; needs no loop.
#pragma once

#include <cstddef>
#include <filesystem>
#include <functional>
#include <string>
#include <vector>

#include "io/clock.hpp"
#include "io/incoming.hpp"
#include "io/recipe/shop.hpp"
#include "io/store/store.hpp"
#include "monitor/pipeline/plant.hpp"

namespace tw::monitor {

struct LoadedFile {
  std::filesystem::path file;
  std::size_t accepted = 0, duplicates = 0, suspicious = 0, events = 0;
  std::vector<io::Refusal> refused;
  bool headerReadable = true;
};

struct LoadReport {
  std::vector<LoadedFile> files;
  std::size_t solved = 0;      ///< liquors with a result
  std::size_t incomplete = 0;  ///< liquors that lack a channel
  std::size_t unsolvable = 0;  ///< liquors whose numbers contradict each other
};

/// What is being done, for a line on stderr.
struct LoadProgress {
  enum class Stage { File, Solving } stage = Stage::File;
  std::string file;          ///< Stage::File: the one just stored
  std::size_t done = 0;      ///< files stored, or liquors settled
  std::size_t total = 0;     ///< files given; 0 while solving (the list grows)
};

/// Each file is one transaction; all pending liquors are solved afterwards on `threads` threads. The
/// caller holds the StoreLock and has registered the recipes. Faults: `file_unreadable` (Machine; files
/// before it are stored), `time_zone_unknown`, those of the store.
model::Result<LoadReport> loadFiles(const io::Shop& shop, const std::map<std::string, io::Recipe>& recipes,
                                    io::Store& store, const std::vector<std::filesystem::path>& files,
                                    const io::Clock& clock, unsigned threads,
                                    const std::function<void(const LoadProgress&)>& progress = {});

/// Solves every pending liquor of the store; fills the last three figures of `report`.
model::Result<model::Done> solvePending(const Plant& plant, io::Store& store, const io::Clock& clock,
                                        unsigned threads, LoadReport& report,
                                        const std::function<void(const LoadProgress&)>& progress = {});

}  // namespace tw::monitor
