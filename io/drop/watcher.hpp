// SPDX-License-Identifier: GPL-3.0-or-later
// A watched folder: hands over each complete file once, and files it away when it has been stored.
#pragma once

#include <filesystem>
#include <functional>
#include <memory>
#include <string>

#include "io/clock.hpp"
#include "io/incoming.hpp"
#include "io/loop.hpp"
#include "io/recipe/shop.hpp"

namespace tw::io {

/// inotify with a rescan at start, on overflow and every ten seconds (shares of other machines send no
/// events). A file is complete when renamed into place, or closed by its writer and then unchanged for
/// settle_ms; one that was found without an event only needs the latter. Complete files come in order of
/// modification time, then name. One file at a time is outstanding; the next is read when the one before
/// has been filed. Links, folders and other odd things are left alone, a file over 64 MiB is refused
/// whole. All calls and callbacks on the loop's thread; destroy before the loop.
class DropWatcher {
 public:
  /// `onFile` gets path and bytes and must lead to exactly one call of filed(); `onState(up, reason)`
  /// tells when the folder cannot be watched and when it can again (retried with back-off).
  DropWatcher(Loop& loop, const Clock& clock, const DropFolder& folder,
              std::function<void(std::filesystem::path, std::string bytes)> onFile,
              std::function<void(bool up, std::string reason)> onState);
  ~DropWatcher();

  void start();
  void stop();
  /// The outstanding file is durable (or wholly refused): it moves to `taken/` (a name clash gets a UTC
  /// suffix; a wholly refused file to `refused/`); refused cells are written to `refused/` as a copy
  /// with a `.why.txt` naming line, column, value, reason.
  void filed(const std::filesystem::path& file, const IncomingBatch& batch);
  /// The store could not take it now: the file stays and is offered again after `retry`.
  void postponed(const std::filesystem::path& file, std::chrono::milliseconds retry);

 private:
  struct Impl;
  std::shared_ptr<Impl> m_impl;  ///< handlers under way keep it
};

}  // namespace tw::io
