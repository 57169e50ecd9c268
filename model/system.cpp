// SPDX-License-Identifier: GPL-3.0-or-later
#include "model/system.hpp"

#include <array>

namespace tw::model {
namespace {

// In the order of MarginKind; the words travel on the wire.
constexpr std::array<const char*, kMarginCount> kMarginNames = {
    "ph_up", "ph_down", "ligand_loss", "metal_gain", "warming", "cooling", "dilution"};

}  // namespace

const char* name(MarginKind kind) { return kMarginNames.at(static_cast<std::size_t>(kind)); }

std::optional<MarginKind> marginKind(const std::string& name) {
  for (std::size_t i = 0; i < kMarginCount; ++i) {
    if (name == kMarginNames[i]) return static_cast<MarginKind>(i);
  }
  return std::nullopt;
}

}  // namespace tw::model
