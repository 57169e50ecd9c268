// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/serial/link.hpp"

#include <fcntl.h>
#include <sys/file.h>
#include <termios.h>

#include <algorithm>
#include <array>
#include <boost/asio/buffer.hpp>
#include <boost/asio/serial_port.hpp>
#include <boost/asio/steady_timer.hpp>
#include <optional>
#include <utility>

#include "io/log.hpp"
#include "io/loop_asio.hpp"
#include "io/serial/condenser.hpp"
#include "io/serial/frame.hpp"

namespace tw::io {

namespace asio = boost::asio;
using boost::system::error_code;
using std::chrono::milliseconds;

namespace {

constexpr milliseconds kFirstRetry{200};
constexpr milliseconds kLongestRetry{5000};
/// Open this long without an error means up, even when the instrument is silent.
constexpr milliseconds kQuietUp{500};
/// A line that has not ended by then never will (units note, serial conventions).
constexpr milliseconds kPartialTimeout{2000};
/// So many bad lines in a row are no accident: wrong baud rate, parity or frame.
constexpr std::size_t kNoiseLines = 20;

using Port = asio::serial_port;

Port::parity parityOf(const std::string& word) {
  if (word == "even") return Port::parity(Port::parity::even);
  if (word == "odd") return Port::parity(Port::parity::odd);
  return Port::parity(Port::parity::none);
}

Port::flow_control flowOf(const std::string& word) {
  if (word == "hardware" || word == "rtscts") return Port::flow_control(Port::flow_control::hardware);
  if (word == "software" || word == "xonxoff") return Port::flow_control(Port::flow_control::software);
  return Port::flow_control(Port::flow_control::none);
}

/// Sets the line up. Only the baud rate must be right: pseudo terminals and some adapters refuse the rest.
error_code configure(Port& port, const SerialPort& settings) {
  error_code error, ignored;
  port.set_option(Port::baud_rate(static_cast<unsigned>(settings.baud)), error);
  if (error) return error;
  const auto bits = static_cast<unsigned>(std::clamp(settings.dataBits, 5, 8));
  port.set_option(Port::character_size(bits), ignored);
  port.set_option(parityOf(settings.parity), ignored);
  port.set_option(Port::stop_bits(settings.stopBits == 2 ? Port::stop_bits::two : Port::stop_bits::one),
                  ignored);
  port.set_option(flowOf(settings.flow), ignored);
  // What piled up before we listened has no known time.
  ::tcflush(port.native_handle(), TCIFLUSH);
  return {};
}

std::string openReason(const error_code& error) {
  if (error == boost::system::errc::no_such_file_or_directory) return "no such port: unplugged?";
  if (error == boost::system::errc::permission_denied) return "no permission to open the port";
  if (error == boost::system::errc::device_or_resource_busy) return "port busy: another program has it";
  if (error == boost::system::errc::inappropriate_io_control_operation) return "not a serial port";
  return "cannot open the port: " + error.message();
}

}  // namespace

struct SerialLink::Impl : std::enable_shared_from_this<SerialLink::Impl> {
  Impl(Loop& owner, const Clock& source, SerialPort chosen,
       std::function<void(IncomingBatch)> batch, std::function<void(bool, std::string)> state)
      : loop(owner),
        clock(source),
        settings(std::move(chosen)),
        onBatch(std::move(batch)),
        onState(std::move(state)),
        reader(settings),
        condenser(settings),
        retryTimer(owner.impl().context),
        quietTimer(owner.impl().context),
        partialTimer(owner.impl().context),
        dueTimer(owner.impl().context) {}

  void open() {
    if (!running) return;
    // A fresh object each time: one that failed keeps no state over.
    port.emplace(loop.impl().context);
    ++generation;
    error_code error;
    port->open(settings.port, error);
    if (error) return lose(openReason(error));
    if (::flock(port->native_handle(), LOCK_EX | LOCK_NB) != 0) {
      return lose("port busy: another program has it");
    }
    error = configure(*port, settings);
    if (error) {
      return lose("the port refuses " + std::to_string(settings.baud) + " baud: " + error.message());
    }
    ++counters.opened;
    badInARow = 0;
    reader.reset();
    waitQuiet();
    read();
  }

  void read() {
    port->async_read_some(
        asio::buffer(buffer),
        [self = shared_from_this(), mine = generation](const error_code& error, std::size_t size) {
          if (!self->running || mine != self->generation) return;
          // End of file, EIO, ENXIO, ENODEV, EBADF: all of them mean that the far end is gone.
          if (error) return self->lose("the link ended: " + error.message());
          self->retry = kFirstRetry;
          self->take(size);
          if (self->running && mine == self->generation) self->read();
        });
  }

  void take(std::size_t size) {
    const Instant now = clock.now();
    const bool behind = size == buffer.size();
    if (badInARow < kNoiseLines) setState(true, {});
    for (const FrameOutcome& frame : reader.feed({buffer.data(), size})) {
      if (!running) return;
      judge(frame);
      if (frame.fault.empty()) emit(condenser.add(now, frame, behind));
    }
    counters.skipped = condenser.skipped();
    watchPartial();
    watchDue();
  }

  void judge(const FrameOutcome& frame) {
    if (frame.fault.empty()) {
      ++counters.good;
      badInARow = 0;
      setState(true, {});
      return;
    }
    if (frame.fault == "checksum") {
      ++counters.wrongChecksum;
    } else if (frame.fault == "too_long") {
      ++counters.tooLong;
    } else {
      ++counters.unreadable;
    }
    log(LogLevel::Debug, "serial_frame_bad",
        {{"port", settings.port}, {"fault", frame.fault}, {"line", frame.line}});
    if (++badInARow >= kNoiseLines) {
      setState(false, "noise: the last " + std::to_string(kNoiseLines) +
                          " lines could not be read; check baud rate, parity and frame");
    }
  }

  void emit(std::vector<IncomingBatch> batches) {
    for (IncomingBatch& batch : batches) {
      if (running) onBatch(std::move(batch));
    }
  }

  void waitQuiet() {
    quietTimer.expires_after(kQuietUp);
    quietTimer.async_wait([self = shared_from_this(), mine = generation](const error_code& error) {
      if (error || !self->running || mine != self->generation) return;
      self->retry = kFirstRetry;
      if (self->badInARow < kNoiseLines) self->setState(true, {});
    });
  }

  void watchPartial() {
    partialTimer.cancel();
    if (!reader.hasPartial()) return;
    partialTimer.expires_after(kPartialTimeout);
    partialTimer.async_wait([self = shared_from_this(), mine = generation](const error_code& error) {
      if (error || !self->running || mine != self->generation) return;
      ++self->counters.partialTimeouts;
      self->reader.reset();
    });
  }

  /// Closes an interval although no further frame comes.
  void watchDue() {
    const auto due = condenser.dueAt();
    if (!due || due == dueSet) return;
    dueSet = due;
    dueTimer.expires_after(std::max(*due - clock.now(), milliseconds{1}));
    dueTimer.async_wait([self = shared_from_this()](const error_code& error) {
      if (error || !self->running) return;
      self->dueSet.reset();
      self->emit(self->condenser.flush(self->clock.now()));
      self->counters.skipped = self->condenser.skipped();
      if (self->running) self->watchDue();
    });
  }

  void lose(std::string reason) {
    close();
    setState(false, std::move(reason));
    if (!running) return;
    retryTimer.expires_after(retry);
    retry = std::min(2 * retry, kLongestRetry);
    retryTimer.async_wait([self = shared_from_this()](const error_code& error) {
      if (!error) self->open();
    });
  }

  void close() {
    ++generation;
    quietTimer.cancel();
    partialTimer.cancel();
    reader.reset();
    if (!port) return;
    error_code ignored;
    port->close(ignored);
  }

  /// Says only what is new.
  void setState(bool up, std::string reason) {
    if (stated && *stated == std::pair{up, reason}) return;
    stated = {up, reason};
    log(up ? LogLevel::Info : LogLevel::Warning, up ? "serial_up" : "serial_down",
        {{"port", settings.port}, {"reason", reason}});
    onState(up, std::move(reason));
  }

  Loop& loop;
  const Clock& clock;
  SerialPort settings;
  std::function<void(IncomingBatch)> onBatch;
  std::function<void(bool, std::string)> onState;
  FrameReader reader;
  Condenser condenser;
  std::optional<Port> port;
  asio::steady_timer retryTimer, quietTimer, partialTimer, dueTimer;
  std::array<char, 4096> buffer{};
  LinkCounters counters;
  std::optional<std::pair<bool, std::string>> stated;
  std::optional<Instant> dueSet;
  milliseconds retry = kFirstRetry;
  std::size_t badInARow = 0;
  std::size_t generation = 0;  ///< handlers of an earlier opening are stale
  bool running = false;
};

SerialLink::SerialLink(Loop& loop, const Clock& clock, const SerialPort& settings,
                       std::function<void(IncomingBatch)> onBatch,
                       std::function<void(bool up, std::string reason)> onState)
    : m_impl(std::make_shared<Impl>(loop, clock, settings, std::move(onBatch), std::move(onState))) {}

SerialLink::~SerialLink() { stop(); }

void SerialLink::start() {
  m_impl->running = true;
  m_impl->loop.post([impl = m_impl] { impl->open(); });
}

void SerialLink::stop() {
  m_impl->running = false;
  m_impl->retryTimer.cancel();
  m_impl->dueTimer.cancel();
  m_impl->close();
}

LinkCounters SerialLink::counters() const { return m_impl->counters; }

}  // namespace tw::io
