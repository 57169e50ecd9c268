// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/drop/watcher.hpp"

#include <fcntl.h>
#include <sys/inotify.h>
#include <sys/stat.h>
#include <unistd.h>

#include <algorithm>
#include <array>
#include <boost/asio/buffer.hpp>
#include <boost/asio/posix/stream_descriptor.hpp>
#include <boost/asio/post.hpp>
#include <boost/asio/steady_timer.hpp>
#include <cerrno>
#include <cstring>
#include <optional>
#include <system_error>
#include <utility>

#include "io/drop/filing.hpp"
#include "io/drop/waiting_files.hpp"
#include "io/log.hpp"
#include "io/loop_asio.hpp"

namespace tw::io {

namespace asio = boost::asio;
namespace fs = std::filesystem;
using boost::system::error_code;
using std::chrono::milliseconds;

namespace {

/// One file is read into memory at once.
constexpr std::uint64_t kLargestFile = 64ULL * 1024 * 1024;
constexpr milliseconds kFirstRetry{200};
constexpr milliseconds kLongestRetry{10'000};
/// Shares of other machines send no events.
constexpr milliseconds kRescan{10'000};
/// An empty file that a scan finds may just have been begun.
constexpr milliseconds kEmptyPatience{60'000};

constexpr std::uint32_t kEvents = IN_MODIFY | IN_CLOSE_WRITE | IN_MOVED_TO | IN_MOVED_FROM | IN_DELETE |
                                  IN_DELETE_SELF | IN_MOVE_SELF | IN_ONLYDIR;

/// nullopt for anything but a plain file; links are not followed, so that nobody can have another
/// program's files copied about.
std::optional<FileStamp> stampOf(const fs::path& file) {
  struct stat info {};
  if (::lstat(file.c_str(), &info) != 0 || !S_ISREG(info.st_mode)) return std::nullopt;
  return FileStamp{info.st_ino, static_cast<std::uint64_t>(info.st_size),
                   std::int64_t{info.st_mtim.tv_sec} * 1'000'000'000 + info.st_mtim.tv_nsec};
}

/// The whole file, or the error number.
int readWhole(const fs::path& file, std::uint64_t size, std::string& bytes) {
  const int fd = ::open(file.c_str(), O_RDONLY | O_CLOEXEC | O_NOFOLLOW | O_NONBLOCK);
  if (fd < 0) return errno;
  bytes.resize(size + 1);  // one more, to see that it has not grown
  std::size_t got = 0;
  int error = 0;
  while (got < bytes.size()) {
    const ssize_t step = ::read(fd, bytes.data() + got, bytes.size() - got);
    if (step < 0 && errno == EINTR) continue;
    if (step < 0) error = errno;
    if (step <= 0) break;
    got += static_cast<std::size_t>(step);
  }
  ::close(fd);
  bytes.resize(got);
  return error;
}

}  // namespace

struct DropWatcher::Impl : std::enable_shared_from_this<DropWatcher::Impl> {
  Impl(Loop& owner, const Clock& source, const DropFolder& chosen,
       std::function<void(fs::path, std::string)> file, std::function<void(bool, std::string)> state)
      : context(owner.impl().context),
        clock(source),
        folder(chosen.path),
        onFile(std::move(file)),
        onState(std::move(state)),
        waiting(milliseconds{std::max(chosen.settle_ms, 0)}),
        descriptor(context),
        retryTimer(context),
        rescanTimer(context),
        settleTimer(context),
        filingTimer(context),
        pauseTimer(context),
        stopwatch(context) {}

  struct Outstanding {
    fs::path path;
    FileStamp stamp;
    std::optional<Verdict> verdict;  ///< filing has failed so far
  };

  /// A clock that only goes forward, whatever is done to the time of day.
  milliseconds monotonic() {
    stopwatch.expires_after(milliseconds{0});
    return std::chrono::duration_cast<milliseconds>(stopwatch.expiry().time_since_epoch());
  }

  // --- watching ---------------------------------------------------------------------------------

  void open() {
    if (!running) return;
    const auto usable = prepareDropFolder(folder);
    if (!usable) return lose(usable.error().detail);
    const int fd = ::inotify_init1(IN_NONBLOCK | IN_CLOEXEC);
    if (fd < 0) return lose(std::string("cannot watch the folder: ") + std::strerror(errno));
    if (::inotify_add_watch(fd, folder.c_str(), kEvents) < 0) {
      const int error = errno;
      ::close(fd);
      return lose(std::string("cannot watch the folder: ") + std::strerror(error));
    }
    struct stat info {};
    if (::stat(folder.c_str(), &info) == 0) watchedInode = info.st_ino;
    descriptor.assign(fd);
    ++generation;
    watching = true;
    retry = kFirstRetry;
    sayState();
    read();
    scan();
  }

  void lose(std::string reason) {
    closeWatch();
    watchFault = std::move(reason);
    sayState();
    if (!running) return;
    retryTimer.expires_after(retry);
    retry = std::min(2 * retry, kLongestRetry);
    retryTimer.async_wait([self = shared_from_this()](const error_code& error) {
      if (!error) self->open();
    });
  }

  void closeWatch() {
    ++generation;
    watching = false;
    rescanTimer.cancel();
    settleTimer.cancel();
    waiting.clear();
    error_code ignored;
    if (descriptor.is_open()) descriptor.close(ignored);
  }

  void read() {
    descriptor.async_read_some(
        asio::buffer(events),
        [self = shared_from_this(), mine = generation](const error_code& error, std::size_t size) {
          if (!self->running || mine != self->generation) return;
          if (error) return self->lose("cannot watch the folder: " + error.message());
          self->takeEvents(size);
          if (self->running && mine == self->generation) self->read();
        });
  }

  void takeEvents(std::size_t size) {
    for (std::size_t at = 0; at + sizeof(inotify_event) <= size;) {
      inotify_event event;
      std::memcpy(&event, events.data() + at, sizeof event);
      const std::string name(events.data() + at + sizeof event,
                             ::strnlen(events.data() + at + sizeof event, event.len));
      at += sizeof event + event.len;
      if ((event.mask & (IN_DELETE_SELF | IN_MOVE_SELF | IN_UNMOUNT | IN_IGNORED)) != 0) {
        return lose("the folder was moved, deleted or unmounted");
      }
      if ((event.mask & IN_Q_OVERFLOW) != 0) {
        log(LogLevel::Info, "drop_rescan", {{"folder", folder.string()}, {"reason", "events were lost"}});
        waiting.forgetWriters();
        scan();
        if (!watching) return;
      } else if ((event.mask & IN_ISDIR) == 0 && isDropName(name)) {
        takeEvent(event.mask, name);
      }
    }
    proceed();
  }

  void takeEvent(std::uint32_t mask, const std::string& name) {
    if ((mask & IN_MODIFY) != 0) return waiting.beingWritten(name);
    if ((mask & (IN_MOVED_FROM | IN_DELETE)) != 0) return waiting.gone(name);
    const auto stamp = stampOf(folder / name);
    if (!stamp) return waiting.gone(name);
    if ((mask & IN_MOVED_TO) != 0) return waiting.complete(name, *stamp);
    waiting.closed(name, *stamp, monotonic());
  }

  void scan() {
    struct stat info {};
    if (::stat(folder.c_str(), &info) != 0 || info.st_ino != watchedInode) {
      return lose("the folder was moved, deleted or replaced");
    }
    std::error_code error;
    fs::directory_iterator entries(folder, error);
    for (; !error && entries != fs::directory_iterator(); entries.increment(error)) {
      const std::string name = entries->path().filename().string();
      if (!isDropName(name) || (outstanding && outstanding->path == entries->path())) continue;
      const auto stamp = stampOf(entries->path());
      if (stamp && !justBegun(*stamp)) waiting.found(name, *stamp, monotonic());
    }
    if (error) return lose("cannot list the folder: " + error.message());
    rescanTimer.expires_after(kRescan);
    rescanTimer.async_wait([self = shared_from_this(), mine = generation](const error_code& failure) {
      if (!failure && self->running && mine == self->generation) self->scan();
    });
    proceed();
  }

  [[nodiscard]] bool justBegun(const FileStamp& stamp) const {
    const Instant modified{std::chrono::duration_cast<milliseconds>(std::chrono::nanoseconds{stamp.modified_ns})};
    return stamp.size == 0 && clock.now() - modified < kEmptyPatience;
  }

  /// Settles what is due, offers what is complete and sets the timer for the rest.
  void proceed() {
    if (!running || !watching) return;
    waiting.settle(monotonic(), [this](const std::string& name) { return stampOf(folder / name); });
    offerNext();
    const auto due = waiting.dueAt();
    if (!due) return;
    settleTimer.expires_after(std::max(*due - monotonic(), milliseconds{1}));
    settleTimer.async_wait([self = shared_from_this()](const error_code& error) {
      if (!error) self->proceed();
    });
  }

  // --- offering and filing ----------------------------------------------------------------------

  void offerNext() {
    while (running && watching && !outstanding && !paused) {
      const auto name = waiting.next();
      if (!name) return;
      offer(*name);
    }
  }

  void offer(const std::string& name) {
    const fs::path path = folder / name;
    const auto stamp = stampOf(path);
    if (!stamp) return;
    if (stamp->size > kLargestFile) {
      outstanding = {path, *stamp, Verdict{true, 0, {{0, {}, {}, "file_too_large",
                                                      "larger than 64 MiB: split the file"}}}};
      return later([](Impl& self) { self.tryFiling(); });
    }
    std::string bytes;
    const int error = readWhole(path, stamp->size, bytes);
    if (error != 0) {
      // The next scan offers it again.
      log(LogLevel::Warning, "drop_file_unreadable", {{"file", path.string()}, {"reason", std::strerror(error)}});
      return;
    }
    const auto after = stampOf(path);
    if (!after) return;
    if (*after != *stamp || bytes.size() != stamp->size) return waiting.closed(name, *after, monotonic());
    outstanding = {path, *stamp, std::nullopt};
    later([path, kept = std::move(bytes)](Impl& self) mutable {
      if (self.outstanding && self.outstanding->path == path) self.onFile(path, std::move(kept));
    });
  }

  /// On the loop, but not inside the call that asked for it.
  template <class Work>
  void later(Work work) {
    asio::post(context, [self = shared_from_this(), work = std::move(work)]() mutable {
      if (self->running) work(*self);
    });
  }

  void filed(const fs::path& file, const IncomingBatch& batch) {
    if (!outstanding || outstanding->path != file) {
      log(LogLevel::Warning, "drop_filed_unasked", {{"file", file.string()}});
      return;
    }
    outstanding->verdict = verdictOf(batch);
    tryFiling();
  }

  void tryFiling() {
    if (!running || !outstanding || !outstanding->verdict) return;
    const fs::path path = outstanding->path;
    const auto stamp = stampOf(path);
    const auto usable = prepareDropFolder(folder);
    if (!usable) return retryFiling(usable.error().detail);
    if (!stamp) {
      log(LogLevel::Warning, "drop_file_vanished", {{"file", path.string()}});
    } else if (*stamp != outstanding->stamp) {
      // Other content by now: it is read again, and what is the same counts as a duplicate.
      log(LogLevel::Warning, "drop_file_changed", {{"file", path.string()}});
      waiting.found(path.filename().string(), *stamp, monotonic());
    } else {
      const auto done = fileAway(path, *outstanding->verdict, clock.now());
      if (!done) return retryFiling(done.error().detail);
    }
    outstanding.reset();
    filingFault.clear();
    filingRetry = kFirstRetry;
    sayState();
    later([](Impl& self) { self.proceed(); });
  }

  /// The readings are safe; only the file is in the way. It must not be read twice for that.
  void retryFiling(std::string reason) {
    filingFault = std::move(reason);
    sayState();
    filingTimer.expires_after(filingRetry);
    filingRetry = std::min(2 * filingRetry, kLongestRetry);
    filingTimer.async_wait([self = shared_from_this()](const error_code& error) {
      if (!error) self->tryFiling();
    });
  }

  void postponed(const fs::path& file, milliseconds delay) {
    if (!outstanding || outstanding->path != file) return;
    waiting.complete(file.filename().string(), outstanding->stamp);
    outstanding.reset();
    paused = true;
    pauseTimer.expires_after(delay);
    pauseTimer.async_wait([self = shared_from_this()](const error_code& error) {
      if (error || !self->running) return;
      self->paused = false;
      self->proceed();
    });
  }

  void stop() {
    running = false;
    closeWatch();
    for (asio::steady_timer* timer : {&retryTimer, &filingTimer, &pauseTimer}) timer->cancel();
    outstanding.reset();
    paused = false;
  }

  /// Says only what is new.
  void sayState() {
    if (!running) return;
    const bool up = watching && filingFault.empty();
    const std::string reason = up ? std::string() : watching ? filingFault : watchFault;
    if (stated && *stated == std::pair{up, reason}) return;
    stated = {up, reason};
    log(up ? LogLevel::Info : LogLevel::Warning, up ? "drop_up" : "drop_down",
        {{"folder", folder.string()}, {"reason", reason}});
    onState(up, reason);
  }

  asio::io_context& context;
  const Clock& clock;
  fs::path folder;
  std::function<void(fs::path, std::string)> onFile;
  std::function<void(bool, std::string)> onState;
  WaitingFiles waiting;
  asio::posix::stream_descriptor descriptor;
  asio::steady_timer retryTimer, rescanTimer, settleTimer, filingTimer, pauseTimer, stopwatch;
  alignas(inotify_event) std::array<char, 64 * 1024> events{};
  std::optional<Outstanding> outstanding;
  std::optional<std::pair<bool, std::string>> stated;
  std::string watchFault, filingFault;
  milliseconds retry = kFirstRetry, filingRetry = kFirstRetry;
  ino_t watchedInode = 0;
  std::size_t generation = 0;  ///< handlers of an earlier watch are stale
  bool running = false, watching = false, paused = false;
};

DropWatcher::DropWatcher(Loop& loop, const Clock& clock, const DropFolder& folder,
                         std::function<void(fs::path, std::string bytes)> onFile,
                         std::function<void(bool up, std::string reason)> onState)
    : m_impl(std::make_shared<Impl>(loop, clock, folder, std::move(onFile), std::move(onState))) {}

DropWatcher::~DropWatcher() { m_impl->stop(); }

void DropWatcher::start() {
  m_impl->running = true;
  asio::post(m_impl->context, [impl = m_impl] { impl->open(); });
}

void DropWatcher::stop() { m_impl->stop(); }

void DropWatcher::filed(const fs::path& file, const IncomingBatch& batch) { m_impl->filed(file, batch); }

void DropWatcher::postponed(const fs::path& file, milliseconds retry) { m_impl->postponed(file, retry); }

}  // namespace tw::io
