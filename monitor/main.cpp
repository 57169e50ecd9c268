// SPDX-License-Identifier: GPL-3.0-or-later
#include <exception>
#include <iostream>
#include <string>
#include <vector>

#include "io/clock.hpp"
#include "monitor/cli/commands.hpp"

int main(int argc, char** argv) {
  constexpr int kMachineFailed = 3;
  const auto clock = tw::io::systemClock();
  tw::monitor::cli::Streams streams{std::cout, std::cerr};
  try {
    const int status = tw::monitor::cli::run({argv + 1, argv + argc}, *clock, streams);
    std::cout.flush();
    if (!std::cout) {
      std::cerr << "tankward: output_failed: standard output could not be written\n";
      return kMachineFailed;
    }
    return status;
  } catch (const std::exception& error) {
    std::cerr << "tankward: internal_error: " << error.what() << "\n";
    return kMachineFailed;
  }
}
