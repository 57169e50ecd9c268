// SPDX-License-Identifier: GPL-3.0-or-later
// Brings a constant as its row states it to zero ionic strength and then to the bath's temperature.
// The replacement of OH^- by Kw(T) comes after both and belongs to the layout (model/layout.hpp).
#pragma once

#include <vector>

#include "model/system.hpp"

namespace tw::model {

/// Sum of nu z^2 over products minus reactants of the row as written (Eq. 7): for a species
/// z^2 - sum nu z^2 of what it is made from, OH^- counted with z^2 = 1.
[[nodiscard]] double dzSquaredOfFormation(const Species& species, const std::vector<Component>& components);
/// The same for a solid: sum nu z^2 of the ions it gives.
[[nodiscard]] double dzSquaredOfDissolution(const Reaction& dissolution,
                                            const std::vector<Component>& components);

/// lg K at I = 0 and t_C (degC) from the row's lg K at (T_C, I): first Eq. 6 with A at the row's T_C
/// (skipped for `Conditional`), then Eq. 8. A row without dH keeps its value. T_C must be in 0..100 degC
/// where the row has I > 0.
[[nodiscard]] double lgKAt(const Constant& K, double dzSquared, ActivityModel model, double t_C);

/// True when lgKAt had no enthalpy to work with although the temperatures differ.
[[nodiscard]] bool keptAsWritten(const Constant& K, double t_C);

}  // namespace tw::model
