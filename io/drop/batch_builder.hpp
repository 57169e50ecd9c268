// SPDX-License-Identifier: GPL-3.0-or-later
// Rows and objects of any drop file become one IncomingBatch here: times read, numbers read, burette
// inputs joined, refusals worded. Pure; used by the table and the JSON lines reader.
#pragma once

#include <cstddef>
#include <optional>
#include <string>
#include <string_view>
#include <utility>
#include <vector>

#include "io/drop/number_text.hpp"
#include "io/incoming.hpp"
#include "io/local_time.hpp"

namespace tw::io {

/// What a row says before its cells: where, when, who. Views must outlive the call only.
struct RowHead {
  int line = 0;
  std::string_view time, tank, op, source;
  std::string_view timeColumn = "time", tankColumn = "tank";  ///< headers as written
};

/// One cell of a channel: a value, or one burette input when `input` is not empty.
struct ValueCell {
  std::string_view column;  ///< header as written
  std::string_view channel, input, unit, text;
};

/// What a long row adds to its value; all optional.
struct LongExtras {
  std::string_view state, id, supersedes, reason, received, entered;
  std::optional<std::string_view> enteredUnit;
  std::vector<std::pair<std::string, std::string>> inputs;  ///< id and JSON number
  std::string inputsText;
};

struct EventText {
  std::string_view event, stock, amount, unit, lot, note;
};

class BatchBuilder {
 public:
  BatchBuilder(std::string source, const TimeZone& zone);

  /// Makes room for this many readings, so that a long file is not moved about while it grows.
  void expect(std::size_t readings);
  void setDateOrder(std::string order) { m_dateOrder = std::move(order); }
  /// Zone of the times that follow when a header named another than the shop's; nullptr = the shop's.
  void setZone(const TimeZone* zone);

  void refuse(int line, std::string_view column, std::string_view value, std::string code,
              std::string reason);
  /// The whole file cannot be read.
  void refuseFile(int line, std::string_view value, std::string reason);

  /// False when time or tank cannot be used; that is then refused and the row's cells must be skipped.
  bool beginRow(const RowHead& head);
  /// Cells of the row begun. Empty text is no value.
  void addCell(const ValueCell& cell, Decimal decimal);
  void endRow();
  /// A whole long row; begins and ends it.
  void addLong(const RowHead& head, const ValueCell& cell, const LongExtras& extras, Decimal decimal);
  void addEvent(const RowHead& head, const EventText& row, Decimal decimal);

  [[nodiscard]] IncomingBatch finish();

 private:
  struct Titration {
    Incoming reading;
    std::vector<std::pair<std::string, std::string>> numbers;  ///< id, JSON number
    bool spoilt = false;
    std::vector<std::pair<std::string, std::string>> cells;    ///< column and text, to refuse together
  };
  std::optional<NumberText> number(const ValueCell& cell, Decimal decimal);
  void addInput(const ValueCell& cell, Decimal decimal);
  void flushTitrations();
  bool addExtras(Incoming& reading, const LongExtras& extras);
  Incoming* append();
  const model::Result<StampedTime>& timeOf(std::string_view text);

  IncomingBatch m_batch;
  const TimeZone* m_shopZone;
  const TimeZone* m_zone;
  std::string m_dateOrder;
  Incoming m_row;  ///< the row begun, without a channel
  std::size_t m_firstOfRow = 0;  ///< in m_batch.readings
  std::vector<Titration> m_titrations;
  std::string m_lastTimeText;
  std::optional<model::Result<StampedTime>> m_lastTime;
  std::size_t m_moreRefused = 0, m_moreReadings = 0;
};

/// {"V":12.3,"blank":0.05}
[[nodiscard]] std::string inputsJson(const std::vector<std::pair<std::string, std::string>>& numbers);

/// At most 200 bytes, cut between characters.
[[nodiscard]] std::string shortened(std::string_view text);

}  // namespace tw::io
