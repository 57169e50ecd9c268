// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/serial/frame.hpp"

#include <algorithm>
#include <optional>

#include "io/drop/number_text.hpp"
#include "io/drop/rows.hpp"
#include "io/drop/text_encoding.hpp"
#include "io/serial/frame_pattern.hpp"

namespace tw::io {
namespace {

/// No instrument's line is longer; what is, is noise or the wrong baud rate.
constexpr std::size_t kLongestLine = 256;

bool isDigit(char c) { return c >= '0' && c <= '9'; }
bool isLetter(char c) { return (c >= 'a' && c <= 'z') || (c >= 'A' && c <= 'Z'); }
bool isBlank(char c) { return c == ' ' || c == '\t'; }

/// A number at a serial line: one decimal mark, point or comma, no grouping.
std::optional<double> lineNumber(std::string_view text) {
  const bool point = text.find('.') != std::string_view::npos;
  const bool comma = text.find(',') != std::string_view::npos;
  if (point && comma) return std::nullopt;
  const NumberText number =
      readNumber(text, {comma ? DecimalMark::Comma : DecimalMark::Point, false});
  if (number.kind != NumberKind::Number) return std::nullopt;
  return number.value;
}

/// Bytes beyond ASCII that are no UTF-8 are ASCII with a parity bit that the port left in place.
std::string withoutParity(std::string_view line) {
  std::string out(line);
  if (isUtf8(line)) return out;
  for (char& c : out) c = static_cast<char>(static_cast<unsigned char>(c) & 0x7F);
  return out;
}

std::string printable(std::string_view line) {
  std::string out = withoutParity(line);
  std::erase_if(out, [](char c) {
    return c != '\t' && (static_cast<unsigned char>(c) < 0x20 || c == '\x7f');
  });
  return out;
}

std::optional<unsigned> hexDigit(char c) {
  if (isDigit(c)) return static_cast<unsigned>(c - '0');
  if (c >= 'A' && c <= 'F') return static_cast<unsigned>(c - 'A') + 10;
  if (c >= 'a' && c <= 'f') return static_cast<unsigned>(c - 'a') + 10;
  return std::nullopt;
}

enum class Checksum { Absent, Good, Wrong };

/// Takes a trailing `*hh` off and compares it.
Checksum takeChecksum(std::string_view& line) {
  std::string_view text = line;
  while (!text.empty() && isBlank(text.back())) text.remove_suffix(1);
  const std::size_t star = text.rfind('*');
  if (star == std::string_view::npos) return Checksum::Absent;
  const std::string_view digits = text.substr(star + 1);
  const auto high = digits.size() == 2 ? hexDigit(digits[0]) : std::nullopt;
  const auto low = digits.size() == 2 ? hexDigit(digits[1]) : std::nullopt;
  if (!high || !low) return Checksum::Wrong;
  unsigned sum = 0;
  for (const char c : text.substr(0, star)) sum ^= static_cast<unsigned char>(c);
  line = text.substr(0, star);
  return sum == (*high << 4 | *low) ? Checksum::Good : Checksum::Wrong;
}

struct Token {
  enum class Kind { Name, Number, Equals, Break } kind;
  std::string_view text;
};

bool startsNumber(std::string_view rest) {
  std::size_t i = 0;
  if (rest[0] == '+' || rest[0] == '-') ++i;
  while (i > 0 && i < rest.size() && isBlank(rest[i])) ++i;
  if (i < rest.size() && (rest[i] == '.' || rest[i] == ',')) ++i;
  return i < rest.size() && isDigit(rest[i]);
}

std::size_t numberLength(std::string_view rest) {
  std::size_t i = 0;
  if (rest[0] == '+' || rest[0] == '-') {
    ++i;
    while (isBlank(rest[i])) ++i;
  }
  while (i < rest.size()) {
    const char c = rest[i];
    const bool last = i + 1 >= rest.size();
    const bool mark = (c == '.' || c == ',') && !last && isDigit(rest[i + 1]);
    const bool endingPoint = c == '.' && (last || !isDigit(rest[i + 1]));
    const bool exponent = (c == 'e' || c == 'E') && !last &&
                          (isDigit(rest[i + 1]) ||
                           ((rest[i + 1] == '-' || rest[i + 1] == '+') && i + 2 < rest.size() &&
                            isDigit(rest[i + 2])));
    if (!isDigit(c) && !mark && !endingPoint && !exponent) break;
    i += exponent ? 2 : 1;
  }
  return i;
}

/// False on a character that has no place in a named frame.
bool tokenise(std::string_view line, std::vector<Token>& tokens) {
  while (!line.empty()) {
    const char c = line.front();
    std::size_t length = 1;
    if (isBlank(c)) {
      line.remove_prefix(1);
      continue;
    }
    const auto byte = static_cast<unsigned char>(c);
    if (startsNumber(line)) {
      length = numberLength(line);
      tokens.push_back({Token::Kind::Number, line.substr(0, length)});
    } else if (c == '=' || c == ':') {
      tokens.push_back({Token::Kind::Equals, line.substr(0, 1)});
    } else if (c == ';' || c == ',') {
      tokens.push_back({Token::Kind::Break, line.substr(0, 1)});
    } else if (isLetter(c) || c == '%' || c == '_' || byte >= 0x80) {
      while (length < line.size() && !isBlank(line[length]) && line[length] != '=' &&
             line[length] != ':' && line[length] != ';' && line[length] != ',') {
        ++length;
      }
      tokens.push_back({Token::Kind::Name, line.substr(0, length)});
    } else {
      return false;
    }
    line.remove_prefix(length);
  }
  return true;
}

/// `name [=] number [unit]`, over and over. A word behind a number is its unit unless a number or an
/// equals sign follows it: then it names the next channel.
bool readNamed(std::string_view line, std::vector<FrameValue>& values) {
  std::vector<Token> tokens;
  if (!tokenise(line, tokens)) return false;
  using Kind = Token::Kind;
  const auto is = [&](std::size_t i, Kind kind) { return i < tokens.size() && tokens[i].kind == kind; };
  std::size_t i = 0;
  while (i < tokens.size()) {
    if (is(i, Kind::Break)) {
      ++i;
      continue;
    }
    if (!is(i, Kind::Name)) return false;
    FrameValue value;
    value.channel = lowerCase(tokens[i++].text);
    if (is(i, Kind::Equals)) ++i;
    if (!is(i, Kind::Number)) return false;
    value.text = tokens[i].text;
    const auto number = lineNumber(tokens[i++].text);
    if (!number) return false;
    value.value = *number;
    if (is(i, Kind::Name) && !is(i + 1, Kind::Number) && !is(i + 1, Kind::Equals)) {
      value.unit = tokens[i++].text;
    }
    const bool known = std::any_of(values.begin(), values.end(),
                                   [&](const FrameValue& v) { return v.channel == value.channel; });
    if (known) return false;
    values.push_back(std::move(value));
  }
  return !values.empty();
}

std::vector<std::string_view> cells(std::string_view line, const std::string& separator) {
  std::vector<std::string_view> out;
  const bool blanks = trimmed(separator).empty() && separator.find('\t') == std::string::npos;
  while (true) {
    if (blanks) line = trimmed(line);
    const std::size_t at = blanks ? line.find_first_of(" \t") : line.find(separator);
    out.push_back(trimmed(line.substr(0, at)));
    if (at == std::string_view::npos) return out;
    line.remove_prefix(at + (blanks ? 1 : separator.size()));
  }
}

/// The fault word; empty when good. A column with an empty name is skipped, an empty cell is no value.
std::string readColumns(const SerialPort& settings, std::string_view line,
                        std::vector<FrameValue>& values) {
  const auto found = cells(line, settings.separator);
  if (found.size() != settings.columns.size()) return "columns";
  for (std::size_t i = 0; i < found.size(); ++i) {
    if (settings.columns[i].empty() || found[i].empty()) continue;
    const auto number = lineNumber(found[i]);
    if (!number) return "unreadable";
    values.push_back({settings.columns[i], std::string(found[i]), {}, *number});
  }
  return values.empty() ? "unreadable" : "";
}

bool readPattern(const SerialPort& settings, std::string_view line, std::vector<FrameValue>& values) {
  const auto groups = matchPattern(settings.pattern, line);
  if (!groups) return false;
  for (const auto& [name, text] : *groups) {
    const std::string_view digits = trimmed(text);
    if (digits.empty()) continue;
    const auto number = lineNumber(digits);
    if (!number) return false;
    values.push_back({lowerCase(name), std::string(digits), {}, *number});
  }
  return !values.empty();
}

}  // namespace

FrameOutcome readFrame(const SerialPort& settings, std::string_view line) {
  FrameOutcome outcome;
  outcome.line = printable(line);
  std::string_view text = outcome.line;
  const Checksum checksum = takeChecksum(text);
  if (checksum == Checksum::Wrong || (checksum == Checksum::Absent && settings.checksum == "xor")) {
    outcome.fault = "checksum";
    return outcome;
  }
  text = trimmed(text);
  switch (settings.frame) {
    case FrameKind::Named:
      if (!readNamed(text, outcome.values)) outcome.fault = "unreadable";
      break;
    case FrameKind::Columns: outcome.fault = readColumns(settings, text, outcome.values); break;
    case FrameKind::Pattern:
      if (!readPattern(settings, text, outcome.values)) outcome.fault = "unreadable";
      break;
  }
  if (!outcome.fault.empty()) outcome.values.clear();
  return outcome;
}

std::vector<FrameOutcome> FrameReader::feed(std::string_view bytes) {
  std::vector<FrameOutcome> outcomes;
  for (const char c : bytes) {
    const auto byte = static_cast<unsigned char>(c);
    if (c == '\n' || c == '\r') {
      if (m_overlong) {
        outcomes.push_back({{}, "too_long", printable(m_partial)});
      } else if (!trimmed(m_partial).empty()) {
        outcomes.push_back(readFrame(m_settings, m_partial));
      }
      reset();
    } else if (m_partial.size() >= kLongestLine) {
      m_overlong = true;
    } else if (c == '\t' || (byte >= 0x20 && byte != 0x7F)) {
      m_partial += c;
    }
  }
  return outcomes;
}

void FrameReader::reset() {
  m_partial.clear();
  m_overlong = false;
}

}  // namespace tw::io
