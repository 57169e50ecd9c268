// SPDX-License-Identifier: GPL-3.0-or-later
// The disk of a test program: its n-th write or sync fails, or the process dies there. The calls that
// SQLite makes are replaced for the whole program, so only forked children switch this on.
#pragma once

namespace tw::io::test {

enum class FailWay {
  Once,      ///< this call fails with "input/output error", later ones work
  FromThen,  ///< this call and all later ones fail with "no space left on device"
  Die,       ///< the process ends before the call does anything
};

/// Counts writes, syncs and truncations from now on, and fails the `nth` (1 = the next).
void failCall(int nth, FailWay way);
/// True when the call that was to fail has been reached.
[[nodiscard]] bool failureReached();
/// Exit status of a process that ended by FailWay::Die.
inline constexpr int kDied = 42;

}  // namespace tw::io::test
