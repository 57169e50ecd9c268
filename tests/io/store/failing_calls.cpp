// SPDX-License-Identifier: GPL-3.0-or-later
#include "tests/io/store/failing_calls.hpp"

#include <dlfcn.h>
#include <sys/types.h>
#include <unistd.h>

#include <atomic>
#include <cerrno>

namespace {

using tw::io::test::FailWay;

std::atomic<int> g_left = 0;  ///< calls until the failure; 0 = switched off
std::atomic<bool> g_reached = false;
std::atomic<FailWay> g_way = FailWay::Once;

/// True when this call has to fail; errno is set then.
bool failsNow() {
  if (g_reached && g_way == FailWay::FromThen) {
    errno = ENOSPC;
    return true;
  }
  if (g_left == 0 || --g_left != 0) return false;
  g_reached = true;
  if (g_way == FailWay::Die) ::_exit(tw::io::test::kDied);
  errno = g_way == FailWay::Once ? EIO : ENOSPC;
  return true;
}

template <class Function>
Function next(const char* symbol) {
  return reinterpret_cast<Function>(::dlsym(RTLD_NEXT, symbol));
}

}  // namespace

namespace tw::io::test {

void failCall(int nth, FailWay way) {
  g_way = way;
  g_reached = false;
  g_left = nth;
}

bool failureReached() { return g_reached; }

}  // namespace tw::io::test

extern "C" {

ssize_t pwrite64(int fd, const void* bytes, size_t size, off64_t offset) {
  static const auto real = next<ssize_t (*)(int, const void*, size_t, off64_t)>("pwrite64");
  return failsNow() ? -1 : real(fd, bytes, size, offset);
}

// Only counted: what a process had written outlives its death without a sync, and these tests are many.
int fdatasync(int) { return failsNow() ? -1 : 0; }

int ftruncate64(int fd, off64_t size) noexcept {
  static const auto real = next<int (*)(int, off64_t)>("ftruncate64");
  return failsNow() ? -1 : real(fd, size);
}

}  // extern "C"
