// SPDX-License-Identifier: GPL-3.0-or-later
#include <fcntl.h>
#include <sys/file.h>
#include <sys/stat.h>
#include <unistd.h>

#include <array>
#include <cerrno>
#include <system_error>
#include <utility>

#include "io/store/data_dir.hpp"
#include "io/store/store.hpp"

namespace tw::io {

namespace store {

model::Fault dataDirFault(const std::filesystem::path& path, const std::string& purpose, int systemError) {
  return {.code = "store_open",
          .subject = path.filename().string(),
          .detail = "could not " + purpose + ": " + std::generic_category().message(systemError),
          .where = path.string(),
          .kind = model::FaultKind::Machine};
}

model::Result<model::Done> makeDataDir(const std::filesystem::path& dataDir) {
  std::error_code error;
  std::filesystem::create_directories(dataDir, error);
  if (error) return model::fail(dataDirFault(dataDir, "make the data folder", error.value()));
  if (::chmod(dataDir.c_str(), S_IRWXU) != 0) {
    return model::fail(dataDirFault(dataDir, "close the data folder to others", errno));
  }
  return model::Done{};
}

}  // namespace store

namespace {

/// The number in the lock file, as text; empty when there is none.
std::string holder(int fd) {
  std::array<char, 32> bytes{};
  const ssize_t size = ::pread(fd, bytes.data(), bytes.size(), 0);
  std::string text(bytes.data(), size > 0 ? static_cast<std::size_t>(size) : 0);
  return text.substr(0, text.find_first_not_of("0123456789"));
}

bool writePid(int fd) {
  const std::string text = std::to_string(::getpid()) + "\n";
  return ::ftruncate(fd, 0) == 0 && ::pwrite(fd, text.data(), text.size(), 0) == static_cast<ssize_t>(text.size());
}

}  // namespace

model::Result<StoreLock> StoreLock::take(const std::filesystem::path& dataDir) {
  if (auto made = store::makeDataDir(dataDir); !made) return model::fail(std::move(made.error()));
  const std::filesystem::path file = dataDir / "lock";
  const int fd = ::open(file.c_str(), O_RDWR | O_CREAT | O_CLOEXEC, S_IRUSR | S_IWUSR);
  if (fd < 0) return model::fail(store::dataDirFault(file, "open the lock", errno));
  StoreLock lock(fd);  // closes on every way out
  if (::flock(fd, LOCK_EX | LOCK_NB) != 0) {
    const int error = errno;
    if (error != EWOULDBLOCK) return model::fail(store::dataDirFault(file, "take the lock", error));
    const std::string pid = holder(fd);
    return model::fail({.code = "store_locked",
                        .subject = pid,
                        .detail = "another service holds this data folder" +
                                  (pid.empty() ? std::string() : ": process " + pid),
                        .where = file.string(),
                        .kind = model::FaultKind::Machine});
  }
  if (!writePid(fd)) return model::fail(store::dataDirFault(file, "write the lock", errno));
  return lock;
}

StoreLock::StoreLock(StoreLock&& other) noexcept : m_fd(std::exchange(other.m_fd, -1)) {}

StoreLock& StoreLock::operator=(StoreLock&& other) noexcept {
  std::swap(m_fd, other.m_fd);
  return *this;
}

// Closing lets go of the lock; the file stays, since removing it could take it from under a successor.
StoreLock::~StoreLock() {
  if (m_fd >= 0) ::close(m_fd);
}

}  // namespace tw::io
