// SPDX-License-Identifier: GPL-3.0-or-later
// How far a closed liquor is from its first sludge, in each direction of the contract.
// EQUATIONS.md section 6.
#pragma once

#include <array>
#include <optional>
#include <vector>

#include "model/closed_liquor.hpp"
#include "model/liquor.hpp"

namespace tw::model {

struct Margins {
  std::array<MarginSet, kMarginCount> byKind;
  /// metal_gain of each component with isMetal but the main one, in system order.
  std::vector<std::optional<Margin>> secondMetalGain;
};

/// All margins of the liquor, up to the line. A margin is null where no liquor in its range reaches the
/// line, where the search meets an infeasible liquor first, or where it is switched off. While any solid of
/// role `sludge` is past its line every margin is null. Moves `liquor`; its closed values stay.
Margins marginsOf(ClosedLiquor& liquor);

/// The components that are metals, the main one first.
std::vector<ComponentIndex> metalsOf(const ChemicalSystem& system);

}  // namespace tw::model
