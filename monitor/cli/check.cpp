// SPDX-License-Identifier: GPL-3.0-or-later
// `tankward check`: every fault of recipes, constants and shop files, before they can hurt.
#include "io/recipe/check.hpp"

#include <ostream>

#include "io/recipe/shipped.hpp"
#include "monitor/cli/commands.hpp"

namespace tw::monitor::cli {

int check(const CheckOptions& options, Streams& streams) {
  std::vector<std::filesystem::path> paths = options.paths;
  if (paths.empty()) paths.push_back(io::shippedBaths());
  model::Faults faults;
  for (const std::filesystem::path& path : paths) {
    const model::Faults found = io::checkPath(path);
    faults.insert(faults.end(), found.begin(), found.end());
    if (options.list) streams.out << io::listPath(path);
  }
  if (faults.empty()) {
    if (!options.list) streams.out << "no fault found\n";
    return 0;
  }
  const int status = report(streams, faults);
  streams.err << "tankward: " << faults.size() << (faults.size() == 1 ? " fault\n" : " faults\n");
  return status;
}

}  // namespace tw::monitor::cli
