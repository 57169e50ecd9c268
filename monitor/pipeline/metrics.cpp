// SPDX-License-Identifier: GPL-3.0-or-later
#include "monitor/pipeline/metrics.hpp"

#include <fmt/format.h>

namespace tw::monitor {
namespace {

std::string escaped(const std::string& label) {
  std::string out;
  for (const char c : label) {
    if (c == '\\' || c == '"') out += '\\';
    if (c == '\n') {
      out += "\\n";
    } else {
      out += c;
    }
  }
  return out;
}

class Text {
 public:
  void head(const char* name, const char* type, const char* help) {
    m_text += fmt::format("# HELP {} {}\n# TYPE {} {}\n", name, help, name, type);
  }
  template <class T>
  void line(const std::string& name, T value) {
    m_text += fmt::format("{} {}\n", name, value);
  }
  template <class T>
  void labelled(const char* name, const char* label, const std::string& value, T number) {
    m_text += fmt::format("{}{{{}=\"{}\"}} {}\n", name, label, escaped(value), number);
  }
  std::string take() { return std::move(m_text); }

 private:
  std::string m_text;
};

}  // namespace

std::string metricsText(const Counters& counters, const Gauges& gauges) {
  Text text;
  text.head("tankward_readings_total", "counter", "Readings that came in, by what became of them");
  text.labelled("tankward_readings_total", "outcome", "accepted", counters.readingsAccepted);
  text.labelled("tankward_readings_total", "outcome", "duplicate", counters.readingsDuplicate);
  text.labelled("tankward_readings_total", "outcome", "suspicious", counters.readingsSuspicious);
  text.labelled("tankward_readings_total", "outcome", "refused", counters.readingsRefused);
  text.head("tankward_files_total", "counter", "Drop files, by what became of them");
  text.labelled("tankward_files_total", "outcome", "taken", counters.filesTaken);
  text.labelled("tankward_files_total", "outcome", "postponed", counters.filesPostponed);
  text.head("tankward_serial_skipped_total", "counter", "Serial batches lost because the store was busy");
  text.line("tankward_serial_skipped_total", counters.serialSkipped);
  text.head("tankward_results_total", "counter", "Results stored");
  text.line("tankward_results_total", counters.results);
  text.head("tankward_unsolved_total", "counter", "Complete liquors without a solution");
  text.line("tankward_unsolved_total", counters.unsolved);
  text.head("tankward_requests_total", "counter", "HTTP requests");
  text.line("tankward_requests_total", counters.requests);
  text.head("tankward_pending_liquors", "gauge", "Liquors that wait to be solved");
  text.line("tankward_pending_liquors", gauges.pendingLiquors);
  text.head("tankward_writer_backlog", "gauge", "Jobs that wait for the store");
  text.line("tankward_writer_backlog", gauges.writerBacklog);
  text.head("tankward_connections", "gauge", "Open connections");
  text.line("tankward_connections", gauges.connections);
  text.head("tankward_live_clients", "gauge", "Open WebSockets");
  text.line("tankward_live_clients", gauges.liveClients);
  text.head("tankward_alarms", "gauge", "Standing alarms by priority");
  for (const auto& [priority, count] : gauges.alarmsByPriority) {
    text.labelled("tankward_alarms", "priority", priority, count);
  }
  text.head("tankward_link_up", "gauge", "Serial ports and drop folders: 1 up, 0 lost");
  for (const auto& [link, up] : gauges.links) text.labelled("tankward_link_up", "link", link, up ? 1 : 0);
  return text.take();
}

}  // namespace tw::monitor
