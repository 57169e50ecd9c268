// SPDX-License-Identifier: GPL-3.0-or-later
// Serial lines as text: a pure reader fed with bytes, testable without a port (FORMATS section 5).
#pragma once

#include <optional>
#include <string>
#include <string_view>
#include <vector>

#include "io/recipe/shop.hpp"

namespace tw::io {

struct FrameValue {
  std::string channel, text, unit;  ///< unit empty = the channel's
  double value = 0.0;
};

struct FrameOutcome {
  std::vector<FrameValue> values;
  std::string fault;   ///< empty = good; "checksum", "unreadable", "too_long", "columns"
  std::string line;    ///< the raw line, printable characters only
};

/// Splits a byte stream into lines (CR, LF, CRLF; at most 256 bytes; control characters dropped) and
/// reads each; empty lines say nothing. Partial lines wait for their end. A line longer than 256 bytes
/// is one outcome "too_long", and reading goes on behind its end.
class FrameReader {
 public:
  explicit FrameReader(const SerialPort& settings) : m_settings(settings) {}
  std::vector<FrameOutcome> feed(std::string_view bytes);
  /// Forgets a partial line (timeout, reconnect).
  void reset();
  /// True while a line has begun and not ended.
  [[nodiscard]] bool hasPartial() const { return !m_partial.empty() || m_overlong; }

 private:
  SerialPort m_settings;
  std::string m_partial;
  bool m_overlong = false;
};

/// One line without its end: `named` (`ph=10.21 temperature=41.5`, `ph 10.21 pH; temperature 41.5 degC`),
/// `columns` or `pattern` (named groups are channels), each with an optional `*hh` = XOR of the bytes
/// before the star: checked when present, required when settings.checksum is "xor". Channel names come
/// back in lower case. A frame with one unreadable number is unreadable as a whole: noise spares nothing.
FrameOutcome readFrame(const SerialPort& settings, std::string_view line);

}  // namespace tw::io
