// SPDX-License-Identifier: GPL-3.0-or-later
#include "monitor/cli/commands.hpp"
#include "monitor/cli/open_shop.hpp"
#include "monitor/pipeline/service.hpp"

namespace tw::monitor::cli {

int serve(const std::filesystem::path& config, const io::Clock& clock, Streams& streams) {
  auto opened = openShop(config);
  if (!opened) return report(streams, opened.error());
  return monitor::serve(opened->shop, std::move(opened->recipes), clock);
}

}  // namespace tw::monitor::cli
