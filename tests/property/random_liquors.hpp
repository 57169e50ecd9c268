// SPDX-License-Identifier: GPL-3.0-or-later
// Random liquors that are feasible by construction: free activities are drawn first, every amount is
// computed from them, and the analysis (whatever set_by asks for) is read off that liquor. Constants,
// names and amounts are invented; the same seed gives the same liquor.
#pragma once

#include <cstdint>
#include <optional>
#include <string>
#include <vector>

#include "model/liquor.hpp"
#include "model/system.hpp"

namespace tw::test {

struct RandomLiquor {
  std::uint64_t seed = 0;
  model::ChemicalSystem system;
  model::LiquorInput input;
  /// What this liquor exercises, e.g. "excess+per_metal/davies".
  std::vector<std::string> cells;
  /// One line that says what it is, for a failure message.
  [[nodiscard]] std::string describe() const;
};

RandomLiquor randomLiquor(std::uint64_t seed);

/// The same, where the liquor has a balance ion: its `other` made a component of its own with some total
/// (or none), a case that randomLiquor leaves out.
RandomLiquor withOtherAsComponent(RandomLiquor liquor);

/// Seeds of tests/property/regressions/seeds.txt, in file order.
std::vector<std::uint64_t> regressionSeeds();

/// Every cell that the generator can make: all set_by (with their variants) under both models.
std::vector<std::string> allCells();

}  // namespace tw::test
