// SPDX-License-Identifier: GPL-3.0-or-later
// What a file, a serial line or a request says before anyone has judged it: the common input of the
// pipeline's intake. Text is kept as it came.
#pragma once

#include <map>
#include <optional>
#include <string>
#include <vector>

#include "io/wire/time.hpp"

namespace tw::io {

/// One cell: a value of one channel, or the burette inputs that make it.
struct Incoming {
  int line = 0;                          ///< of the file, 1-based; 0 = not from a file
  std::string column;                    ///< header of the cell, as written
  std::string tank, channel;
  StampedTime sampledAt;
  std::optional<double> value;           ///< parsed number, in `unit`; absent when `inputs` come instead
  std::string text;                      ///< as entered
  std::string unit;                      ///< as entered; empty = the channel's
  std::map<std::string, double> inputs;  ///< burette inputs by id, worksheet units
  std::map<std::string, std::string> inputUnits;  ///< by input id, only where a header gave one
  std::string inputsText;                ///< as entered: JSON object
  std::string op;                        ///< operator
  // Only from an exported file: what the store said of the row it came from.
  std::string source, state, id, supersedes, reason;
  std::optional<Instant> receivedAt;
  std::optional<std::string> enteredUnit;  ///< the unit of `text`, where it is not the unit of `value`
};

struct IncomingEvent {
  int line = 0;
  std::string tank, kind;                ///< addition dump dilution level ampere_hours note out_of_service in_service
  StampedTime at;
  std::string stock;
  std::optional<double> amount;
  std::string amountText, unit, op, lot, note;
};

/// A cell or row that was not taken, and why.
struct Refusal {
  int line = 0;
  std::string column, value, code, reason;
};

/// One file or request, sorted into what can be judged and what could not even be read.
struct IncomingBatch {
  std::string source;                    ///< "drop:<file name>", "serial:<port>", "http", "load:<file>"
  std::vector<Incoming> readings;
  std::vector<IncomingEvent> events;
  std::vector<Refusal> refused;
  bool headerReadable = true;            ///< false: the whole file is refused
};

}  // namespace tw::io
