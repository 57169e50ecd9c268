// SPDX-License-Identifier: GPL-3.0-or-later
// The shared safety table (FORMATS section 8): what is said where a person acts, and which kinds of
// stock never go into a tank with which hazard. A recipe's author names keys and never writes the text.
//
// The texts are common practice; they remind and never replace local codes, safety data sheets and
// trained, licensed practice.
#pragma once

#include <string>
#include <vector>

namespace tw::io {

struct Caution {
  std::string key, title, text;
};

/// Every caution, in the order of FORMATS.
[[nodiscard]] const std::vector<Caution>& cautions();
[[nodiscard]] const Caution* findCaution(const std::string& key);
[[nodiscard]] std::vector<std::string> cautionKeys();
/// Said with every caution, once: who decides.
[[nodiscard]] const std::string& cautionFooter();

/// "acid", "base", "oxidiser", "ammonium", "cyanide", "reducer", "salt", "water".
[[nodiscard]] const std::vector<std::string>& stockKinds();

enum class KindVerdict { Caution, Refuse };
/// A kind of stock that meets a hazard of the tank.
struct KindRule {
  std::string kind, hazard;
  KindVerdict verdict = KindVerdict::Caution;
  std::string reason;  ///< one sentence
};
/// All rules.
[[nodiscard]] const std::vector<KindRule>& kindRules();
/// Those that apply to a stock of these kinds in a tank with these hazards; refusals first.
[[nodiscard]] std::vector<KindRule> kindRulesFor(const std::vector<std::string>& kinds,
                                                 const std::vector<std::string>& hazards);

}  // namespace tw::io
