// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/views/tank/shares.hpp"

#include <algorithm>
#include <cctype>
#include <cmath>

namespace tw::ui {
namespace {

constexpr double kSmallestShown = 0.001;

bool isLower(char c) { return std::islower(static_cast<unsigned char>(c)) != 0; }
bool isDigit(char c) { return std::isdigit(static_cast<unsigned char>(c)) != 0; }

}  // namespace

int atomsIn(const std::string& formula, const std::string& element) {
  if (element.empty()) return 0;
  const std::string body = formula.substr(0, formula.find('^'));
  int atoms = 0;
  for (std::size_t at = body.find(element); at != std::string::npos; at = body.find(element, at + 1)) {
    std::size_t after = at + element.size();
    if (after < body.size() && isLower(body[after])) continue;  // "Co" is not in "Cobalt"-like words
    int count = 0;
    while (after < body.size() && isDigit(body[after])) count = 10 * count + (body[after++] - '0');
    atoms += count == 0 ? 1 : count;
  }
  return atoms;
}

std::vector<Share> metalShares(const AnalysisView& analysis, const std::string& metal, const Format& format,
                               const QString& rest) {
  const std::string element = metal.substr(0, metal.find('^'));
  double total = 0.0;
  std::vector<Share> shares;
  for (const SpeciesRow& row : analysis.species) {
    const int atoms = atomsIn(row.formula, element);
    if (atoms == 0 || row.mol_L <= 0.0) continue;
    total += atoms * row.mol_L;
    shares.push_back({formulaText(row.formula), {}, atoms * row.mol_L});
  }
  if (total <= 0.0) return {};
  std::stable_sort(shares.begin(), shares.end(), [](const Share& a, const Share& b) { return a.fraction > b.fraction; });
  double left = 0.0;
  std::vector<Share> shown;
  for (Share& share : shares) {
    share.fraction /= total;
    if (share.fraction < kSmallestShown) {
      left += share.fraction;
      continue;
    }
    share.text = format.percent(share.fraction);
    shown.push_back(share);
  }
  if (left > 0.0) shown.push_back({rest, QStringLiteral("< ") + format.percent(kSmallestShown * std::max(1.0, std::ceil(left / kSmallestShown))), left});
  return shown;
}

}  // namespace tw::ui
