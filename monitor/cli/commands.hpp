// SPDX-License-Identifier: GPL-3.0-or-later
// The commands of the program `tankward` (FORMATS section 6). Each takes its parsed options and the
// streams to write to, and answers the exit status: 0 done, 1 the input is wrong, 3 the machine failed
// (2, a wrong command line, is answered by the parser in cli.cpp).
#pragma once

#include <filesystem>
#include <iosfwd>
#include <optional>
#include <string>
#include <vector>

#include "io/clock.hpp"
#include "model/result.hpp"

namespace tw::monitor::cli {

struct Streams {
  std::ostream& out;
  std::ostream& err;
};

/// One line a fault on `err`: `tankward: FILE:LINE: message`. Answers the exit status of the worst kind.
int report(Streams& streams, const model::Faults& faults);
int report(Streams& streams, const model::Fault& fault);

struct SolveOptions {
  std::filesystem::path recipe, constants;
  std::string reading;  ///< 'copper=22.1,ammonia=85 g/L,ph=10.2,temperature=40'; burette: 'copper.V=12.3'
  bool json = false;
};
int solve(const SolveOptions& options, Streams& streams);

struct SweepOptions {
  SolveOptions solve;
  std::string over;  ///< ph | temperature | ligand[:NAME] | metal | dilution
  double from = 0.0, to = 0.0;
  int steps = 2;
};
int sweep(const SweepOptions& options, Streams& streams);

struct CheckOptions {
  std::vector<std::filesystem::path> paths;
  bool list = false;
};
int check(const CheckOptions& options, Streams& streams);

int serve(const std::filesystem::path& config, const io::Clock& clock, Streams& streams);

struct LoadOptions {
  std::filesystem::path config;
  std::vector<std::filesystem::path> files;
};
int load(const LoadOptions& options, const io::Clock& clock, Streams& streams);

struct AdoptOptions {
  std::filesystem::path config;
  std::string tank, person, reason;
};
/// Takes a changed recipe file into use for one tank.
int adopt(const AdoptOptions& options, const io::Clock& clock, Streams& streams);

struct ExportOptions {
  std::filesystem::path config;
  std::string tank, since;
  bool json = false;
};
int exportRows(const ExportOptions& options, Streams& streams);

struct DemoOptions {
  std::filesystem::path dir;
  int days = 30;
  unsigned long seed = 1;
  std::string end;  ///< RFC 3339; empty = now, cut to the hour
};
int demo(const DemoOptions& options, const io::Clock& clock, Streams& streams);

/// Parses `arguments` (without the program's name) and runs the command; answers the exit status.
int run(const std::vector<std::string>& arguments, const io::Clock& clock, Streams& streams);

}  // namespace tw::monitor::cli
