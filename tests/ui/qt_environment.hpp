// SPDX-License-Identifier: GPL-3.0-or-later
// A QApplication on the offscreen platform, with time zone and locale fixed, for every test of a binary.
#pragma once

#include <functional>

namespace tw::test {

/// Makes the application once; call it first in every test that needs Qt.
void needQt();
/// Runs the event loop until `done` or `most_ms` have passed; answers done().
bool waitFor(const std::function<bool()>& done, int most_ms = 5000);

}  // namespace tw::test
