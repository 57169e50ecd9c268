// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/recipe/formula.hpp"

#include <fmt/format.h>

#include <cctype>
#include <charconv>
#include <cmath>
#include <optional>
#include <string_view>

namespace tw::io {
namespace {

// Standard atomic weights, IUPAC/CIAAW abridged table 2021, from memory; 0 = no stable isotope.
const std::map<std::string, double, std::less<>>& atomicWeights() {
  static const std::map<std::string, double, std::less<>> table = {
      {"H", 1.008},   {"He", 4.0026}, {"Li", 6.94},   {"Be", 9.0122}, {"B", 10.81},   {"C", 12.011},
      {"N", 14.007},  {"O", 15.999},  {"F", 18.998},  {"Ne", 20.180}, {"Na", 22.990}, {"Mg", 24.305},
      {"Al", 26.982}, {"Si", 28.085}, {"P", 30.974},  {"S", 32.06},   {"Cl", 35.45},  {"Ar", 39.95},
      {"K", 39.098},  {"Ca", 40.078}, {"Sc", 44.956}, {"Ti", 47.867}, {"V", 50.942},  {"Cr", 51.996},
      {"Mn", 54.938}, {"Fe", 55.845}, {"Co", 58.933}, {"Ni", 58.693}, {"Cu", 63.546}, {"Zn", 65.38},
      {"Ga", 69.723}, {"Ge", 72.630}, {"As", 74.922}, {"Se", 78.971}, {"Br", 79.904}, {"Kr", 83.798},
      {"Rb", 85.468}, {"Sr", 87.62},  {"Y", 88.906},  {"Zr", 91.224}, {"Nb", 92.906}, {"Mo", 95.95},
      {"Tc", 0.0},    {"Ru", 101.07}, {"Rh", 102.91}, {"Pd", 106.42}, {"Ag", 107.87}, {"Cd", 112.41},
      {"In", 114.82}, {"Sn", 118.71}, {"Sb", 121.76}, {"Te", 127.60}, {"I", 126.90},  {"Xe", 131.29},
      {"Cs", 132.91}, {"Ba", 137.33}, {"La", 138.91}, {"Ce", 140.12}, {"Pr", 140.91}, {"Nd", 144.24},
      {"Pm", 0.0},    {"Sm", 150.36}, {"Eu", 151.96}, {"Gd", 157.25}, {"Tb", 158.93}, {"Dy", 162.50},
      {"Ho", 164.93}, {"Er", 167.26}, {"Tm", 168.93}, {"Yb", 173.05}, {"Lu", 174.97}, {"Hf", 178.49},
      {"Ta", 180.95}, {"W", 183.84},  {"Re", 186.21}, {"Os", 190.23}, {"Ir", 192.22}, {"Pt", 195.08},
      {"Au", 196.97}, {"Hg", 200.59}, {"Tl", 204.38}, {"Pb", 207.2},  {"Bi", 208.98}, {"Th", 232.04},
      {"U", 238.03},
  };
  return table;
}

bool isUpper(char c) { return c >= 'A' && c <= 'Z'; }
bool isLower(char c) { return c >= 'a' && c <= 'z'; }
bool isDigit(char c) { return c >= '0' && c <= '9'; }

using Elements = std::map<std::string, double>;

/// Recursive descent over: part ('·' part)*; part = count? item+; item = (symbol | '(' item+ ')') count?.
/// A word or abbreviation that is no element makes the whole name opaque.
class FormulaParser {
 public:
  explicit FormulaParser(std::string_view text) : m_text(text) {}

  /// The reason it failed, or nullopt.
  std::optional<std::string> run(Elements& elements, bool& opaque) {
    part(elements);
    while (!m_error && m_at < m_text.size() && dot()) part(elements);
    if (!m_error && m_at < m_text.size()) m_error = fmt::format("unexpected \"{}\"", m_text.substr(m_at));
    opaque = m_opaque;
    return m_error;
  }

 private:
  // The hydrate dot; a plain full stop counts only before water, since "Cu(OH)1.5" is a number.
  bool hydrateDotHere() const {
    if (m_text.substr(m_at).starts_with("\xC2\xB7")) return true;
    if (m_at >= m_text.size() || m_text[m_at] != '.') return false;
    std::size_t next = m_at + 1;
    while (next < m_text.size() && isDigit(m_text[next])) ++next;
    return m_text.substr(next).starts_with("H2O");
  }
  bool dot() {
    if (!hydrateDotHere()) return false;
    m_at += m_text[m_at] == '.' ? 1 : 2;
    return true;
  }

  double count() {
    const std::size_t start = m_at;
    while (m_at < m_text.size() && (isDigit(m_text[m_at]) || (m_text[m_at] == '.' && !hydrateDotHere())))
      ++m_at;
    if (m_at == start) return 1.0;
    double value = 0.0;
    const auto digits = m_text.substr(start, m_at - start);
    const auto [end, code] = std::from_chars(digits.data(), digits.data() + digits.size(), value);
    if (code != std::errc{} || end != digits.data() + digits.size() || value <= 0.0) {
      m_error = fmt::format("\"{}\" is no count", digits);
    }
    return value;
  }

  void part(Elements& elements) {
    const double times = count();
    Elements inside;
    items(inside, false);
    for (const auto& [symbol, atoms] : inside) elements[symbol] += times * atoms;
  }

  void items(Elements& elements, bool nested) {
    const std::size_t start = m_at;
    while (!m_error && m_at < m_text.size() && m_text[m_at] != ')' && !hydrateDotHere()) item(elements);
    if (!m_error && m_at == start) m_error = nested ? "empty parentheses" : "no formula";
  }

  void item(Elements& elements) {
    Elements inside;
    const char c = m_text[m_at];
    if (c == '(') {
      ++m_at;
      if (++m_depth > kDeepest) m_error = "it is nested too deep";
      if (!m_error) items(inside, true);
      --m_depth;
      if (m_error) return;
      if (m_at >= m_text.size()) {
        m_error = "a parenthesis is not closed";
        return;
      }
      ++m_at;
    } else if (isUpper(c)) {
      symbol(inside);
    } else if (isLower(c)) {
      word();
    } else {
      m_error = fmt::format("\"{}\" belongs to no name", c);
      return;
    }
    const double times = count();
    for (const auto& [symbol, atoms] : inside) elements[symbol] += times * atoms;
  }

  void symbol(Elements& elements) {
    const auto& known = atomicWeights();
    if (m_at + 1 < m_text.size() && isLower(m_text[m_at + 1]) && known.contains(m_text.substr(m_at, 2))) {
      elements[std::string(m_text.substr(m_at, 2))] += 1.0;
      m_at += 2;
      return;
    }
    if (known.contains(m_text.substr(m_at, 1))) {
      elements[std::string(m_text.substr(m_at, 1))] += 1.0;
    } else {
      m_opaque = true;
    }
    ++m_at;
  }

  void word() {
    m_opaque = true;
    while (m_at < m_text.size() && (isLower(m_text[m_at]) || m_text[m_at] == '-' || m_text[m_at] == '_'))
      ++m_at;
  }

  // Far deeper than any formula, shallow enough for the stack.
  static constexpr int kDeepest = 20;

  std::string_view m_text;
  std::size_t m_at = 0;
  int m_depth = 0;
  bool m_opaque = false;
  std::optional<std::string> m_error;
};

model::Unexpected<model::Fault> bad(const std::string& text, const std::string& reason) {
  return model::fail(model::Fault{
      .code = "bad_formula",
      .subject = text,
      .detail =
          fmt::format("\"{}\" is no name of a species: {}; expected for example Cu(NH3)4^2+", text, reason),
      .where = {}});
}

/// nullopt = not `^` digits? sign. A first digit of 0 is no magnitude.
std::optional<int> parseCharge(std::string_view tail) {
  if (tail.empty()) return std::nullopt;
  const char sign = tail.back();
  if (sign != '+' && sign != '-') return std::nullopt;
  tail.remove_suffix(1);
  int magnitude = 1;
  if (!tail.empty()) {
    if (!isDigit(tail.front()) || tail.front() == '0' || tail.size() > 2) return std::nullopt;
    const auto [end, code] = std::from_chars(tail.data(), tail.data() + tail.size(), magnitude);
    if (code != std::errc{} || end != tail.data() + tail.size()) return std::nullopt;
  }
  return sign == '+' ? magnitude : -magnitude;
}

}  // namespace

model::Result<Formula> parseFormula(const std::string& text) {
  Formula formula;
  formula.text = text;
  std::string_view body = text;
  if (const auto caret = text.find('^'); caret != std::string::npos) {
    body = std::string_view(text).substr(0, caret);
    const auto charge = parseCharge(std::string_view(text).substr(caret + 1));
    if (!charge) return bad(text, "a charge is ^, then digits if above one, then + or -");
    formula.charge = *charge;
  }
  if (body.empty()) return bad(text, "it is empty");
  if (auto reason = FormulaParser(body).run(formula.elements, formula.opaque)) return bad(text, *reason);
  if (formula.opaque) formula.elements.clear();
  return formula;
}

std::string formulaOfSolid(const std::string& id) { return id.substr(0, id.find(' ')); }

double molarMass(const Formula& formula) {
  if (formula.opaque) return 0.0;
  double mass = 0.0;
  for (const auto& [symbol, atoms] : formula.elements) {
    const double weight = atomicWeights().at(symbol);
    if (weight == 0.0) return 0.0;
    mass += atoms * weight;
  }
  return mass;
}

}  // namespace tw::io
