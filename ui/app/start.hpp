// SPDX-License-Identifier: GPL-3.0-or-later
// From a parsed command line to a running desk.
#pragma once

#include <string>

#include "ui/app/options.hpp"
#include "ui/client/shop_data.hpp"

namespace tw::ui {

/// Which display the program may use.
struct Display {
  bool offscreen = false;  ///< select Qt's offscreen platform
  std::string refusal;     ///< not empty: there is no display for the interactive form
};

/// `hasScreen`: DISPLAY or WAYLAND_DISPLAY is set; `platformChosen`: QT_QPA_PLATFORM is set.
[[nodiscard]] Display chooseDisplay(bool snapshot, bool hasScreen, bool platformChosen);

/// Parses, builds everything, runs the event loop and answers the exit status: 0 done, 1 input, 2 usage,
/// 3 the service or the disk failed. Messages go to stderr as `tankward: WHERE: MESSAGE`.
[[nodiscard]] int runDesk(int argc, char** argv, const ShopData::Clock& clock);

}  // namespace tw::ui
