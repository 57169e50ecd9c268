// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/recipe/units.hpp"

#include <fmt/format.h>

#include <array>

namespace tw::io {
namespace {

// Exact definitions: avoirdupois pound and US gallon, NIST SP 811 (from memory).
constexpr double kGramPerPound = 453.59237;
constexpr double kGramPerOunce = 28.349523125;
constexpr double kLitrePerUsGallon = 3.785411784;
constexpr double kKelvinAtZeroDegC = 273.15;
constexpr double kFahrenheitPerKelvin = 1.8;
constexpr double kFahrenheitAtZeroDegC = 32.0;

enum Base : std::size_t { kGram, kMol, kLitre, kHour, kAmpere, kMillivolt, kKelvin, kPh };

constexpr Dimension dimension(std::initializer_list<std::pair<Base, int>> exponents) {
  Dimension result;
  for (const auto& [base, exponent] : exponents) result.exponent[base] = exponent;
  return result;
}

const std::array<Unit, 25>& table() {
  static const Dimension massPerVolume = dimension({{kGram, 1}, {kLitre, -1}});
  static const Dimension amountPerVolume = dimension({{kMol, 1}, {kLitre, -1}});
  static const Dimension temperature = dimension({{kKelvin, 1}});
  static const std::array<Unit, 25> units = {{
      {"g/L", massPerVolume, 1.0, 0.0},
      {"mg/L", massPerVolume, 1e-3, 0.0},
      {"oz/gal", massPerVolume, kGramPerOunce / kLitrePerUsGallon, 0.0},
      {"mol/L", amountPerVolume, 1.0, 0.0},
      {"mmol/L", amountPerVolume, 1e-3, 0.0},
      {"g/mol", dimension({{kGram, 1}, {kMol, -1}}), 1.0, 0.0},
      {"mol", dimension({{kMol, 1}}), 1.0, 0.0},
      {"mmol", dimension({{kMol, 1}}), 1e-3, 0.0},
      {"mEq", dimension({{kMol, 1}}), 1e-3, 0.0},
      {"mV", dimension({{kMillivolt, 1}}), 1.0, 0.0},
      {"A", dimension({{kAmpere, 1}}), 1.0, 0.0},
      {"A.h", dimension({{kAmpere, 1}, {kHour, 1}}), 1.0, 0.0},
      {"%", Dimension{}, 1e-2, 0.0},
      {"degC", temperature, 1.0, 0.0},
      {"degF", temperature, 1.0 / kFahrenheitPerKelvin, -kFahrenheitAtZeroDegC / kFahrenheitPerKelvin},
      {"K", temperature, 1.0, -kKelvinAtZeroDegC},
      {"pH", dimension({{kPh, 1}}), 1.0, 0.0},
      {"mL", dimension({{kLitre, 1}}), 1e-3, 0.0},
      {"L", dimension({{kLitre, 1}}), 1.0, 0.0},
      {"US-gal", dimension({{kLitre, 1}}), kLitrePerUsGallon, 0.0},
      {"kg", dimension({{kGram, 1}}), 1e3, 0.0},
      {"g", dimension({{kGram, 1}}), 1.0, 0.0},
      {"lb", dimension({{kGram, 1}}), kGramPerPound, 0.0},
      {"h", dimension({{kHour, 1}}), 1.0, 0.0},
      {"min", dimension({{kHour, 1}}), 1.0 / 60.0, 0.0},
  }};
  return units;
}

/// +1 when `from` has a mass where `to` has an amount, -1 the other way round, 0 otherwise.
int massToAmount(const Dimension& from, const Dimension& to) {
  Dimension moved = from;
  moved.exponent[kGram] -= 1;
  moved.exponent[kMol] += 1;
  if (from.exponent[kGram] == 1 && from.exponent[kMol] == 0 && moved == to) return 1;
  moved = from;
  moved.exponent[kGram] += 1;
  moved.exponent[kMol] -= 1;
  if (from.exponent[kMol] == 1 && from.exponent[kGram] == 0 && moved == to) return -1;
  return 0;
}

}  // namespace

// The temperature scales are written out, so that fixed points come out exact (212 degF is 100 degC).
double toBase(const Unit& unit, double value) {
  if (unit.name == "degF") return (value - kFahrenheitAtZeroDegC) / kFahrenheitPerKelvin;
  return value * unit.factor + unit.offset;
}

double fromBase(const Unit& unit, double base) {
  if (unit.name == "degF") return base * kFahrenheitPerKelvin + kFahrenheitAtZeroDegC;
  return (base - unit.offset) / unit.factor;
}

std::optional<Unit> findUnit(const std::string& name) {
  if (name.empty()) return Unit{};
  for (const Unit& unit : table()) {
    if (unit.name == name) return unit;
  }
  return std::nullopt;
}

std::string unitNames() {
  std::string names;
  for (const Unit& unit : table()) names += (names.empty() ? "" : " ") + unit.name;
  return names;
}

std::string dimensionText(const Dimension& dimension) {
  static constexpr std::array<const char*, 8> names = {"g", "mol", "L", "h", "A", "mV", "K", "pH"};
  std::string above, below;
  for (std::size_t i = 0; i < names.size(); ++i) {
    const int exponent = dimension.exponent[i];
    if (exponent == 0) continue;
    std::string& side = exponent > 0 ? above : below;
    const int power = exponent > 0 ? exponent : -exponent;
    side += (side.empty() ? "" : ".") + std::string(names[i]) + (power > 1 ? fmt::format("^{}", power) : "");
  }
  if (above.empty() && below.empty()) return "no unit";
  return (above.empty() ? "1" : above) + (below.empty() ? "" : "/" + below);
}

model::Result<double> convert(double value, const std::string& from, const std::string& to,
                              double formulaMass) {
  const auto source = findUnit(from);
  const auto goal = findUnit(to);
  if (!source || !goal) {
    return model::fail(model::Fault{.code = "unit_unknown",
                                    .subject = source ? to : from,
                                    .detail = fmt::format("unit \"{}\" is not known; expected one of: {}",
                                                          source ? to : from, unitNames()),
                                    .where = {}});
  }
  if (source->name == goal->name) return value;
  if (source->dimension == goal->dimension) return fromBase(*goal, toBase(*source, value));
  const int step = massToAmount(source->dimension, goal->dimension);
  if (step != 0 && formulaMass > 0.0) {
    const double base = toBase(*source, value);
    return fromBase(*goal, step > 0 ? base / formulaMass : base * formulaMass);
  }
  return model::fail(model::Fault{
      .code = "unit_mismatch",
      .subject = from,
      .detail = fmt::format("\"{}\" cannot become \"{}\"{}", from, to,
                            step != 0 ? ": no formula mass is known to turn grams into moles" : ""),
      .where = {}});
}

}  // namespace tw::io
