// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/drop/waiting_files.hpp"

namespace tw::io {

void WaitingFiles::beingWritten(const std::string& name) {
  gone(name);
  m_written.insert(name);
}

void WaitingFiles::closed(const std::string& name, const FileStamp& stamp, Time now) {
  gone(name);
  m_settling[name] = {stamp, now};
}

void WaitingFiles::found(const std::string& name, const FileStamp& stamp, Time now) {
  const bool known = m_written.count(name) != 0 || m_settling.count(name) != 0 || m_completeAt.count(name) != 0;
  if (!known) m_settling[name] = {stamp, now};
}

void WaitingFiles::complete(const std::string& name, const FileStamp& stamp) {
  gone(name);
  queue(name, stamp);
}

void WaitingFiles::queue(const std::string& name, const FileStamp& stamp) {
  m_complete.emplace(stamp.modified_ns, name);
  m_completeAt[name] = stamp.modified_ns;
}

void WaitingFiles::gone(const std::string& name) {
  m_written.erase(name);
  m_settling.erase(name);
  const auto at = m_completeAt.find(name);
  if (at == m_completeAt.end()) return;
  m_complete.erase({at->second, name});
  m_completeAt.erase(at);
}

void WaitingFiles::clear() {
  m_written.clear();
  m_settling.clear();
  m_complete.clear();
  m_completeAt.clear();
}

std::optional<WaitingFiles::Time> WaitingFiles::dueAt() const {
  std::optional<Time> due;
  for (const auto& [name, state] : m_settling) {
    const Time at = state.since + m_settle;
    if (!due || at < *due) due = at;
  }
  return due;
}

std::optional<std::string> WaitingFiles::next() {
  if (m_complete.empty()) return std::nullopt;
  std::string name = m_complete.begin()->second;
  m_complete.erase(m_complete.begin());
  m_completeAt.erase(name);
  return name;
}

}  // namespace tw::io
