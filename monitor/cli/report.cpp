// SPDX-License-Identifier: GPL-3.0-or-later
#include <algorithm>
#include <ostream>

#include "monitor/cli/commands.hpp"

namespace tw::monitor::cli {

int report(Streams& streams, const model::Faults& faults) {
  int status = 0;
  for (const model::Fault& fault : faults) {
    streams.err << "tankward: ";
    if (!fault.where.empty()) streams.err << fault.where << ": ";
    streams.err << fault.code;
    if (!fault.subject.empty()) streams.err << " '" << fault.subject << "'";
    if (!fault.detail.empty()) streams.err << ": " << fault.detail;
    streams.err << "\n";
    status = std::max(status, static_cast<int>(fault.kind));
  }
  return status;
}

int report(Streams& streams, const model::Fault& fault) { return report(streams, model::Faults{fault}); }

}  // namespace tw::monitor::cli
