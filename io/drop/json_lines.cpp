// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/drop/json_lines.hpp"

#include <algorithm>
#include <functional>

#include "io/drop/header.hpp"
#include "io/drop/json_object.hpp"
#include "io/drop/rows.hpp"

namespace tw::io {
namespace {

using Members = std::vector<JsonMember>;
using Kind = JsonMember::Kind;

constexpr int kEarlyLines = 32;
/// JSON itself fixes the point for numbers that are not in quotes.
constexpr Decimal kJsonDecimal{DecimalMark::Point, true};

bool collectInputs(const Members& members, LongExtras& extras) {
  for (const JsonMember& member : members) {
    if (member.kind != Kind::Number || member.key.empty()) return false;
    extras.inputs.emplace_back(member.key, member.text);
  }
  return true;
}

/// Reads one object into the builder.
class ObjectReader {
 public:
  ObjectReader(const Members& members, int line, Decimal quoted, BatchBuilder& out)
      : m_members(members), m_line(line), m_quoted(quoted), m_out(out) {}

  void read() {
    const bool isEvent = findMember(m_members, "event") != nullptr;
    const bool isLong = findMember(m_members, "channel") != nullptr &&
                        (findMember(m_members, "value") != nullptr ||
                         findMember(m_members, "inputs") != nullptr);
    // What `export --json` writes beside readings; the service computes results itself.
    if (!isLong && findMember(m_members, "recipe_sha256") != nullptr) return;
    const TableShape shape = isEvent  ? TableShape::Events
                             : isLong ? TableShape::Long
                                      : TableShape::Wide;
    if (shape == TableShape::Wide) return readWide();
    refuseUnknown(shape);
    if (shape == TableShape::Events) return readEvent();
    readLong();
  }

 private:
  [[nodiscard]] std::string_view text(std::string_view key) const {
    const JsonMember* member = findMember(m_members, key);
    return member == nullptr ? std::string_view{} : trimmed(member->text);
  }
  /// The text under either name; the service's own answers use the longer ones.
  [[nodiscard]] std::string_view text(std::string_view key, std::string_view longer) const {
    const std::string_view plain = text(key);
    return plain.empty() ? text(longer) : plain;
  }
  [[nodiscard]] RowHead head() const {
    return {m_line, text("time", "sampled_at"), text("tank"), text("operator"), text("source"), "time", "tank"};
  }
  [[nodiscard]] Decimal decimalOf(const JsonMember& member) const {
    return member.kind == Kind::Number ? kJsonDecimal : m_quoted;
  }
  [[nodiscard]] Decimal decimalOf(std::string_view key) const {
    const JsonMember* member = findMember(m_members, key);
    return member == nullptr ? m_quoted : decimalOf(*member);
  }

  void refuseUnknown(TableShape shape) {
    for (const JsonMember& member : m_members) {
      const ColumnName name = readColumnName(member.key);
      const bool longer = name.name == "sampled_at" || name.name == "received_at";
      if (member.kind != Kind::Null && !longer && fieldOf(name, shape) == Field::Unknown) {
        m_out.refuse(m_line, member.key, member.text, "column_unknown", "no field of this name");
      }
    }
  }

  void readWide() {
    if (!m_out.beginRow(head())) return;
    readChannels(m_members, true);
    m_out.endRow();
  }

  void readChannels(const Members& members, bool outermost) {
    std::vector<std::string> seen;
    for (const JsonMember& member : members) {
      const ColumnName name = readColumnName(member.key);
      const Field field = fieldOf(name, TableShape::Wide);
      if (std::find(seen.begin(), seen.end(), name.name) != seen.end()) {
        m_out.refuse(m_line, member.key, member.text, "column_twice", "this name was given before");
        continue;
      }
      seen.push_back(name.name);
      if (outermost && name.name == "values" && member.kind == Kind::Object) {
        readChannels(member.members, false);
      } else if (field == Field::Reading || field == Field::Input) {
        readChannel(member, name);
      } else if (field == Field::Nameless) {
        m_out.refuse(m_line, member.key, member.text, "column_unknown", "a value without a name");
      }
    }
  }

  void readChannel(const JsonMember& member, const ColumnName& name) {
    if (member.kind == Kind::Other) {
      m_out.refuse(m_line, member.key, member.text, "not_a_number",
                   "expected a number, {value, unit} or burette inputs");
    } else if (member.kind != Kind::Object) {
      m_out.addCell({member.key, name.channel, name.input, name.unit, member.text}, decimalOf(member));
    } else {
      readNested(member, name);
    }
  }

  /// {value, unit}, or burette inputs by their ids.
  void readNested(const JsonMember& member, const ColumnName& name) {
    const JsonMember* value = findMember(member.members, "value");
    const JsonMember* unit = findMember(member.members, "unit");
    const bool hasUnit = unit != nullptr && unit->kind == Kind::Text;
    const std::string_view unitText = hasUnit ? std::string_view(unit->text) : name.unit;
    if (value != nullptr) {
      m_out.addCell({member.key, name.channel, {}, unitText, value->text}, decimalOf(*value));
    }
    for (const JsonMember& input : member.members) {
      if (&input == value || &input == unit) continue;
      const std::string column = member.key + '.' + input.key;
      if (input.kind == Kind::Object || input.kind == Kind::Other || input.key.empty()) {
        m_out.refuse(m_line, column, input.text, "not_a_number", "expected a number");
        continue;
      }
      m_out.addCell({column, name.channel, input.key, {}, input.text}, decimalOf(input));
    }
  }

  void readEvent() {
    m_out.addEvent(head(),
                   {text("event"), text("stock"), text("amount"), text("unit"), text("lot"), text("note")},
                   decimalOf("amount"));
  }

  void readLong() {
    const std::string channelText(text("channel"));
    const ColumnName name = readColumnName(channelText);
    LongExtras extras;
    extras.state = text("state");
    extras.id = text("id");
    extras.supersedes = text("supersedes");
    extras.reason = text("reason");
    extras.received = text("received", "received_at");
    extras.entered = text("entered");
    const JsonMember* enteredUnit = findMember(m_members, "entered_unit");
    if (enteredUnit != nullptr && enteredUnit->kind == Kind::Text) extras.enteredUnit = enteredUnit->text;
    if (!readInputs(extras)) return;
    const std::string_view channel = name.input.empty() ? std::string_view(channelText) : name.channel;
    m_out.addLong(head(), {"value", channel, name.input, text("unit"), text("value")}, extras,
                  decimalOf("value"));
  }

  bool readInputs(LongExtras& extras) {
    const JsonMember* inputs = findMember(m_members, "inputs");
    if (inputs == nullptr || inputs->kind == Kind::Null) return true;
    if (inputs->kind == Kind::Text) return readInputsText(inputs->text, m_line, extras, m_out);
    if (inputs->kind != Kind::Object || !collectInputs(inputs->members, extras)) {
      m_out.refuse(m_line, "inputs", inputs->text, "inputs_unreadable", "expected an object of numbers");
      return false;
    }
    extras.inputsText = inputsJson(extras.inputs);
    return true;
  }

  const Members& m_members;
  int m_line;
  Decimal m_quoted;
  BatchBuilder& m_out;
};

/// Walks text by lines (CR, LF or CRLF).
class LineReader {
 public:
  explicit LineReader(std::string_view text) : m_text(text) {}
  bool next(std::string_view& line, int& number) {
    if (m_at >= m_text.size()) return false;
    const std::size_t end = std::min(m_text.find_first_of("\r\n", m_at), m_text.size());
    line = trimmed(m_text.substr(m_at, end - m_at));
    number = ++m_line;
    m_at = end + (m_text.compare(end < m_text.size() ? end : m_text.size(), 2, "\r\n") == 0 ? 2 : 1);
    return true;
  }

 private:
  std::string_view m_text;
  std::size_t m_at = 0;
  int m_line = 0;
};

using OnObject = std::function<void(std::string_view object, int line)>;

constexpr std::string_view kBlanks = " \t\r\n";

/// Position behind the opening brace of `{"readings": [...], "results": [...]}`; npos for anything else.
std::size_t insideOfExport(std::string_view text) {
  const auto skip = [&](std::size_t at, std::string_view word) {
    at = text.find_first_not_of(kBlanks, at);
    return at != std::string_view::npos && text.compare(at, word.size(), word) == 0 ? at + word.size()
                                                                                    : std::string_view::npos;
  };
  const std::size_t inside = skip(0, "{");
  for (const std::string_view key : {"\"readings\"", "\"results\""}) {
    const std::size_t behindKey = inside == std::string_view::npos ? inside : skip(inside, key);
    const std::size_t colon = behindKey == std::string_view::npos ? behindKey : skip(behindKey, ":");
    if (colon != std::string_view::npos && skip(colon, "[") != std::string_view::npos) return inside;
  }
  return std::string_view::npos;
}

/// Objects one after the other, over any number of lines, with or without an array or an export's object
/// around them.
class ObjectScanner {
 public:
  ObjectScanner(std::string_view text, BatchBuilder& out) : m_text(text), m_out(out) {
    const std::size_t inside = insideOfExport(text);
    m_wrapped = inside != std::string_view::npos;
    while (m_wrapped && m_at < inside) advance();
  }

  void each(const OnObject& onObject) {
    while (m_at < m_text.size()) {
      const char c = m_text[m_at];
      if (m_wrapped && (c == ':' || c == '}')) {
        advance();
      } else if (m_wrapped && c == '"') {
        skipKey();
      } else if (c == '{') {
        const int line = m_line;
        const std::size_t begin = m_at;
        if (!skipObject()) {
          m_out.refuse(line, {}, m_text.substr(begin), "json_unreadable", "an object that never ends");
          return;
        }
        onObject(m_text.substr(begin, m_at - begin), line);
      } else if (c == ' ' || c == '\t' || c == ',' || c == '[' || c == ']' || c == '\n' || c == '\r') {
        advance();
      } else {
        refuseLine();
      }
    }
  }

 private:
  void advance() {
    const char c = m_text[m_at];
    if (c == '\n' || (c == '\r' && m_text.compare(m_at, 2, "\r\n") != 0)) ++m_line;
    ++m_at;
  }
  void skipKey() {
    do advance();
    while (m_at < m_text.size() && m_text[m_at] != '"' && m_text[m_at] != '\n');
    if (m_at < m_text.size()) advance();
  }
  bool skipObject() {
    std::size_t depth = 0;
    bool quoted = false;
    while (m_at < m_text.size()) {
      const char c = m_text[m_at];
      advance();
      if (quoted) {
        if (c == '\\' && m_at < m_text.size()) advance();
        if (c == '"') quoted = false;
      } else if (c == '"') {
        quoted = true;
      } else if (c == '{') {
        ++depth;
      } else if (c == '}' && --depth == 0) {
        return true;
      }
    }
    return false;
  }
  void refuseLine() {
    const std::size_t end = std::min(m_text.find_first_of("\r\n", m_at), m_text.size());
    m_out.refuse(m_line, {}, m_text.substr(m_at, end - m_at), "json_unreadable", "expected an object");
    m_at = end;
  }

  std::string_view m_text;
  BatchBuilder& m_out;
  std::size_t m_at = 0;
  int m_line = 1;
  bool m_wrapped = false;
};

bool spansLines(std::string_view text) {
  if (insideOfExport(text) != std::string_view::npos) return true;
  LineReader lines(text);
  std::string_view line;
  int number = 0;
  while (lines.next(line, number)) {
    if (line.empty() || line.front() == '#') continue;
    return line.front() == '[' || (line.front() == '{' && line.back() != '}');
  }
  return false;
}

}  // namespace

bool looksLikeJson(std::string_view text) {
  LineReader lines(text);
  std::string_view line;
  int number = 0, full = 0;
  while (full < kEarlyLines && lines.next(line, number)) {
    if (line.empty() || line.front() == '#') continue;
    ++full;
    if (line.front() == '{') return true;
    if (full == 1 && line.front() == '[') return true;
  }
  return false;
}

bool readInputsText(std::string_view text, int line, LongExtras& extras, BatchBuilder& out) {
  if (text.empty()) return true;
  const auto members = readJsonObject(text);
  if (!members || !collectInputs(*members, extras)) {
    out.refuse(line, "inputs", text, "inputs_unreadable", "expected a JSON object of numbers");
    return false;
  }
  extras.inputsText = text;
  return true;
}

void readJson(std::string_view text, const std::string& decimalHint, BatchBuilder& out) {
  // Numbers in quotes: each says its mark itself or is refused; the hint settles the rest.
  const Decimal quoted = DecimalEvidence{}.decide(decimalHint);
  const OnObject onObject = [&](std::string_view object, int line) {
    const auto members = readJsonObject(object);
    if (!members) {
      out.refuse(line, {}, object, "json_unreadable", "not a JSON object");
      return;
    }
    ObjectReader(*members, line, quoted, out).read();
  };
  if (spansLines(text)) return ObjectScanner(text, out).each(onObject);
  LineReader lines(text);
  std::string_view line;
  int number = 0;
  while (lines.next(line, number)) {
    if (!line.empty() && line.front() != '#') onObject(line, number);
  }
}

}  // namespace tw::io
