// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/recipe/worksheet.hpp"

#include <fmt/format.h>

#include <charconv>
#include <cmath>
#include <optional>
#include <string_view>

#include "io/recipe/suggestion.hpp"

namespace tw::io {
namespace {

using model::Fault;
using Names = std::map<std::string, Quantity>;

bool isDigit(char c) { return c >= '0' && c <= '9'; }
bool isLetter(char c) { return (c >= 'a' && c <= 'z') || (c >= 'A' && c <= 'Z') || c == '_'; }
bool isNameChar(char c) { return isLetter(c) || isDigit(c); }

/// Recursive descent: sum = product (('+'|'-') product)*; product = factor (('*'|'/') factor)*;
/// factor = '-' factor | number | name | '(' sum ')'.
class ExpressionParser {
 public:
  ExpressionParser(std::string_view text, const Names& names) : m_text(text), m_names(names) {}

  model::Result<Evaluation> run() {
    const Quantity result = sum();
    skipBlanks();
    if (!m_fault && m_at < m_text.size()) bad(fmt::format("unexpected \"{}\"", m_text.substr(m_at)));
    if (m_fault) return model::fail(*m_fault);
    return Evaluation{result, m_used};
  }

 private:
  // Deep enough for any worksheet, shallow enough for the stack.
  static constexpr int kDeepest = 100;

  void skipBlanks() {
    while (m_at < m_text.size() && (m_text[m_at] == ' ' || m_text[m_at] == '\t' || m_text[m_at] == '\n'))
      ++m_at;
  }
  bool take(char c) {
    skipBlanks();
    if (m_fault || m_at >= m_text.size() || m_text[m_at] != c) return false;
    ++m_at;
    return true;
  }
  Quantity bad(const std::string& reason) {
    if (!m_fault) {
      m_fault = Fault{.code = "bad_expression",
                      .subject = std::string(m_text),
                      .detail = fmt::format("\"{}\" cannot be worked out: {}", m_text, reason),
                      .where = {}};
    }
    return {};
  }

  Quantity sum() {
    Quantity left = product();
    while (!m_fault) {
      const bool plus = take('+');
      if (!plus && !take('-')) break;
      const Quantity right = product();
      if (m_fault) break;
      if (left.dimension != right.dimension) {
        m_fault = Fault{.code = "unit_mismatch",
                        .subject = std::string(m_text),
                        .detail = fmt::format("\"{}\" {} {} {} {}", m_text, plus ? "adds" : "subtracts",
                                              dimensionText(right.dimension), plus ? "to" : "from",
                                              dimensionText(left.dimension)),
                        .where = {}};
        break;
      }
      left.value += plus ? right.value : -right.value;
    }
    return left;
  }

  Quantity product() {
    Quantity left = factor();
    while (!m_fault) {
      const bool times = take('*');
      if (!times && !take('/')) break;
      const Quantity right = factor();
      left.value = times ? left.value * right.value : left.value / right.value;
      for (std::size_t i = 0; i < left.dimension.exponent.size(); ++i) {
        left.dimension.exponent[i] += times ? right.dimension.exponent[i] : -right.dimension.exponent[i];
      }
    }
    return left;
  }

  Quantity factor() {
    if (++m_depth > kDeepest) return bad("it is nested too deep");
    Quantity value;
    skipBlanks();
    if (m_at >= m_text.size()) {
      bad("it ends where a value is expected");
    } else if (take('-')) {
      value = factor();
      value.value = -value.value;
    } else if (take('(')) {
      value = sum();
      if (!m_fault && !take(')')) bad("a parenthesis is not closed");
    } else if (isDigit(m_text[m_at]) || m_text[m_at] == '.') {
      value = number();
    } else if (isLetter(m_text[m_at])) {
      value = name();
    } else {
      bad(fmt::format("unexpected \"{}\"", m_text[m_at]));
    }
    --m_depth;
    return value;
  }

  Quantity number() {
    Quantity result;
    const char* begin = m_text.data() + m_at;
    const auto [end, code] = std::from_chars(begin, m_text.data() + m_text.size(), result.value);
    if (code != std::errc{}) return bad("a number cannot be read");
    m_at += static_cast<std::size_t>(end - begin);
    return result;
  }

  Quantity name() {
    const std::string_view rest = m_text.substr(m_at);
    std::string found;
    for (const auto& [known, value] : m_names) {
      const bool ends =
          rest.size() == known.size() || !isNameChar(rest[std::min(known.size(), rest.size() - 1)]);
      if (known.size() > found.size() && rest.starts_with(known) && ends) found = known;
    }
    if (found.empty()) return unknown(rest);
    m_at += found.size();
    m_used.insert(found);
    return m_names.at(found);
  }

  Quantity unknown(std::string_view rest) {
    std::size_t length = 0;
    while (length < rest.size() && isNameChar(rest[length])) ++length;
    const std::string word(rest.substr(0, length));
    std::vector<std::string> known;
    for (const auto& [name, value] : m_names) known.push_back(name);
    m_fault = Fault{.code = "unknown_name",
                    .subject = word,
                    .detail = fmt::format("\"{}\" in \"{}\" is no input, constant or channel{}", word, m_text,
                                          didYouMean(word, known)),
                    .where = {}};
    return {};
  }

  std::string_view m_text;
  const Names& m_names;
  std::size_t m_at = 0;
  int m_depth = 0;
  std::set<std::string> m_used;
  std::optional<Fault> m_fault;
};

std::optional<Quantity> inBase(double value, const std::string& unitName) {
  const auto unit = findUnit(unitName);
  if (!unit) return std::nullopt;
  return Quantity{toBase(*unit, value), unit->dimension};
}

model::Unexpected<Fault> failed(const Channel& channel, const std::string& code, const std::string& detail) {
  return model::fail(Fault{.code = code, .subject = channel.id, .detail = detail, .where = {}});
}

/// The value of one input, as given or by default.
model::Result<double> inputValue(const Channel& channel, const WorksheetInput& input,
                                 const std::map<std::string, double>& given) {
  const auto found = given.find(input.id);
  if (found == given.end()) {
    if (input.defaultValue) return *input.defaultValue;
    return failed(channel, "missing_input",
                  fmt::format("{} of {} is missing ({})", input.id, channel.id, input.unit));
  }
  const double value = found->second;
  const bool limited = input.plausibleLow < input.plausibleHigh;
  if (!std::isfinite(value) || (limited && (value < input.plausibleLow || value > input.plausibleHigh))) {
    return failed(channel, "implausible_input",
                  fmt::format("{} of {} is {} {}; expected {} to {}", input.id, channel.id, value, input.unit,
                              input.plausibleLow, input.plausibleHigh));
  }
  return value;
}

}  // namespace

model::Result<Evaluation> evaluateExpression(const std::string& expression, const Names& names) {
  return ExpressionParser(expression, names).run();
}

Names worksheetNames(const Worksheet& worksheet, const std::vector<Channel>& channels,
                     const std::string& ownChannel) {
  Names names;
  const auto add = [&](const std::string& name, const std::string& unit) {
    if (const auto known = findUnit(unit)) names[name] = {1.0, known->dimension};
  };
  for (const Channel& channel : channels) {
    if (channel.id != ownChannel) add(channel.id, channel.unit);
  }
  for (const WorksheetConstant& constant : worksheet.constants) add(constant.name, constant.unit);
  for (const WorksheetInput& input : worksheet.inputs) add(input.id, input.unit);
  return names;
}

model::Result<double> evaluateWorksheet(const Recipe& recipe, const Channel& channel,
                                        const std::map<std::string, double>& inputs,
                                        const ChannelValues& values) {
  if (!channel.worksheet) {
    return failed(channel, "no_worksheet", fmt::format("channel {} has no worksheet", channel.id));
  }
  const Worksheet& sheet = *channel.worksheet;
  Names names = worksheetNames(sheet, recipe.channels, channel.id);
  std::set<std::string> inputIds;
  for (const WorksheetInput& input : sheet.inputs) {
    inputIds.insert(input.id);
    const auto value = inputValue(channel, input, inputs);
    if (!value) return model::fail(value.error());
    names[input.id] = inBase(*value, input.unit).value_or(Quantity{*value, {}});
  }
  for (const auto& [id, value] : inputs) {
    if (inputIds.contains(id)) continue;
    return failed(channel, "unknown_input",
                  fmt::format("{} has no input \"{}\"; expected {}", channel.id, id,
                              listed({inputIds.begin(), inputIds.end()})));
  }
  std::set<std::string> constants;
  for (const WorksheetConstant& constant : sheet.constants) {
    constants.insert(constant.name);
    if (!inputIds.contains(constant.name)) {
      names[constant.name] = inBase(constant.value, constant.unit).value_or(Quantity{constant.value, {}});
    }
  }
  std::set<std::string> absent;
  for (const Channel& other : recipe.channels) {
    if (other.id == channel.id || inputIds.contains(other.id) || constants.contains(other.id)) continue;
    const auto found = values.find(other.id);
    if (found == values.end()) {
      absent.insert(other.id);
    } else {
      names[other.id] = inBase(fromCanonical(other, found->second), other.unit).value_or(Quantity{});
    }
  }
  const auto worked = evaluateExpression(sheet.expression, names);
  if (!worked) return model::fail(worked.error());
  for (const std::string& name : worked->used) {
    if (absent.contains(name)) {
      return failed(channel, "missing_channel",
                    fmt::format("the worksheet of {} needs the value of {}", channel.id, name));
    }
  }
  const auto unit = findUnit(channel.unit);
  const double inUnit = unit ? fromBase(*unit, worked->result.value) : worked->result.value;
  if (!std::isfinite(inUnit)) {
    return failed(channel, "not_a_number", fmt::format("the worksheet of {} divides by zero", channel.id));
  }
  return toCanonical(channel, inUnit);
}

}  // namespace tw::io
